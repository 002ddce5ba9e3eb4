#pragma once
#include <cstdint>
#include <optional>
#include <string>

#include "db/backup.h"
#include "station/text/choices.h"
#include "station/text/console.h"

namespace probewright::text {

struct LedgerVerifyOptions {
  std::string file;
  std::string seal;                   ///< 64 hexadecimal digits of a printed seal; empty: none to compare with
  std::optional<std::int64_t> entry;  ///< the entry that the seal was printed for; needed with it
  std::int64_t from = 1;              ///< first entry to look at
};
/// `ledger verify`: walks everything and names the first place that does not agree.
/// Exit status: 0 all agrees, 1 something does not, 2 no ledger there, 3 it cannot be read.
int ledger_verify(const LedgerVerifyOptions& options, Console& console);

struct LedgerSealOptions {
  StationChoice choice;
  std::string file;  ///< empty: the station's ledger
};
/// `ledger seal`: number and hash of the newest entry. Exit status: 0, 2 no ledger there, 3 it cannot be read.
int ledger_seal(const LedgerSealOptions& options, Console& console);

struct LedgerBackupOptions {
  StationChoice choice;
  Build build;
  std::string ledger;  ///< empty: the station's
  std::string to;      ///< file to make, or a folder
  std::string who = "station";
};
/// `ledger backup`: a checked copy as of one moment, while the line may write; an entry of it in the ledger.
/// Exit status: 0, 2 the name is taken, 3 it could not be made.
int ledger_backup(const LedgerBackupOptions& options, Console& console);

struct LedgerRestoreOptions {
  StationChoice choice;
  Build build;
  std::string backup;
  std::string to;      ///< file to make; empty with `drill`
  std::string ledger;  ///< where a drill is recorded; empty: the station's
  std::string seal;
  std::optional<std::int64_t> entry;
  bool drill = false;
  std::string who = "station", reason;
};
/// `ledger restore`: a ledger from a backup, or with `drill` a trial of it. Exit status as for backup.
int ledger_restore(const LedgerRestoreOptions& options, Console& console);

struct LedgerCloseVolumeOptions {
  StationChoice choice;
  Build build;
  std::string ledger;  ///< empty: the station's
  std::string who, reason;
};
/// `ledger close-volume`: ends the volume and begins the next one. Exit status: 0, 2 refused, 3 it could not be done.
int ledger_close_volume(const LedgerCloseVolumeOptions& options, Console& console);

struct LedgerPruneOptions {
  StationChoice choice;
  Build build;
  std::string ledger;  ///< empty: the station's
  std::int64_t record_days = 0;
  int keep_one_in = 0;  ///< 0: none
  bool take_away = false;
  std::string who, reason;
};
/// `ledger prune`: tells which captured bytes the rules let go, and with `take_away` takes them away.
int ledger_prune(const LedgerPruneOptions& options, Console& console);

struct LedgerExportOptions {
  StationChoice choice;
  Build build;
  std::string ledger;         ///< empty: the station's
  std::string to;             ///< file or folder to make; a bundle whose name ends with .tar is one file
  std::string as = "bundle";  ///< runs, readings (CSV), json, bundle
  std::string serial, lot;    ///< at most one; neither: all closed runs
  std::string key;            ///< private key that signs a bundle; empty: not signed
  bool with_captures = false;
  std::string who = "station";
};
/// `ledger export`: runs and readings for use elsewhere. Exit status: 0, 1 there are no such runs, 2 refused, 3 it
/// could not be made.
int ledger_export(const LedgerExportOptions& options, Console& console);

/// A checked copy for people and as JSON.
void print_copy(const db::CheckedCopy& copy, Console& console);
Json json_of(const db::CheckedCopy& copy);
/// The seal to compare with, or nothing where none was given. Errors: seal_malformed.
Result<std::optional<db::Seal>> printed_seal(const std::string& seal, const std::optional<std::int64_t>& entry);

}  // namespace probewright::text
