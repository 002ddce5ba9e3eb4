#include "db/chain.h"
#include "db/hex.h"
#include "db/packing.h"
#include "db/sha256.h"
#include "db/statement.h"
#include "db/walk.h"

namespace probewright::db {
namespace {

/// Readings or captures of one run, with what names a row in a fault.
struct Rows {
  const char* table;
  const char* name_column;
  const std::string& select;
  std::span<const DigestedColumn> columns;
  const char *row_tags, *column_tags;  ///< members of the closing entry
};

Rows reading_rows() {
  return {"reading", "check_slug", select_readings(), reading_columns(), "reading_row_tags", "reading_column_tags"};
}

Rows capture_rows() {
  return {"capture", "number", select_captures(), capture_columns(), "capture_row_tags", "capture_column_tags"};
}

/// Place of the first piece of `size` hexadecimal digits that differs; npos where none does.
std::size_t first_difference(std::string_view tags, std::string_view recorded) {
  constexpr std::size_t size = 2 * sizeof(Tag);
  for (std::size_t at = 0; at < std::max(tags.size(), recorded.size()); at += size)
    if (at + size > tags.size() || at + size > recorded.size() || tags.substr(at, size) != recorded.substr(at, size))
      return at / size;
  return std::string_view::npos;
}

/// Names row `place` of a run by its check or number.
std::string row_name(Connection& connection, const Rows& rows, std::int64_t run, std::size_t place) {
  std::string name = "run " + std::to_string(run);
  Statement statement(connection, "SELECT " + std::string{rows.name_column} + " FROM " + rows.table +
                                      " WHERE run = ? ORDER BY " + rows.columns.front().name + " LIMIT 1 OFFSET ?");
  Row row = statement.begin();
  if (row.values(run, static_cast<std::int64_t>(place)).step())
    return name + ", " + rows.name_column + " " + row.text(0);
  return name + ", row " + std::to_string(place + 1);
}

/// One run as its two entries' tables show it.
struct RunPlace {
  std::int64_t run = 0;
  std::int64_t closing = 0;  ///< 0: open
  Digest proof{};
};

}  // namespace

/// Walks runs one after the other and uses its memory, its hash and the connection's statements again.
class RunWalker {
 public:
  explicit RunWalker(Connection& connection) : connection_(connection) {}

  std::optional<Fault> fault(const RunPlace& place, RangeWalk& walk) {
    at_ = place;
    readings_.clear();
    captures_.clear();
    if (auto fault = take(readings_, reading_rows())) return fault;
    if (auto fault = take(captures_, capture_rows())) return fault;
    walk.readings += static_cast<std::int64_t>(readings_.rows());
    walk.captures += static_cast<std::int64_t>(captures_.rows());
    if (at_.closing != 0 && run_proof({at_.run}, readings_, captures_, hash_) != at_.proof)
      if (auto fault = proof_fault()) return fault;
    return captures_.rows() > 0 ? bytes_fault() : std::nullopt;
  }
  Connection& connection() { return connection_; }

 private:
  Fault at(std::string table, std::string row, std::string column, std::string what) const {
    return {at_.closing != 0 ? at_.closing : at_.run, std::move(table), std::move(row), std::move(column),
            std::move(what)};
  }

  std::optional<Fault> take(RowsDigest& digest, const Rows& rows) {
    Row row = connection_.begin(rows.select.c_str());
    for (row.values(at_.run); row.step();) {
      const int bad = digest.add(row);
      if (bad >= 0)
        return at(rows.table, row_name(connection_, rows, at_.run, digest.rows()),
                  rows.columns[static_cast<std::size_t>(bad)].name, "holds a type or value that cannot be there");
    }
    return std::nullopt;
  }

  /// What the closing entry says; nothing where there is none that can be read.
  std::optional<Body> closing_data() {
    Row row = connection_.begin("SELECT body FROM entry WHERE number = ?");
    if (!row.values(at_.closing).step()) return std::nullopt;
    const auto body = parse_body(row.text_view(0));
    const Body* data = body ? body->find("data") : nullptr;
    return data ? std::optional{*data} : std::nullopt;
  }

