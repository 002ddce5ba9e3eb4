#include "db/store.h"

#include <sqlite3.h>

#include <algorithm>
#include <cstdio>
#include <filesystem>

#include "db/chain.h"
#include "db/hex.h"
#include "db/log_file.h"
#include "db/projection.h"
#include "db/queries/seal.h"
#include "db/schema/schema.h"
#include "db/transaction.h"
#include "db/verify.h"
#include "db/volumes.h"

namespace probewright::db {
namespace {

constexpr std::int64_t recent_entries = 100;

bool there_is(const std::string& path) {
  std::error_code unknown;
  return std::filesystem::exists(path, unknown) || unknown;
}

std::chrono::microseconds utc_minus_steady(const Clock& clock) {
  const auto steady = std::chrono::duration_cast<std::chrono::microseconds>(clock.steady_now().since_start);
  return std::chrono::microseconds{clock.utc_now().microseconds} - steady;
}

/// Where closing a volume was cut short between its last two steps, the next volume lies ready beside.
void finish_exchange(const std::string& path) {
  if (there_is(next_volume_path(path)) && std::rename(next_volume_path(path).c_str(), path.c_str()) == 0)
    sync_folder(folder_of(path)).value();
}

std::vector<Result<void>> all_failed(std::size_t count, const Problem& problem) {
  std::vector<Result<void>> outcomes;
  for (std::size_t i = 0; i < count; ++i) outcomes.emplace_back(problem);
  return outcomes;
}

}  // namespace

Result<std::unique_ptr<Store>> Store::open(const StoreOptions& options, const Clock& clock) {
  // Nothing is left beside a ledger that is not there: no lease, no empty file.
  if (!options.create && options.vfs.empty() && !there_is(options.path) && !there_is(next_volume_path(options.path)))
    return Problem{"ledger_cannot_open", options.path, {{"reason", "there is no such file"}, {"code", "14"}}};
  std::optional<Lease> lease;
  if (options.lease) {
    auto taken = Lease::take(options.path);
    if (!taken) return taken.error();
    lease = std::move(*taken);
  } else if (options.vfs.empty()) {
    if (const std::string type = network_file_system_of(folder_of(options.path)); !type.empty())
      return Problem{"ledger_network", options.path, {{"type", type}}};
  }
  if (options.vfs.empty() && !there_is(options.path)) finish_exchange(options.path);
  try {
    auto store = std::unique_ptr<Store>(new Store(options, clock, std::move(lease)));
    store->notice_move(options.restored);
    return store;
  } catch (const ProblemError& error) {
    return error.problem();
  }
}

Store::Store(const StoreOptions& options, const Clock& clock, std::optional<Lease> lease)
    : lease_(std::move(lease)),
      clock_(clock),
      connection_(options.path, options.create ? Access::create_read_write : Access::read_write, options.vfs) {
  connection_.wait_for_locks(options.wait_for_locks_ms);
  // Without shared memory the first read would already need a lock that lasts.
  if (options.exclusive) connection_.demand("locking_mode", "EXCLUSIVE", "exclusive");
  const bool fresh = is_fresh();
  if (!fresh) refuse_foreign_file();  // before any setting could touch the file
  if (fresh && !options.create)
    throw ProblemError({"ledger_not_a_ledger", options.path, {{"reason", "an empty file"}, {"code", "26"}}});
  if (fresh) prepare_new_file();
  set_modes(options);
  if (fresh) begin_ledger(options);
  if (!fresh) climb(options);
  prepare();
  read_first_entry(options);
  check_recent();
  refuse_closed_volume();
  seal_ = newest_entry();
  utc_minus_steady_ = utc_minus_steady(clock_);
  data_version_ = connection_.ask_number("PRAGMA data_version");
}

Store::~Store() = default;

bool Store::is_fresh() {
  return connection_.ask_number("PRAGMA application_id") == 0 && connection_.ask_number("PRAGMA user_version") == 0 &&
         connection_.ask_number("SELECT count(*) FROM sqlite_schema") == 0;
}

void Store::refuse_foreign_file() { db::refuse_foreign_file(connection_); }

void Store::prepare_new_file() {
  connection_.run("PRAGMA auto_vacuum=INCREMENTAL");  // must come before the first page
  // Until the log is in use the file is made with a rollback journal. Without EXTRA its removal is not synced: it could
  // come back after a power cut and undo what was written since.
  connection_.run("PRAGMA synchronous=EXTRA");
}

void Store::set_modes(const StoreOptions& options) {
  connection_.demand("journal_mode", "WAL", "wal");
  connection_.demand("synchronous", "FULL", "2");
  connection_.demand("foreign_keys", "ON", "1");
  connection_.demand("recursive_triggers", "ON", "1");
  connection_.demand("temp_store", "MEMORY", "2");
  connection_.run("PRAGMA cell_size_check=ON");
  connection_.ask("PRAGMA wal_autocheckpoint=" + std::to_string(options.checkpoint_pages));
  save_log_again(connection_);
  connection_.wait_for_locks(0);
  connection_.ask("PRAGMA wal_checkpoint(TRUNCATE)");
  connection_.wait_for_locks(options.wait_for_locks_ms);
}

void Store::begin_ledger(const StoreOptions& options) {
  Transaction change{connection_};
  if (!is_fresh()) return;  // another program was faster
  for (std::int64_t step = 1; step <= newest_step; ++step) connection_.run(std::string{schema_step(step)});
  connection_.run("PRAGMA application_id=" + std::to_string(application_id));
  connection_.run("PRAGMA user_version=" + std::to_string(newest_step));
  prepare();
  Change first{*this, Seal{}};
  first.append("ledger_begun", "station",
               Body::Object{{"emulated", options.emulated},
                            {"layout", newest_step},
                            {"layout_digest", to_hex(schema_digest(expected_schema()))},
                            {"previous_seal", options.continues ? Body{to_hex(options.continues->seal.hash)} : Body{}},
                            {"software_commit", options.program_commit},
                            {"software_version", options.program_version},
                            {"station", options.station},
                            {"volume", options.continues ? options.continues->volume + 1 : 1}});
  change.commit();
  if (options.vfs.empty()) sync_folder(folder_of(options.path)).value();
}

void Store::prepare() {
  insert_projected_.clear();
  for (const ProjectedTable& table : projected_tables())
    insert_projected_.push_back(std::make_unique<Statement>(connection_, insert_sql(table)));
}

void Store::read_first_entry(const StoreOptions& options) {
  Row row = connection_.begin("SELECT body FROM entry WHERE number = 1");
  const auto body = row.step() ? parse_body(row.text_view(0), "entry 1") : Result<Body>{Body{}};
  const Body* data = body ? body->find("data") : nullptr;
  const Body* emulated = data ? data->find("emulated") : nullptr;
  if (!emulated || !emulated->boolean())
    throw ProblemError(altered_problem(options.path, {1, "entry", "1", "body", "does not say how the ledger began"}));
  emulated_ = *emulated->boolean();
  station_ = data->text("station");
  volume_ = data->number("volume", 1);
  if (!options.station.empty() && station_ != options.station)
    throw ProblemError({"ledger_other_station", options.path, {{"found", station_}, {"wanted", options.station}}});
}

/// Does the steps of the layout that an earlier program did not know.
void Store::climb(const StoreOptions& options) {
  const auto step_of_file = [this] { return connection_.ask_number("PRAGMA user_version"); };
  const std::int64_t found = step_of_file();
  if (found == newest_step) return;
  if (!options.lease && options.vfs.empty())
    throw ProblemError(
        {"ledger_older", path(), {{"found", std::to_string(found)}, {"known", std::to_string(newest_step)}}});
  if (const auto difference = schema_difference(connection_, found); !difference.what.empty())
    throw ProblemError({"ledger_layout_altered", path(), {{"name", difference.name}, {"what", difference.what}}});
  Transaction change{connection_};
  for (std::int64_t step = found + 1; step <= newest_step; ++step) {
    connection_.run(std::string{schema_step(step)});
    connection_.run(std::string{schema_filling(step)});
  }
  connection_.run("PRAGMA user_version=" + std::to_string(newest_step));
  prepare();
  Change first{*this, newest_entry()};
  first.append("layout_step", "station",
               Body::Object{{"from", found},
                            {"layout_digest", to_hex(schema_digest(expected_schema()))},
                            {"software_commit", options.program_commit},
                            {"software_version", options.program_version},
                            {"to", newest_step}});
  change.commit();
}

void Store::refuse_closed_volume() {
  Row row = connection_.begin("SELECT kind FROM entry ORDER BY number DESC LIMIT 1");
  if (row.step() && row.text_view(0) == "volume_closed") throw ProblemError({"ledger_volume_closed", path()});
}

namespace {

Body identity_body(const Lease::Identity& identity) {
  return Body::Object{
      {"device", std::to_string(identity.device)}, {"inode", std::to_string(identity.inode)}, {"path", identity.path}};
}

}  // namespace

/// Compares the file with what the last holder of the lease noted.
void Store::notice_move(bool restored) {
  if (!lease_) return;
  const Lease::Identity now = Lease::identity_of(path()).value();
  const auto before = lease_->noted();
  const bool begun_now = seal_.entry == 1;
  if (!begun_now && !restored && before != now) {
    const Job job = [&](Change& change) {
      change.append("file_moved", "station",
                    Body::Object{{"before", before ? identity_body(*before) : Body{}}, {"now", identity_body(now)}});
    };
    if (const auto outcome = commit(job); !outcome) throw ProblemError(outcome.error());
  }
  if (before != now) lease_->note(now).value();
}

/// SQLite goes on writing into a file that was moved or unlinked under it; what it writes would be lost.
void Store::demand_in_place() {
  int moved = 0;
  if (sqlite3_file_control(connection_.handle(), "main", SQLITE_FCNTL_HAS_MOVED, &moved) != SQLITE_OK) return;
  if (moved != 0) throw Error({"ledger_moved_away", path()}, SQLITE_READONLY_DBMOVED, "begin");
}

void Store::note_clock_step(Change& change) {
  const auto now = utc_minus_steady(clock_);
  const auto step = now - std::exchange(utc_minus_steady_, now);
  if (std::chrono::abs(step) <= clock_tolerance) return;
  change.append("clock_step", "station", Body::Object{{"microseconds", static_cast<std::int64_t>(step.count())}});
}

void Store::check_recent() {
  if (const auto difference = schema_difference(connection_); !difference.what.empty())
    throw ProblemError({"ledger_layout_altered", path(), {{"name", difference.name}, {"what", difference.what}}});
  if (const auto fault = recent_fault(connection_, recent_entries)) throw ProblemError(altered_problem(path(), *fault));
}

Seal Store::newest_entry() {
  Reader reader{connection_};
  return newest_seal(reader);
}

std::vector<Result<void>> Store::commit_group(std::span<const Job> jobs) {
  if (trouble_) return all_failed(jobs.size(), {"ledger_failed", path(), {{"reason", trouble_->what()}}});
  std::vector<Result<void>> outcomes;
  try {
    Transaction transaction{connection_};
    demand_in_place();
    Change change{*this, notice(newest_entry())};
    note_clock_step(change);
    for (const Job& job : jobs) outcomes.push_back(attempt(change, job));
    transaction.commit();
    seal_ = change.seal();
    return outcomes;
  } catch (const Error& error) {
    trouble_ = error.problem();
    return all_failed(jobs.size(), error.problem());
  }
}

void Store::give_space_back() {
  // One answer row for each page: ask() goes through them all.
  connection_.ask("PRAGMA incremental_vacuum");
  connection_.ask("PRAGMA wal_checkpoint(PASSIVE)");
}

Result<void> Store::commit(const Job& job) { return commit_group({&job, 1}).front(); }

Result<void> Store::attempt(Change& change, const Job& job) {
  Savepoint savepoint{connection_};
  const Seal before = change.seal();
  Problem problem;
  try {
    job(change);
    savepoint.keep();
    return {};
  } catch (const Error& error) {
    if (!error.refused()) throw;
    problem = error.problem();
  } catch (const ProblemError& error) {
    problem = error.problem();
  } catch (const std::exception& error) {
    problem = {"ledger_job", path(), {{"reason", error.what()}}};
  }
  savepoint.take_back();
  change.seal_ = before;
  return problem;
}

bool Store::others_wrote() {
  // data_version also moves when another program only copies the log into the file, so the newest entry decides.
  const std::int64_t version = connection_.ask_number("PRAGMA data_version");
  if (std::exchange(data_version_, version) != version) seal_ = notice(newest_entry());
  return std::exchange(others_wrote_, false);
}

Seal Store::notice(const Seal& newest) {
  others_wrote_ = others_wrote_ || newest != seal_;
  return newest;
}

std::chrono::microseconds Store::clock_behind() {
  Row row = connection_.begin("SELECT time FROM entry ORDER BY number DESC LIMIT 1");
  if (!row.step()) return std::chrono::microseconds{0};
  const auto newest = parse_utc(row.text_view(0));
  if (!newest) return std::chrono::microseconds{0};
  return std::chrono::microseconds{std::max<std::int64_t>(0, newest->microseconds - clock_.utc_now().microseconds)};
}

}  // namespace probewright::db
