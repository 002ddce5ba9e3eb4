#include "db/chain.h"

#include <algorithm>
#include <bit>

#include "db/hex.h"
#include "db/sha256.h"

namespace probewright::db {
namespace {

constexpr std::array reading_fields = std::to_array<DigestedColumn>({
    {"place", Field::integer},
    {"check_slug", Field::text},
    {"value", Field::maybe_real},
    {"none_reason", Field::maybe_text},
    {"expanded_uncertainty", Field::maybe_real},
    {"unit", Field::text},
    {"lower_limit", Field::maybe_real},
    {"upper_limit", Field::maybe_real},
    {"acceptance_lower", Field::maybe_real},
    {"acceptance_upper", Field::maybe_real},
    {"margin", Field::maybe_real},
    {"conformance_probability", Field::maybe_real},
    {"ok", Field::text},
    {"definition", Field::text},
    {"cut_short", Field::flag},
});

constexpr std::array capture_fields = std::to_array<DigestedColumn>({
    {"number", Field::integer},
    {"kind", Field::text},
    {"set_label", Field::text},
    {"packing", Field::text},
    {"decoded_size", Field::integer},
    {"stored_size", Field::integer},
    {"decoded_digest", Field::digest},
    {"stored_digest", Field::digest},
});

std::string select(std::span<const DigestedColumn> columns, std::string_view table) {
  std::string sql = "SELECT ";
  for (const DigestedColumn& column : columns) sql += std::string{column.name} + ", ";
  sql.resize(sql.size() - 2);
  return sql + " FROM " + std::string{table} + " WHERE run = ? ORDER BY " + columns.front().name;
}

template <class Unsigned>
void put_big_endian(std::string& to, Unsigned value) {
  std::array<char, sizeof value> bytes;
  for (std::size_t i = 0; i < sizeof value; ++i)
    bytes[i] = static_cast<char>(value >> (8 * (sizeof value - 1 - i)) & 0xff);
  to.append(bytes.data(), bytes.size());
}

void put_integer(std::string& to, std::int64_t value) { put_big_endian(to, static_cast<std::uint64_t>(value)); }

void put_text(std::string& to, std::string_view text) {
  put_big_endian(to, static_cast<std::uint32_t>(text.size()));
  to += text;
}

/// Appends one column; false where its type or value cannot be there.
bool put(std::string& to, const Row::Peek& cell, Field field) {
  using Type = Row::Peek::Type;
  switch (field) {
    case Field::integer:
      if (cell.type != Type::integer) return false;
      put_integer(to, cell.integer);
      return true;
    case Field::text:
      if (cell.type != Type::text) return false;
      put_text(to, cell.bytes);
      return true;
    case Field::maybe_text:
      to += cell.type == Type::null ? '\0' : '\1';
      return cell.type == Type::null || put(to, cell, Field::text);
    case Field::maybe_real:
      to += cell.type == Type::null ? '\0' : '\1';
      if (cell.type == Type::null) return true;
      if (cell.type != Type::real) return false;
      put_big_endian(to, std::bit_cast<std::uint64_t>(cell.real));
      return true;
    case Field::flag:
      if (cell.type != Type::integer || (cell.integer != 0 && cell.integer != 1)) return false;
      to += static_cast<char>(cell.integer);
      return true;
    case Field::digest:
      if (cell.type != Type::blob || cell.bytes.size() != 32) return false;
      to += cell.bytes;
      return true;
  }
  return false;
}

Tag tag(Sha256& hash, std::string_view bytes) {
  const Digest digest = hash.add(bytes).finish();
  Tag first{};
  std::copy_n(digest.begin(), first.size(), first.begin());
  return first;
}

}  // namespace

std::string entry_body(const EntryHead& head, const Body& data) {
  return canonical(Body::Object{{"data", data},
                                {"kind", head.kind},
                                {"number", head.number},
                                {"recipe", recipe},
                                {"time", head.time},
                                {"who", head.who}});
}

Digest entry_hash(const Digest& previous, std::string_view body) { return Sha256{}.add(previous).add(body).finish(); }

std::span<const DigestedColumn> reading_columns() { return reading_fields; }

std::span<const DigestedColumn> capture_columns() { return capture_fields; }

const std::string& select_readings() {
  static const std::string sql = select(reading_fields, "reading");
  return sql;
}

const std::string& select_captures() {
  static const std::string sql = select(capture_fields, "capture");
  return sql;
}

void RowsDigest::clear() {
  rows_ = 0;
  bytes_.clear();
  row_tags_.clear();
  for (std::string& bytes : column_bytes_) bytes.clear();
}

int RowsDigest::add(const Row& row) {
  const std::size_t row_begin = bytes_.size();
  for (std::size_t i = 0; i < columns_.size(); ++i) {
    const std::size_t before = bytes_.size();
    if (!put(bytes_, row.peek(static_cast<int>(i)), columns_[i].field)) return static_cast<int>(i);
    if (with_tags_) column_bytes_[i].append(bytes_, before);
  }
  if (with_tags_) row_tags_.push_back(tag(*hash_, std::string_view{bytes_}.substr(row_begin)));
  ++rows_;
  return -1;
}

std::vector<Tag> RowsDigest::column_tags() const {
  std::vector<Tag> tags;
  for (const std::string& bytes : column_bytes_) tags.push_back(tag(*hash_, bytes));
  return tags;
}

Digest run_proof(RunId run, const RowsDigest& readings, const RowsDigest& captures) {
  Sha256 hash;
  return run_proof(run, readings, captures, hash);
}

Digest run_proof(RunId run, const RowsDigest& readings, const RowsDigest& captures, Sha256& hash) {
  std::string head, middle;
  put_integer(head, recipe);
  put_integer(head, run.value);
  put_integer(head, static_cast<std::int64_t>(readings.rows()));
  put_integer(middle, static_cast<std::int64_t>(captures.rows()));
  return hash.add(head).add(readings.bytes()).add(middle).add(captures.bytes()).finish();
}

std::string tags_text(std::span<const Tag> tags) {
  std::string text;
  for (const Tag& each : tags) text += hex(each);
  return text;
}

}  // namespace probewright::db
