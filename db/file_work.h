#pragma once
#include <string>
#include <string_view>

#include "station/base/digest.h"
#include "station/base/result.h"

// Whole files as backups, volumes and bundles need them.
namespace probewright::db {

bool file_exists(const std::string& path);
/// SHA-256 and size of a file, read piece by piece. Errors: ledger_cannot_open, ledger_io.
struct FileDigest {
  Digest digest{};
  std::int64_t size = 0;
};
Result<FileDigest> digest_of_file(const std::string& path);
/// Writes a new file and syncs it. Errors: file_exists, ledger_cannot_open, ledger_io.
Result<void> write_new_file(const std::string& path, std::string_view bytes);
/// Writes what the file holds to the disk. Errors: ledger_cannot_open, ledger_io.
Result<void> sync_file(const std::string& path);
/// Gives a finished file its name, which must be free, and syncs its folder. Errors: file_exists, ledger_io.
Result<void> name_file(const std::string& from, const std::string& to);

/// Takes a file away when it goes, unless it was kept.
class Unfinished {
 public:
  explicit Unfinished(std::string path) : path_(std::move(path)) {}
  ~Unfinished();
  Unfinished(const Unfinished&) = delete;
  void keep() { path_.clear(); }
  const std::string& path() const { return path_; }

 private:
  std::string path_;
};

}  // namespace probewright::db
