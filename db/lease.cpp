#include "db/lease.h"

#include <fcntl.h>
#include <sys/file.h>
#include <sys/stat.h>
#include <sys/sysmacros.h>
#include <sys/vfs.h>
#include <unistd.h>

#include <algorithm>
#include <array>
#include <cerrno>
#include <cstring>
#include <filesystem>
#include <fstream>
#include <sstream>

#include "station/base/numbers.h"

namespace probewright::db {
namespace {

// Numbers of statfs(2), <linux/magic.h> and the file systems' own sources.
constexpr long fuse_magic = 0x65735546;
constexpr std::array network_magics = std::to_array<long>({
    0x6969,            // NFS
    0x517b,            // SMB
    long{0xff534d42},  // CIFS
    long{0xfe534d42},  // SMB2
    0x564c,            // NCP
    0x73757245,        // Coda
    0x5346414f,        // AFS
    0x6b414653,        // kAFS
    0x00c36400,        // Ceph
    0x0bd00bd0,        // Lustre
    0x01021997,        // 9P
    0x7461636f,        // OCFS2
    0x01161970         // GFS2
});
constexpr std::array network_names =
    std::to_array<std::string_view>({"fuse.sshfs", "fuse.s3fs", "fuse.rclone", "fuse.glusterfs", "fuse.davfs",
                                     "fuse.ceph", "fuse.gcsfuse", "fuse.goofys", "fuse.curlftpfs", "fuse.juicefs"});

Problem cannot_open(const std::string& path) {
  return {"ledger_cannot_open", path, {{"reason", std::strerror(errno)}, {"code", "errno " + std::to_string(errno)}}};
}

/// Type of the mounted file system with this device number, from /proc/self/mountinfo (proc(5)).
std::string mounted_type(dev_t device) {
  const std::string wanted = std::to_string(major(device)) + ":" + std::to_string(minor(device));
  std::ifstream mounts("/proc/self/mountinfo");
  for (std::string line; std::getline(mounts, line);) {
    std::istringstream words(line);
    std::string id, parent, numbers, word;
    words >> id >> parent >> numbers;
    if (numbers != wanted) continue;
    while (words >> word && word != "-") {
    }
    words >> word;
    return word;
  }
  return {};
}

}  // namespace

bool is_network_file_system(long magic, std::string_view name) {
  if (magic == fuse_magic) return std::find(network_names.begin(), network_names.end(), name) != network_names.end();
  return std::find(network_magics.begin(), network_magics.end(), magic) != network_magics.end();
}

std::string network_file_system_of(const std::string& folder) {
  struct statfs system {};
  struct stat file {};
  if (statfs(folder.c_str(), &system) != 0 || stat(folder.c_str(), &file) != 0) return {};
  const std::string name = mounted_type(file.st_dev);
  if (!is_network_file_system(static_cast<long>(system.f_type), name)) return {};
  return name.empty() ? "a network file system" : name;
}

std::string folder_of(const std::string& path) {
  const auto slash = path.rfind('/');
  if (slash == std::string::npos) return ".";
  return slash == 0 ? "/" : path.substr(0, slash);
}

Result<void> sync_folder(const std::string& folder) {
  const int file = ::open(folder.c_str(), O_RDONLY | O_DIRECTORY | O_CLOEXEC);
  if (file < 0) return cannot_open(folder);
  const int answer = ::fsync(file);
  const int error = errno;
  ::close(file);
  if (answer == 0) return {};
  return Problem{"ledger_io", folder, {{"reason", std::strerror(error)}, {"code", "errno " + std::to_string(error)}}};
}

Result<Lease> Lease::take(const std::string& ledger_path) {
  if (const std::string type = network_file_system_of(folder_of(ledger_path)); !type.empty())
    return Problem{"ledger_network", ledger_path, {{"type", type}}};
  const std::string path = ledger_path + ".lease";
  const int file = ::open(path.c_str(), O_RDWR | O_CREAT | O_CLOEXEC, 0644);
  if (file < 0) return cannot_open(path);
  Lease lease(file);
  if (::flock(file, LOCK_EX | LOCK_NB) == 0) return lease;
  if (errno == EWOULDBLOCK) return Problem{"ledger_in_use", ledger_path, {{"lease", path}}};
  return cannot_open(path);
}

std::optional<Lease::Identity> Lease::noted() const {
  std::string text(5000, '\0');
  const ssize_t size = ::pread(file_, text.data(), text.size(), 0);
  if (size <= 0) return std::nullopt;
  std::istringstream lines(text.substr(0, static_cast<std::size_t>(size)));
  Identity identity;
  std::string numbers;
  if (!std::getline(lines, identity.path) || !std::getline(lines, numbers)) return std::nullopt;
  std::istringstream words(numbers);
  for (std::int64_t* into : {&identity.device, &identity.inode, &identity.born_us}) {
    std::string word;
    words >> word;
    const auto number = parse_integer(word);
    if (!number) return std::nullopt;
    *into = *number;
  }
  return identity;
}

Result<void> Lease::note(const Identity& identity) const {
  const std::string text = identity.path + '\n' + std::to_string(identity.device) + ' ' +
                           std::to_string(identity.inode) + ' ' + std::to_string(identity.born_us) + '\n';
  const bool written = ::pwrite(file_, text.data(), text.size(), 0) == static_cast<ssize_t>(text.size()) &&
                       ::ftruncate(file_, static_cast<off_t>(text.size())) == 0;
  if (written) return {};
  return Problem{"ledger_io", "lease", {{"reason", std::strerror(errno)}, {"code", "errno " + std::to_string(errno)}}};
}

Result<Lease::Identity> Lease::identity_of(const std::string& ledger_path) {
  struct statx file {};
  if (::statx(AT_FDCWD, ledger_path.c_str(), 0, STATX_BASIC_STATS | STATX_BTIME, &file) != 0)
    return cannot_open(ledger_path);
  // An inode's number is given again soon after its file is gone; the moment of its making is not.
  const bool known = (file.stx_mask & STATX_BTIME) != 0;
  const std::int64_t born_us = known ? file.stx_btime.tv_sec * 1'000'000 + file.stx_btime.tv_nsec / 1000 : 0;
  std::error_code unknown;
  const auto full = std::filesystem::weakly_canonical(ledger_path, unknown);
  return Identity{unknown ? ledger_path : full.string(),
                  static_cast<std::int64_t>(makedev(file.stx_dev_major, file.stx_dev_minor)),
                  static_cast<std::int64_t>(file.stx_ino), born_us};
}

Lease::Lease(Lease&& other) noexcept : file_(std::exchange(other.file_, -1)) {}

Lease& Lease::operator=(Lease&& other) noexcept {
  std::swap(file_, other.file_);
  return *this;
}

Lease::~Lease() {
  if (file_ >= 0) ::close(file_);  // the file stays: taking it away would let two lines hold two locks
}

}  // namespace probewright::db
