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

/// Walks one run; the connection's statements are kept between runs.
class RunCheck {
 public:
  RunCheck(Connection& connection, std::int64_t run, std::int64_t closing, const Body& data, RunWalk& walk)
      : connection_(connection), run_(run), closing_(closing), data_(data), walk_(walk) {}

  std::optional<Fault> fault() {
    RowsDigest readings(reading_columns()), captures(capture_columns());
    if (auto fault = take(readings, reading_rows())) return fault;
    if (auto fault = take(captures, capture_rows())) return fault;
    walk_.readings += static_cast<std::int64_t>(readings.rows());
    walk_.captures += static_cast<std::int64_t>(captures.rows());
    if (closing_ != 0) {
      if (auto fault = proof_fault(readings, captures)) return fault;
    }
    return bytes_fault();
  }

 private:
  Fault at(std::string table, std::string row, std::string column, std::string what) const {
    return {closing_ != 0 ? closing_ : run_, std::move(table), std::move(row), std::move(column), std::move(what)};
  }

  std::optional<Fault> take(RowsDigest& digest, const Rows& rows) {
    Row row = connection_.begin(rows.select.c_str());
    for (row.values(run_); row.step();) {
      const int bad = digest.add(row);
      if (bad >= 0)
        return at(rows.table, row_name(connection_, rows, run_, digest.rows()),
                  rows.columns[static_cast<std::size_t>(bad)].name, "holds a type or value that cannot be there");
    }
    return std::nullopt;
  }

  std::optional<Fault> proof_fault(const RowsDigest& readings, const RowsDigest& captures) const {
    if (data_.text("proof") == to_hex(run_proof({run_}, readings, captures))) return std::nullopt;
    if (auto fault = tags_fault(readings, reading_rows())) return fault;
    if (auto fault = tags_fault(captures, capture_rows())) return fault;
    return at("run_closed", "run " + std::to_string(run_), "proof", "is not that of the run's readings and captures");
  }

  /// The first row and column whose tag is not the recorded one.
  std::optional<Fault> tags_fault(const RowsDigest& digest, const Rows& rows) const {
    const std::string recorded = data_.text(rows.row_tags);
    const std::size_t place = first_difference(tags_text(digest.row_tags()), recorded);
    if (place == std::string::npos) return std::nullopt;
    const std::string name = row_name(connection_, rows, run_, place);
    const std::size_t wanted = recorded.size() / (2 * sizeof(Tag));
    if (digest.rows() < wanted) return at(rows.table, name, "", "is missing, or a row before it");
    if (digest.rows() > wanted) return at(rows.table, name, "", "is a row too many");
    const std::size_t column = first_difference(tags_text(digest.column_tags()), data_.text(rows.column_tags));
    return at(rows.table, name, column < rows.columns.size() ? rows.columns[column].name : "",
              "is not what it was when the run was closed");
  }

  std::optional<Fault> bytes_fault() {
    Row row = connection_.begin(
        "SELECT c.number, c.packing, c.decoded_size, c.stored_size, c.decoded_digest, c.stored_digest, b.bytes, "
        "p.capture"
        " FROM capture AS c LEFT JOIN capture_bytes AS b ON b.capture = c.number"
        " LEFT JOIN pruned AS p ON p.capture = c.number WHERE c.run = ? ORDER BY c.number");
    for (row.values(run_); row.step();) {
      const std::string what = bytes_complaint(row);
      if (!what.empty()) return at("capture_bytes", "capture " + row.text(0), "bytes", what);
    }
    return std::nullopt;
  }

  static std::string bytes_complaint(const Row& row) {
    const bool there = !row.is_null(6), pruned = !row.is_null(7);
    if (!there) return pruned ? "" : "are missing, and no prune entry names them";
    if (pruned) return "are there although a prune entry took them away";
    if (!row.is_blob(6)) return "are not a BLOB";
    const auto stored = row.blob(6);
    if (static_cast<std::int64_t>(stored.size()) != row.integer(3)) return "are not as many as recorded";
    if (sha256(stored) != row.digest(5)) return "do not have the digest recorded for the stored bytes";
    if (row.integer(2) < 0) return "have a decoded size below zero";
    const auto decoded = unpack(row.text_view(1), stored, static_cast<std::size_t>(row.integer(2)));
    if (!decoded) return "cannot be unpacked: " + decoded.error().what();
    return sha256(*decoded) == row.digest(4) ? "" : "do not have the digest recorded for the decoded bytes";
  }

  Connection& connection_;
  std::int64_t run_, closing_;
  const Body& data_;
  RunWalk& walk_;
};

}  // namespace

RunWalk walk_runs(Connection& connection, std::int64_t first, std::int64_t last) {
  RunWalk walk;
  Row row = connection.begin(
      "SELECT o.run, c.entry, e.body FROM run_opened AS o LEFT JOIN run_closed AS c ON c.run = o.run"
      " LEFT JOIN entry AS e ON e.number = c.entry WHERE o.run BETWEEN ? AND ? ORDER BY o.run");
  for (row.values(first, last); row.step() && !walk.fault;) {
    const std::int64_t run = row.integer(0);
    const bool closed = !row.is_null(1);
    const auto body = closed ? parse_body(row.text_view(2)) : Result<Body>{Body{}};
    const Body* data = body ? body->find("data") : nullptr;
    ++walk.runs;
    walk.open_runs += !closed;
    walk.fault_run = run;
    if (closed && !data)
      walk.fault =
          Fault{row.integer(1), "run_closed", "run " + std::to_string(run), "entry", "leads to no closing entry"};
    else
      walk.fault = RunCheck(connection, run, closed ? row.integer(1) : 0, data ? *data : Body{}, walk).fault();
  }
  return walk;
}

}  // namespace probewright::db
