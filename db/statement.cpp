#include "db/statement.h"

#include <sqlite3.h>

#include <algorithm>
#include <cstring>
#include <stdexcept>

namespace probewright::db {

Row::Row(Statement& statement) : statement_(statement) {
  if (statement.in_use_) throw std::logic_error("a statement was begun while its row was in use");
  statement_.in_use_ = true;
}

Row::~Row() {
  sqlite3_reset(statement_.handle_);
  sqlite3_clear_bindings(statement_.handle_);
  statement_.in_use_ = false;
}

void Row::check(int code) {
  if (code == SQLITE_OK) return;
  raise(statement_.connection_.handle(), code, statement_.connection_.path(), sqlite3_sql(statement_.handle_));
}

void Row::bind(int place, std::nullptr_t) { check(sqlite3_bind_null(statement_.handle_, place)); }

void Row::bind(int place, std::int64_t value) { check(sqlite3_bind_int64(statement_.handle_, place, value)); }

void Row::bind(int place, double value) { check(sqlite3_bind_double(statement_.handle_, place, value)); }

void Row::bind(int place, std::string_view value) {
  const char* text = value.data() ? value.data() : "";  // a null pointer would bind NULL
  check(sqlite3_bind_text64(statement_.handle_, place, text, value.size(), SQLITE_TRANSIENT, SQLITE_UTF8));
}

void Row::bind(int place, std::span<const std::byte> value) {
  if (value.empty()) return check(sqlite3_bind_zeroblob(statement_.handle_, place, 0));
  check(sqlite3_bind_blob64(statement_.handle_, place, value.data(), value.size(), SQLITE_TRANSIENT));
}

bool Row::step() {
  const int code = sqlite3_step(statement_.handle_);
  if (code == SQLITE_ROW) return true;
  if (code == SQLITE_DONE) return false;
  check(code);
  return false;
}

bool Row::is_null(int column) const { return sqlite3_column_type(statement_.handle_, column) == SQLITE_NULL; }
bool Row::is_integer(int column) const { return sqlite3_column_type(statement_.handle_, column) == SQLITE_INTEGER; }
bool Row::is_real(int column) const { return sqlite3_column_type(statement_.handle_, column) == SQLITE_FLOAT; }
bool Row::is_text(int column) const { return sqlite3_column_type(statement_.handle_, column) == SQLITE_TEXT; }
bool Row::is_blob(int column) const { return sqlite3_column_type(statement_.handle_, column) == SQLITE_BLOB; }

std::int64_t Row::integer(int column) const { return sqlite3_column_int64(statement_.handle_, column); }

double Row::real(int column) const { return sqlite3_column_double(statement_.handle_, column); }

std::string_view Row::text_view(int column) const {
  const auto* text = reinterpret_cast<const char*>(sqlite3_column_text(statement_.handle_, column));
  if (!text) return {};
  return {text, static_cast<std::size_t>(sqlite3_column_bytes(statement_.handle_, column))};
}

std::span<const std::byte> Row::blob(int column) const {
  const auto* data = static_cast<const std::byte*>(sqlite3_column_blob(statement_.handle_, column));
  if (!data) return {};
  return {data, static_cast<std::size_t>(sqlite3_column_bytes(statement_.handle_, column))};
}

Bytes Row::bytes(int column) const {
  const auto view = blob(column);
  return {view.begin(), view.end()};
}

std::optional<double> Row::maybe_real(int column) const {
  if (is_null(column)) return std::nullopt;
  return real(column);
}

std::optional<std::string> Row::maybe_text(int column) const {
  if (is_null(column)) return std::nullopt;
  return text(column);
}

Digest Row::digest(int column) const {
  Digest digest{};
  const auto view = blob(column);
  std::copy_n(view.begin(), std::min(view.size(), digest.size()), digest.begin());
  return digest;
}

Row::Peek Row::peek(int column) const {
  // Values of a statement in one thread need no protection; sqlite.org/c3ref/value.html.
  sqlite3_value* const value = sqlite3_column_value(statement_.handle_, column);
  const auto bytes = [&] {
    const auto* data = static_cast<const char*>(sqlite3_value_blob(value));
    return std::string_view{data ? data : "", static_cast<std::size_t>(sqlite3_value_bytes(value))};
  };
  switch (sqlite3_value_type(value)) {
    case SQLITE_INTEGER:
      return {Peek::Type::integer, sqlite3_value_int64(value), 0.0, {}};
    case SQLITE_FLOAT:
      return {Peek::Type::real, 0, sqlite3_value_double(value), {}};
    case SQLITE_TEXT:
      return {Peek::Type::text, 0, 0.0, bytes()};
    case SQLITE_BLOB:
      return {Peek::Type::blob, 0, 0.0, bytes()};
    default:
      return {};
  }
}

int Row::columns() const { return sqlite3_column_count(statement_.handle_); }

Statement::Statement(Connection& connection, std::string_view sql) : connection_(connection) {
  const int code = sqlite3_prepare_v3(connection.handle(), sql.data(), static_cast<int>(sql.size()),
                                      SQLITE_PREPARE_PERSISTENT, &handle_, nullptr);
  if (code != SQLITE_OK) raise(connection.handle(), code, connection.path(), sql);
}

Statement::~Statement() { sqlite3_finalize(handle_); }

Row Statement::begin() { return Row(*this); }

}  // namespace probewright::db
