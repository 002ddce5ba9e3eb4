#include "db/file_work.h"

#include <fcntl.h>
#include <sys/stat.h>
#include <unistd.h>

#include <array>
#include <cerrno>
#include <cstring>
#include <filesystem>

#include "db/lease.h"
#include "db/sha256.h"

namespace probewright::db {
namespace {

Problem trouble(std::string_view id, const std::string& path) {
  return {id, path, {{"reason", std::strerror(errno)}, {"code", "errno " + std::to_string(errno)}}};
}

/// Closes a file when it goes.
struct Handle {
  int file;
  explicit Handle(int opened) : file(opened) {}
  ~Handle() {
    if (file >= 0) ::close(file);
  }
  Handle(const Handle&) = delete;
};

}  // namespace

bool file_exists(const std::string& path) {
  struct stat file {};
  return ::lstat(path.c_str(), &file) == 0;
}

Result<FileDigest> digest_of_file(const std::string& path) {
  const Handle handle(::open(path.c_str(), O_RDONLY | O_CLOEXEC));
  if (handle.file < 0) return trouble("ledger_cannot_open", path);
  FileDigest answer;
  Sha256 hash;
  std::vector<std::byte> piece(1u << 20);
  for (;;) {
    const ssize_t got = ::read(handle.file, piece.data(), piece.size());
    if (got < 0) return trouble("ledger_io", path);
    if (got == 0) break;
    hash.add(std::span{piece}.first(static_cast<std::size_t>(got)));
    answer.size += got;
  }
  answer.digest = hash.finish();
  return answer;
}

Result<void> write_new_file(const std::string& path, std::string_view bytes) {
  const Handle handle(::open(path.c_str(), O_WRONLY | O_CREAT | O_EXCL | O_CLOEXEC, 0644));
  if (handle.file < 0) return errno == EEXIST ? Problem{"file_exists", path} : trouble("ledger_cannot_open", path);
  while (!bytes.empty()) {
    const ssize_t put = ::write(handle.file, bytes.data(), bytes.size());
    if (put < 0) return trouble("ledger_io", path);
    bytes.remove_prefix(static_cast<std::size_t>(put));
  }
  if (::fsync(handle.file) != 0) return trouble("ledger_io", path);
  return {};
}

Result<void> sync_file(const std::string& path) {
  const Handle handle(::open(path.c_str(), O_RDONLY | O_CLOEXEC));
  if (handle.file < 0) return trouble("ledger_cannot_open", path);
  if (::fsync(handle.file) != 0) return trouble("ledger_io", path);
  return {};
}

Result<void> name_file(const std::string& from, const std::string& to) {
  // A plain rename would take away what has the name already.
  if (::renameat2(AT_FDCWD, from.c_str(), AT_FDCWD, to.c_str(), RENAME_NOREPLACE) != 0) {
    if (errno == EEXIST) return Problem{"file_exists", to};
    if (errno != EINVAL && errno != ENOSYS) return trouble("ledger_io", to);
    if (file_exists(to)) return Problem{"file_exists", to};
    if (::rename(from.c_str(), to.c_str()) != 0) return trouble("ledger_io", to);
  }
  return sync_folder(folder_of(to));
}

Unfinished::~Unfinished() {
  if (path_.empty()) return;
  std::error_code ignored;  // what cannot be taken away stays as an unfinished file, by its name
  for (const char* suffix : {"", "-journal", "-wal", "-shm"}) std::filesystem::remove(path_ + suffix, ignored);
}

}  // namespace probewright::db
