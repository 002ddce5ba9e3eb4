#include "db/restore.h"

#include "db/file_work.h"

namespace probewright::db {
namespace {

/// The backup as it lies there.
Result<void> check_backup(const std::string& backup, const RestoreOptions& options) {
  VerifyOptions how;
  how.archive = options.copy.from == ReadFrom::archive;
  how.printed = options.printed;
  how.stop = options.copy.stop;
  const auto report = verify(backup, how);
  if (!report) return report.error();
  if (report->ok()) return {};
  return Problem{"backup_differs", backup, {{"what", altered_problem(backup, *report->first_fault).what()}}};
}

Result<void> note_restored(const CheckedCopy& copy, const std::string& backup, const Clock& clock,
                           const RestoreOptions& options) {
  StoreOptions store;
  store.path = copy.path;
  store.create = false;
  store.program_version = options.program_version;
  store.program_commit = options.program_commit;
  store.restored = true;
  auto opened = Store::open(store, clock);
  if (!opened) return opened.error();
  Body body = copy_body(copy);
  (*body.object())["file"] = backup;
  (*body.object())["reason"] = options.reason;
  return (*opened)->commit([&](Change& change) { change.add_entry("restored", options.who, body); });
}

}  // namespace

Result<CheckedCopy> restore_ledger(const std::string& backup, const std::string& to, const Clock& clock,
                                   const RestoreOptions& options) {
  if (auto good = check_backup(backup, options); !good) return good.error();
  auto copy = copy_ledger(backup, to, options.copy);
  if (!copy) return copy;
  if (auto noted = note_restored(*copy, backup, clock, options); !noted) return noted.error();
  return copy;
}

Result<CheckedCopy> restore_drill(const std::string& backup, const std::string& scratch,
                                  const RestoreOptions& options) {
  if (auto good = check_backup(backup, options); !good) return good.error();
  const auto copy = copy_ledger(backup, scratch, options.copy);
  if (copy) const Unfinished gone(scratch);
  return copy;
}

}  // namespace probewright::db