  /// The proof in the table is not that of the rows: the entry says which of them is wrong, the tags say where.
  std::optional<Fault> proof_fault() {
    const auto data = closing_data();
    const std::string run = "run " + std::to_string(at_.run);
    if (!data) return at("run_closed", run, "entry", "leads to no closing entry");
    if (data->text("proof") == to_hex(run_proof({at_.run}, readings_, captures_)))
      return at("run_closed", run, "proof", "is not what the entry says");
    if (auto fault = tags_fault(*data, reading_rows())) return fault;
    if (auto fault = tags_fault(*data, capture_rows())) return fault;
    return at("run_closed", run, "proof", "is not that of the run's readings and captures");
  }

  /// The first row and column whose tag is not the recorded one.
  std::optional<Fault> tags_fault(const Body& data, const Rows& rows) {
    RowsDigest digest(rows.columns);
    if (auto fault = take(digest, rows)) return fault;
    const std::string recorded = data.text(rows.row_tags);
    const std::size_t place = first_difference(tags_text(digest.row_tags()), recorded);
    if (place == std::string::npos) return std::nullopt;
    const std::string name = row_name(connection_, rows, at_.run, place);
    const std::size_t wanted = recorded.size() / (2 * sizeof(Tag));
    if (digest.rows() < wanted) return at(rows.table, name, "", "is missing, or a row before it");
    if (digest.rows() > wanted) return at(rows.table, name, "", "is a row too many");
    const std::size_t column = first_difference(tags_text(digest.column_tags()), data.text(rows.column_tags));
    return at(rows.table, name, column < rows.columns.size() ? rows.columns[column].name : "",
              "is not what it was when the run was closed");
  }

  std::optional<Fault> bytes_fault() {
    Row row = connection_.begin(
        "SELECT c.number, c.packing, c.decoded_size, c.stored_size, c.decoded_digest, c.stored_digest, b.bytes, "
        "p.capture"
        " FROM capture AS c LEFT JOIN capture_bytes AS b ON b.capture = c.number"
        " LEFT JOIN pruned AS p ON p.capture = c.number WHERE c.run = ? ORDER BY c.number");
    for (row.values(at_.run); row.step();) {
      const std::string what = bytes_complaint(row);
      if (!what.empty()) return at("capture_bytes", "capture " + row.text(0), "bytes", what);
    }
    return std::nullopt;
  }

  std::string bytes_complaint(const Row& row) {
    const bool there = !row.is_null(6), pruned = !row.is_null(7);
    if (!there) return pruned ? "" : "are missing, and no prune entry names them";
    if (pruned) return "are there although a prune entry took them away";
    if (!row.is_blob(6)) return "are not a BLOB";
    const auto stored = row.blob(6);
    if (static_cast<std::int64_t>(stored.size()) != row.integer(3)) return "are not as many as recorded";
    if (hash_.add(stored).finish() != row.digest(5)) return "do not have the digest recorded for the stored bytes";
    if (row.integer(2) < 0) return "have a decoded size below zero";
    const auto decoded = unpack(row.text_view(1), stored, static_cast<std::size_t>(row.integer(2)));
    if (!decoded) return "cannot be unpacked: " + decoded.error().what();
    return hash_.add(*decoded).finish() == row.digest(4) ? "" : "do not have the digest recorded for the decoded bytes";
  }

  Connection& connection_;
  RunPlace at_;
  RowsDigest readings_{reading_columns(), RowsDigest::Tags::none};
  RowsDigest captures_{capture_columns(), RowsDigest::Tags::none};
  Sha256 hash_;
};

std::shared_ptr<RunWalker> make_run_walker(Connection& connection) { return std::make_shared<RunWalker>(connection); }

std::optional<Fault> walk_runs(RunWalker& walker, std::int64_t first, std::int64_t last, RangeWalk& walk) {
  Row row = walker.connection().begin(
      "SELECT o.run, c.entry, c.proof FROM run_opened AS o LEFT JOIN run_closed AS c ON c.run = o.run"
      " WHERE o.run BETWEEN ? AND ? ORDER BY o.run");
  for (row.values(first, last); row.step();) {
    const bool closed = !row.is_null(1);
    ++walk.runs;
    walk.open_runs += !closed;
    if (auto fault = walker.fault({row.integer(0), closed ? row.integer(1) : 0, row.digest(2)}, walk)) return fault;
  }
  return std::nullopt;
}

}  // namespace probewright::db
