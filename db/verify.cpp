#include "db/verify.h"

#include <algorithm>
#include <atomic>
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

/// Runs are taken by range, by as many threads as there are; the lowest run with a fault counts.
class RunRanges {
 public:
  explicit RunRanges(std::int64_t newest_run) : newest_run_(newest_run) {}

  /// Works until no range is left or a fault was found. Any thread, with its own connection.
  void work(Connection& connection) {
    try {
      for (;;) {
        const std::int64_t first = next_.fetch_add(span);
        if (first > newest_run_ || stop_) return;
        take(walk_runs(connection, first, std::min(first + span - 1, newest_run_)));
      }
    } catch (const Error& error) {
      RunWalk unreadable;
      unreadable.fault = file_fault(error.problem());
      take(unreadable);
    }
  }
  const RunWalk& total() const { return total_; }

 private:
  static constexpr std::int64_t span = 1000;

  void take(const RunWalk& walk) {
    const std::lock_guard lock(mutex_);
    total_.runs += walk.runs;
    total_.open_runs += walk.open_runs;
    total_.readings += walk.readings;
    total_.captures += walk.captures;
    if (!walk.fault) return;
    stop_ = true;
    if (total_.fault && total_.fault_run <= walk.fault_run) return;
    total_.fault = walk.fault;
    total_.fault_run = walk.fault_run;
  }

  std::int64_t newest_run_;
  std::atomic<std::int64_t> next_{1};
  std::atomic<bool> stop_{false};
  std::mutex mutex_;
  RunWalk total_;
};

/// A connection for looking only, in the manner that the options ask for. Throws ProblemError.
std::unique_ptr<Connection> look_at(const std::string& path, const VerifyOptions& options) {
  if (!options.exclusive) return open_readable(path, options.archive ? ReadFrom::archive : ReadFrom::live, options.vfs);
  auto connection = std::make_unique<Connection>(path, Access::read_write, options.vfs);
  connection->demand("locking_mode", "EXCLUSIVE", "exclusive");
  connection->run("PRAGMA query_only=1");
  return connection;
}

std::optional<Fault> layout_fault(Connection& connection) {
  if (connection.ask_number("PRAGMA user_version") != newest_step)
    return Fault{0, "file", "", "user_version", "is not the step of the layout that was written"};
  const SchemaDifference difference = schema_difference(connection);
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

std::optional<Fault> page_fault(Connection& connection) {
  const std::string answer = connection.ask("PRAGMA integrity_check(1)");
  if (answer == "ok") return std::nullopt;
  return Fault{0, "file", "", "", answer};
}

void keep_first(std::optional<Fault>& first, const std::optional<Fault>& other) {
  if (other && (!first || other->entry < first->entry)) first = other;
}

/// The chain and all that hangs on it, in the calling thread.
ChainWalk chain_part(Connection& connection, const VerifyOptions& options) {
  ChainWalk walk = walk_chain(connection, 1);
  keep_first(walk.fault, stray_projected_row(connection));
  if (options.printed) keep_first(walk.fault, printed_fault(connection, *options.printed, walk.seal.entry));
  return walk;
}

VerifyReport walk_all(Connection& connection, Connection* second, const VerifyOptions& options) {
  VerifyReport report;
  if ((report.first_fault = layout_fault(connection))) return report;
  RunRanges ranges(connection.ask_number("SELECT coalesce(max(run), 0) FROM run_opened"));
  ChainWalk chain;
  {
    std::jthread beside;
    if (second) beside = std::jthread([&] { ranges.work(*second); });
    chain = chain_part(connection, options);
    ranges.work(connection);
  }
  const RunWalk& runs = ranges.total();
  report.entries = chain.entries;
  report.seal = chain.seal;
  report.runs = runs.runs;
  report.open_runs = runs.open_runs;
  report.readings = runs.readings;
  report.captures = runs.captures;
  report.first_fault = chain.fault;
  keep_first(report.first_fault, runs.fault);
  if (!report.first_fault) report.first_fault = stray_run_row(connection);
  if (!report.first_fault) report.first_fault = page_fault(connection);
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
  if (const ChainWalk walk = walk_chain(connection, from); walk.fault) return walk.fault;
  std::vector<std::int64_t> runs;
  {
    Row row = connection.begin(
        "SELECT run FROM run_closed WHERE entry >= ? UNION ALL SELECT o.run FROM run_opened AS o"
        " WHERE NOT EXISTS (SELECT 1 FROM run_closed AS c WHERE c.run = o.run)");
    for (row.values(from); row.step();) runs.push_back(row.integer(0));
  }
  for (const std::int64_t run : runs)
    if (const RunWalk walk = walk_runs(connection, run, run); walk.fault) return walk.fault;
  return std::nullopt;
}

Problem altered_problem(const std::string& file, const Fault& fault) {
  const std::string place = "entry " + std::to_string(fault.entry) + ", table " + fault.table + ", " + fault.row +
                            (fault.column.empty() ? "" : ", column " + fault.column);
  return {"ledger_altered", file, {{"place", place}, {"what", fault.what}}};
}

}  // namespace probewright::db
