#pragma once
#include <optional>
#include <string>

#include "db/backup.h"
#include "db/store.h"

namespace probewright::db {

struct RestoreOptions {
  std::optional<Seal> printed;  ///< a seal from an earlier report that the backup must hold
  std::string who;              ///< who restores; kept in the ledger
  std::string reason;
  std::string program_version, program_commit;
  CopyOptions copy;
};

/// Makes a ledger again from a backup: checks the backup (against a printed seal too), copies it to `to`, which must
/// not exist, checks the copy, and adds the entry `restored`, so that everybody sees where the history was cut: entries
/// that the lost file had after the backup are gone, and their numbers will be used again. Holds the lease of `to`
/// meanwhile. Errors: those of copy_ledger and Store::open; backup_differs where the backup does not verify.
Result<CheckedCopy> restore_ledger(const std::string& backup, const std::string& to, const Clock& clock,
                                   const RestoreOptions& options);

/// Tries a backup without touching the ledger: restores it in a folder of its own (beside `scratch`, which must be
/// free) and takes that away again. Errors as above.
Result<CheckedCopy> restore_drill(const std::string& backup, const std::string& scratch, const RestoreOptions& options);

}  // namespace probewright::db
