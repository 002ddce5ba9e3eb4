#pragma once
#include <cstdint>
#include <string>
#include <string_view>
#include <vector>

#include "db/store.h"

// A ledger closes into numbered volumes; the next one begins with the seal of the one before.
namespace probewright::db {

/// "ledger.db" and 3 give "ledger-volume-003.db", beside it.
std::string volume_path(const std::string& ledger, std::int64_t volume);
/// Where the next volume is made while the one before still has the ledger's name: "ledger.db.next".
std::string next_volume_path(const std::string& ledger);
/// The closed volumes that lie beside a ledger by their names, oldest first, then the ledger itself.
std::vector<std::string> volumes_beside(const std::string& ledger);

struct CloseVolumeOptions {
  std::string path, who, reason;
  std::string program_version, program_commit;
};
struct ClosedVolume {
  std::string archive;         ///< the closed volume: one file, read only, in journal_mode=DELETE
  std::int64_t volume = 1;     ///< its number
  Seal seal;                   ///< of its closing entry, the first thing that the next volume says
  std::int64_t documents = 0;  ///< carried over: documents in force
  std::int64_t tries = 0;      ///< serials with tries that count on
  std::int64_t standing = 0;   ///< open lots and holds
};

/// Ends the ledger's volume with an entry `volume_closed` and begins the next one under the ledger's name. Carried
/// over: documents in force with their signatures and states, tries of serials whose last run has not passed, open
/// lots, holds. No line may have the ledger. A closing that was cut short (a power cut) goes on when this is called
/// again; at every moment in between one of the two files has the ledger's name, or opening the ledger gives it that
/// name. Errors: volume_runs_open, ledger_in_use, ledger_locked (somebody reads: try again), file_exists (the archive's
/// name is taken), and those of Store::open.
Result<ClosedVolume> close_volume(const CloseVolumeOptions& options, const Clock& clock);

/// One link of the chain of volumes that does not hold, or nothing: each volume must begin with the number and the seal
/// that the one before ended with. `paths` oldest first. Errors: those of opening.
struct BrokenLink {
  std::string path, what;
};
Result<std::optional<BrokenLink>> broken_link(const std::vector<std::string>& paths);

}  // namespace probewright::db
