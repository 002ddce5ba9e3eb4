#pragma once
#include <cstdint>
#include <optional>
#include <string>
#include <string_view>
#include <utility>

#include "station/base/result.h"

namespace probewright::db {

/// The right of one line to write a ledger, held as a lock on a file beside it ("ledger.db.lease"); ends with the
/// process, however that ends. Other commands may still append: this keeps out a second line only.
class Lease {
 public:
  /// Which file a ledger was when it was last written under its lease, kept in the lease's own file.
  struct Identity {
    std::string path;  ///< full path
    std::int64_t device = 0, inode = 0;
    std::int64_t born_us = 0;  ///< when the file was made; 0 where the file system does not know
    bool operator==(const Identity&) const = default;
  };
  /// Errors: ledger_in_use (another line has it), ledger_network, ledger_cannot_open.
  static Result<Lease> take(const std::string& ledger_path);
  Lease(Lease&& other) noexcept;
  Lease& operator=(Lease&& other) noexcept;
  ~Lease();

  /// What the last holder noted; nothing where nobody did.
  std::optional<Identity> noted() const;
  /// Notes which file the ledger is now. Errors: ledger_io.
  Result<void> note(const Identity& identity) const;
  /// The file at this path as it is now. Errors: ledger_cannot_open.
  static Result<Identity> identity_of(const std::string& ledger_path);

 private:
  explicit Lease(int file) : file_(file) {}
  int file_ = -1;
};

/// A file system on which locks and syncs cannot be trusted: by the number of statfs(2), or by name where the number
/// stands for many (FUSE). `name` is the type that mountinfo gives, or empty.
bool is_network_file_system(long magic, std::string_view name);
/// The type of the file system that holds `folder` if it is one of those, else empty.
std::string network_file_system_of(const std::string& folder);
/// The folder part of a path; "." where it has none.
std::string folder_of(const std::string& path);
/// Writes the folder's own entry to the disk, so that a new file in it is found after a power cut. Errors: ledger_io.
Result<void> sync_folder(const std::string& folder);

}  // namespace probewright::db
