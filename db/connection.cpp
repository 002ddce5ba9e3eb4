#include "db/connection.h"

#include <sqlite3.h>

#include "db/statement.h"

namespace probewright::db {
namespace {

/// The path as a URI, so that mode and immutable can be said; every byte that means something in a URI is escaped.
std::string as_uri(const std::string& path, Access access) {
  static constexpr char hex[] = "0123456789abcdef";
  std::string uri = "file:";
  for (const char c : path) {
    const auto byte = static_cast<unsigned char>(c);
    if (byte > 0x20 && byte < 0x7f && c != '%' && c != '?' && c != '#') {
      uri += c;
    } else {
      uri += {'%', hex[byte >> 4], hex[byte & 15]};
    }
  }
  return access == Access::immutable ? uri + "?immutable=1" : uri;
}

int open_flags(Access access) {
  const int common = SQLITE_OPEN_URI | SQLITE_OPEN_NOMUTEX | SQLITE_OPEN_EXRESCODE;
  switch (access) {
    case Access::read_write:
      return common | SQLITE_OPEN_READWRITE;
    case Access::create_read_write:
      return common | SQLITE_OPEN_READWRITE | SQLITE_OPEN_CREATE;
    case Access::read_only:
    case Access::immutable:
      return common | SQLITE_OPEN_READONLY;
  }
  return common | SQLITE_OPEN_READONLY;
}

}  // namespace

Connection::Connection(std::string path, Access access, const std::string& vfs) : path_(std::move(path)) {
  const int code =
      sqlite3_open_v2(as_uri(path_, access).c_str(), &handle_, open_flags(access), vfs.empty() ? nullptr : vfs.c_str());
  if (code != SQLITE_OK) {
    const std::string reason = handle_ ? sqlite3_errmsg(handle_) : sqlite3_errstr(code);
    sqlite3_close_v2(handle_);
    throw Error(problem_of(code, reason, path_), code, "open");
  }
  sqlite3_db_config(handle_, SQLITE_DBCONFIG_TRUSTED_SCHEMA, 0, nullptr);
  sqlite3_db_config(handle_, SQLITE_DBCONFIG_DEFENSIVE, 1, nullptr);
  if (access == Access::read_only || access == Access::immutable) sqlite3_exec(handle_, "PRAGMA query_only=1", 0, 0, 0);
}

Connection::~Connection() {
  kept_.clear();
  sqlite3_close_v2(handle_);
}

void Connection::run(const std::string& sql) {
  const int code = sqlite3_exec(handle_, sql.c_str(), nullptr, nullptr, nullptr);
  if (code != SQLITE_OK) raise(handle_, code, path_, sql);
}

std::string Connection::ask(const std::string& sql) {
  Statement statement(*this, sql);
  Row row = statement.begin();
  std::string answer;
  if (!row.step()) return answer;
  answer = row.text(0);
  while (row.step()) {  // to the end: a pragma that writes may fail only after its answer
  }
  return answer;
}

std::int64_t Connection::ask_number(const std::string& sql) {
  Statement statement(*this, sql);
  Row row = statement.begin();
  return row.step() ? row.integer(0) : 0;
}

void Connection::demand(const std::string& pragma, std::string_view value, std::string_view wanted) {
  ask("PRAGMA " + pragma + "=" + std::string{value});
  const std::string answer = ask("PRAGMA " + pragma);
  if (answer == wanted) return;
  throw Error({"ledger_mode", path_, {{"pragma", pragma}, {"answer", answer}, {"wanted", std::string{wanted}}}},
              SQLITE_ERROR, "PRAGMA " + pragma);
}

Row Connection::begin(const char* sql) {
  auto& statement = kept_[sql];
  if (!statement) statement = std::make_unique<Statement>(*this, sql);
  return statement->begin();
}

bool Connection::in_transaction() const { return sqlite3_get_autocommit(handle_) == 0; }

Interrupting::Interrupting(Connection& connection, int steps) : connection_(connection) {
  sqlite3_progress_handler(
      connection.handle(), steps, [](void*) { return 1; }, nullptr);
}

Interrupting::~Interrupting() { sqlite3_progress_handler(connection_.handle(), 0, nullptr, nullptr); }

void Connection::wait_for_locks(int milliseconds) { sqlite3_busy_timeout(handle_, milliseconds); }

}  // namespace probewright::db
