#pragma once
#include <cstdint>
#include <functional>
#include <stop_token>
#include <string>

#include "db/reader.h"
#include "db/rows.h"
#include "db/verify.h"

namespace probewright::db {

struct CopyOptions {
  ReadFrom from = ReadFrom::live;
  /// Called now and then, in the calling thread, with how much of how much is done; first for the copy, then for the
  /// check of it.
  std::function<void(std::int64_t done, std::int64_t total)> progress;
  std::stop_token stop;
};

/// A copy of a ledger that was checked.
struct CheckedCopy {
  std::string path;
  VerifyReport report;  ///< of the copy; agrees
  Digest sha256{};      ///< of the file
  std::int64_t size = 0;
};

/// Copies a ledger, which may be written meanwhile, as it stands at one moment: all pages under one snapshot. The copy
/// is left in journal_mode=DELETE (one file, nothing beside it), checked whole against the seal of that moment, synced,
/// and only then gets its name. Nothing is written to the source.
/// Errors: file_exists (nothing is ever written over), backup_differs (the copy does not verify: it is taken away),
/// copy_stopped, and those of opening and of the disk.
Result<CheckedCopy> copy_ledger(const std::string& from, const std::string& to, const CopyOptions& options = {});

/// What to write into a ledger of a copy that was made of it, or that it was made from: file, sha256, size, seal and
/// the number of its entry.
Body copy_body(const CheckedCopy& copy);

}  // namespace probewright::db
