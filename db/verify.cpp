#include "db/verify.h"

#include <algorithm>
#include <atomic>
#include <functional>
#include <iterator>
#include <memory>
#include <mutex>
#include <string_view>
#include <thread>
#include <vector>

#include "db/queries/seal.h"
#include "db/reader.h"
#include "db/schema/schema.h"
#include "db/transaction.h"
#include "db/walk.h"

namespace probewright::db {
namespace {

Fault file_fault(const Problem& problem) { return {0, "file", "", "", problem.what()}; }

/// Entries are taken by range, by as many threads as there are; of the faults the one in the lowest range counts.
class Ranges {
 public:
  Ranges(std::int64_t first, std::int64_t last, std::stop_token stop)
      : first_(first), last_(last), next_(first), stop_(std::move(stop)) {}

  /// Works until no range is left, a fault was found or the work was stopped. Any thread, with its own connection.
  /// `after_each` is called after each range.
  void work(Connection& connection, const std::function<void()>& after_each = {}) {
    std::int64_t at = 0;
    try {
      RangeWalker walker(connection);
      for (;;) {
        at = next_.fetch_add(span);
        if (at > last_ || ended_ || stop_.stop_requested()) return;
        take(at, walker.walk(at, std::min(at + span - 1, last_)));
        if (after_each) after_each();
      }
    } catch (const Error& error) {
      RangeWalk unreadable;
      unreadable.fault = file_fault(error.problem());
      take(at, unreadable);
    }
  }
  /// Entries that were walked by now. Any thread.
  std::int64_t done() const { return done_; }
  /// Runs that an earlier entry opened and that end in these entries or not at all: for a walk that does not begin at
  /// the first entry.
  void work_earlier_runs(Connection& connection) {
    std::vector<std::int64_t> runs;
    {
      Row row = connection.begin(
          "SELECT run FROM run_closed WHERE entry >= ? AND run < ? UNION ALL SELECT o.run FROM run_opened AS o"
          " WHERE o.run < ? AND NOT EXISTS (SELECT 1 FROM run_closed AS c WHERE c.run = o.run) ORDER BY 1");
      for (row.values(first_, first_, first_); row.step();) runs.push_back(row.integer(0));
    }
    RangeWalker walker(connection);
    for (const std::int64_t run : runs) {
      RangeWalk walk;
      walk.fault = walker.run_fault(run, walk);
      take(run, walk);
    }
  }
  const RangeWalk& total() const { return total_; }

 private:
  static constexpr std::int64_t span = 500;

  void take(std::int64_t range, const RangeWalk& walk) {
    const std::lock_guard lock(mutex_);
    done_ += walk.entries;
    total_.entries += walk.entries;
    total_.runs += walk.runs;
    total_.open_runs += walk.open_runs;
    total_.readings += walk.readings;
    total_.captures += walk.captures;
    if (!walk.fault) {
      if (walk.seal.entry > total_.seal.entry) total_.seal = walk.seal;
      return;
    }
    ended_ = true;
    if (total_.fault && fault_range_ <= range) return;
    total_.fault = walk.fault;
    fault_range_ = range;
    if (walk.seal.entry < range + span) total_.seal = walk.seal;
  }

