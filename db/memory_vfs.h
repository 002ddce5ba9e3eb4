#pragma once
#include <cstdint>
#include <limits>
#include <map>
#include <memory>
#include <mutex>
#include <string>
#include <vector>

#include "station/base/digest.h"
#include "station/base/entropy.h"

struct sqlite3_vfs;

namespace probewright::db {

/// What goes wrong on a MemoryDisk. Calls are counted from 1 over all files together; 0: never.
struct DiskFaults {
  std::int64_t fail_write = 0, fail_sync = 0, fail_truncate = 0;  ///< this call answers with an I/O error
  bool from_then_on = false;                                      ///< and so does every later one of its kind
  std::int64_t short_write = 0;  ///< this write stores its first half, then the disk is full
  std::int64_t full_at = 0;      ///< no file may take the disk beyond so many bytes
  bool lies_about_sync = false;  ///< syncs say that they worked and save nothing
  std::int64_t die_at = 0;  ///< at this write, sync, truncate or delete the machine stops: it and every later call fail
};

/// Calls so far.
struct DiskCounts {
  std::int64_t writes = 0, syncs = 0, truncates = 0, removes = 0;
  std::int64_t operations() const { return writes + syncs + truncates + removes; }
};

/// Files in memory with a model of what a sync means. What was written since the last sync of its file may be lost when
/// the machine stops, whole or by sectors of 512 bytes, in any order, chosen by a seed; a sector is never torn itself.
/// What a failed sync left behind is still read by this machine, but no later sync saves it (only writing it again
/// does), as Linux behaves. Any thread.
class MemoryDisk {
 public:
  static constexpr std::int64_t sector = 512;

  MemoryDisk() = default;
  MemoryDisk(const MemoryDisk&) = delete;

  /// Faults from now on; counts begin anew.
  void set_faults(const DiskFaults& faults);
  DiskCounts counts() const;
  bool dead() const;
  /// The disk as the next start finds it, with what was not synced kept, lost or torn by `seed`; no faults.
  std::unique_ptr<MemoryDisk> after_crash(std::uint64_t seed) const;
  /// The disk as the next process on the same, running machine finds it; no faults.
  std::unique_ptr<MemoryDisk> after_restart() const;
  /// Bytes of a file as they would be read now; empty where there is none.
  Bytes content(const std::string& name) const;
  void put(const std::string& name, const Bytes& content);

 private:
  friend struct MemoryVfsCalls;
  struct Pending {
    enum class Kind { write, truncate, remove } kind;
    std::int64_t at = 0;  ///< offset, or the new size
    Bytes bytes;
    bool lost = false;  ///< a sync for it failed: only the running machine still has it
  };
  struct File {
    Bytes now;  ///< as read by the running machine
    bool exists_now = false;
    Bytes kept;  ///< as of the last sync
    bool exists_kept = false;
    std::vector<Pending> pending;  ///< since then
    int shared = 0;                ///< locks held, over all handles
    const void* reserved = nullptr;
    const void* pending_lock = nullptr;
    const void* exclusive = nullptr;
  };
  enum class Operation { write, sync, truncate, remove };
  enum class Outcome { done, fails, short_write, full };

  Outcome count(Operation operation);
  std::int64_t used() const;
  void write(File& file, std::int64_t at, const std::byte* bytes, std::size_t size);
  void resize(File& file, std::int64_t size);
  void sync(File& file, bool works);
  static void survive(File& survivor, const File& file, SeededEntropy& entropy);

  mutable std::mutex mutex_;
  std::map<std::string, std::unique_ptr<File>> files_;
  DiskFaults faults_;
  DiskCounts counts_;
  bool dead_ = false;
};

/// Registers a disk with SQLite under a name, for as long as it lives. It has no shared memory: open with
/// StoreOptions::exclusive. Connections must be closed first.
class MemoryVfs {
 public:
  /// `name` must be free. `seed` gives SQLite its random bits. Throws std::runtime_error.
  MemoryVfs(MemoryDisk& disk, std::string name, std::uint64_t seed = 1);
  ~MemoryVfs();
  MemoryVfs(const MemoryVfs&) = delete;
  const std::string& name() const { return name_; }

 private:
  friend struct MemoryVfsCalls;
  MemoryDisk& disk_;
  std::string name_;
  SeededEntropy entropy_;
  std::unique_ptr<sqlite3_vfs> vfs_;
};

}  // namespace probewright::db