  std::int64_t first_, last_;
  std::atomic<std::int64_t> next_, done_{0};
  std::atomic<bool> ended_{false};
  std::stop_token stop_;
  std::mutex mutex_;
  RangeWalk total_;
  std::int64_t fault_range_ = 0;
};

/// A connection for looking only, in the manner that the options ask for. Throws ProblemError.
std::unique_ptr<Connection> look_at(const std::string& path, const VerifyOptions& options) {
  if (!options.exclusive) {
    auto connection = open_readable(path, options.archive ? ReadFrom::archive : ReadFrom::live, options.vfs);
    connection->run("PRAGMA cache_size=-16384");  // a range of entries with all its rows stays in memory
    return connection;
  }
  auto connection = std::make_unique<Connection>(path, Access::read_write, options.vfs);
  connection->demand("locking_mode", "EXCLUSIVE", "exclusive");
  connection->run("PRAGMA query_only=1");
  return connection;
}

std::optional<Fault> layout_fault(Connection& connection) {
  const std::int64_t step = connection.ask_number("PRAGMA user_version");
  if (step < 1) return Fault{0, "file", "", "user_version", "is not the step of the layout that was written"};
  const SchemaDifference difference = schema_difference(connection, step);
  if (difference.what.empty()) return std::nullopt;
  return Fault{0, "sqlite_schema", difference.name, "sql", difference.what};
}

std::optional<Fault> printed_fault(Connection& connection, const Seal& printed, std::int64_t newest) {
  Reader reader(connection);
  const auto found = seal_at(reader, printed.entry);
  if (found && found->hash == printed.hash) return std::nullopt;
  const std::string number = std::to_string(printed.entry);
  if (!found)
    return Fault{printed.entry, "entry", number, "number",
                 "is not there: the ledger ends at entry " + std::to_string(newest) + ", before the printed seal"};
  return Fault{printed.entry, "entry", number, "hash", "is not the printed seal: the ledger was rebuilt or replaced"};
}

/// SQLite's own check looks at the pages of all trees and of the free list first, then at every row. Rows were walked
/// here already, so it is ended as soon as it comes to them: before that it would have told a fault.
std::optional<Fault> structure_fault(Connection& connection) {
  const Interrupting at_the_first_rows(connection, 1000);
  try {
    const std::string answer = connection.ask("PRAGMA integrity_check(1)");
    if (answer != "ok") return Fault{0, "file", "", "", answer};
  } catch (const Error& error) {
    if (!error.interrupted()) throw;
  }
  return std::nullopt;
}

/// Tables with indexes, whole: a row that an index does not lead to would be hidden from questions. Rows of `reading`
/// and `capture_bytes` have no way to them but the one by which they were walked.
std::optional<Fault> index_fault(Connection& connection) {
  std::vector<std::string> tables;
  {
    Row row = connection.begin(
        "SELECT DISTINCT tbl_name FROM sqlite_schema WHERE type = 'index' AND tbl_name NOT IN ('reading',"
        " 'capture_bytes') ORDER BY 1");
    while (row.step()) tables.push_back(row.text(0));
  }
  for (const std::string& table : tables)
    if (const std::string answer = connection.ask("PRAGMA integrity_check('" + table + "')"); answer != "ok")
      return Fault{0, "file", table, "", answer};
  return std::nullopt;
}

std::optional<Fault> page_fault(Connection& connection) {
  if (auto fault = structure_fault(connection)) return fault;
  return index_fault(connection);
}

/// What is left to look at when all ranges agree.
std::optional<Fault> rest_fault(Connection& connection, const VerifyOptions& options, std::int64_t newest) {
  if (auto fault = row_out_of_range(connection, options.from > 1 ? 0 : 1, newest)) return fault;
  return stray_bytes(connection);
}

/// The look at pages, by whichever thread: its fault counts only where everything else agrees, for it names no row.
class Pages {
 public:
  void look(Connection& connection) {
    try {
      fault_ = page_fault(connection);
    } catch (const Error& error) {
      fault_ = file_fault(error.problem());
    }
  }
  const std::optional<Fault>& fault() const { return fault_; }

 private:
  std::optional<Fault> fault_;
};

VerifyReport report_of(const RangeWalk& walk) {
  VerifyReport report;
  report.entries = walk.entries;
  report.seal = walk.seal;
  report.runs = walk.runs;
  report.open_runs = walk.open_runs;
  report.readings = walk.readings;
  report.captures = walk.captures;
  report.first_fault = walk.fault;
  return report;
}

/// Tells how far it is; the pages at the end count as one twentieth.
class Telling {
 public:
  Telling(const VerifyOptions& options, std::int64_t entries) : options_(options), entries_(entries) {}
  void at(std::int64_t done) const {
    if (options_.progress) options_.progress(done, entries_ + entries_ / 20 + 1);
  }
  void end() const { at(entries_ + entries_ / 20 + 1); }

 private:
  const VerifyOptions& options_;
  std::int64_t entries_;
};

VerifyReport walk_all(Connection& connection, Connection* second, const VerifyOptions& options) {
  if (auto fault = layout_fault(connection)) {
    VerifyReport report;
    report.first_fault = std::move(fault);
    return report;
  }
  const std::int64_t newest = connection.ask_number("SELECT max(number) FROM entry");
  if (newest == 0) {
    VerifyReport report;
    report.first_fault = Fault{1, "entry", "1", "number", "is missing"};
    return report;
  }
  if (newest < options.from && options.printed) {  // cut back: the seal shows it
    VerifyReport report;
    report.first_fault = printed_fault(connection, *options.printed, newest);
    if (report.first_fault) return report;
  }
  if (newest < options.from)
    throw ProblemError({"verify_from_beyond", connection.path(), {{"newest", std::to_string(newest)}}});
  const Telling telling(options, newest - options.from + 1);
  Ranges ranges(options.from, newest, options.stop);
  Pages pages;
  {
    std::jthread beside;
    if (second)
      beside = std::jthread([&] {
        pages.look(*second);
        ranges.work(*second);
      });
    if (options.from > 1) ranges.work_earlier_runs(connection);
    ranges.work(connection, [&] { telling.at(ranges.done()); });
  }
  if (!second && !options.stop.stop_requested()) pages.look(connection);
  if (options.stop.stop_requested()) throw ProblemError({"verify_stopped", connection.path()});
  VerifyReport report = report_of(ranges.total());
  const auto printed = options.printed ? printed_fault(connection, *options.printed, newest) : std::nullopt;
  if (printed && (!report.first_fault || printed->entry < report.first_fault->entry)) report.first_fault = printed;
  if (!report.first_fault) report.first_fault = rest_fault(connection, options, newest);
  if (!report.first_fault) report.first_fault = pages.fault();
  telling.end();
  return report;
}

/// True where the file is there but is not a ledger that can be read: a fault, not a reason to say nothing.
bool is_about_content(const Problem& problem) {
  constexpr std::string_view ids[] = {"ledger_not_a_ledger", "ledger_damaged", "ledger_io", "ledger_sql"};
  return std::find(std::begin(ids), std::end(ids), problem.id) != std::end(ids);
}

Body fault_body(const Fault& fault) {
  return Body::Object{{"column", fault.column},
                      {"entry", fault.entry},
                      {"row", fault.row},
                      {"table", fault.table},
                      {"what", fault.what}};
}

}  // namespace

Result<VerifyReport> verify(const std::string& path, const VerifyOptions& options) {
  try {
    const auto connection = look_at(path, options);
    refuse_foreign_file(*connection);
    const auto second = options.exclusive ? nullptr : look_at(path, options);
    const Snapshot snapshot(*connection);
    std::optional<Snapshot> second_snapshot;
    if (second) second_snapshot.emplace(*second);
    return walk_all(*connection, second.get(), options);
  } catch (const ProblemError& error) {
    if (!is_about_content(error.problem())) return error.problem();
    VerifyReport report;
    report.first_fault = file_fault(error.problem());
    return report;
  }
}

Body report_body(const VerifyReport& report) {
  return Body::Object{{"captures", report.captures},
                      {"entries", report.entries},
                      {"first_fault", report.first_fault ? fault_body(*report.first_fault) : Body{}},
                      {"ok", report.ok()},
                      {"open_runs", report.open_runs},
                      {"readings", report.readings},
                      {"runs", report.runs},
                      {"seal", to_hex(report.seal.hash)}};
}

std::optional<Fault> recent_fault(Connection& connection, std::int64_t count) {
  const std::int64_t newest = connection.ask_number("SELECT coalesce(max(number), 0) FROM entry");
  const std::int64_t from = std::max<std::int64_t>(1, newest - count + 1);
  RangeWalker walker(connection);
  if (const RangeWalk walk = walker.walk_entries(from, newest); walk.fault) return walk.fault;
  std::vector<std::int64_t> runs;
  {
    Row row = connection.begin(
        "SELECT run FROM run_closed WHERE entry >= ? UNION ALL SELECT o.run FROM run_opened AS o"
        " WHERE NOT EXISTS (SELECT 1 FROM run_closed AS c WHERE c.run = o.run)");
    for (row.values(from); row.step();) runs.push_back(row.integer(0));
  }
  RangeWalk walk;
  for (const std::int64_t run : runs)
    if (auto fault = walker.run_fault(run, walk)) return fault;
  return std::nullopt;
}

Problem altered_problem(const std::string& file, const Fault& fault) {
  const std::string place = "entry " + std::to_string(fault.entry) + ", table " + fault.table + ", " + fault.row +
                            (fault.column.empty() ? "" : ", column " + fault.column);
  return {"ledger_altered", file, {{"place", place}, {"what", fault.what}}};
}

}  // namespace probewright::db
