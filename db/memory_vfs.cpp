#include "db/memory_vfs.h"

#include <sqlite3.h>

#include <algorithm>
#include <cstring>
#include <new>
#include <stdexcept>

namespace probewright::db {

/// One open file, as SQLite sees it: made by xOpen in memory that SQLite gives.
struct MemoryFile : sqlite3_file {
  MemoryVfs* vfs = nullptr;
  MemoryDisk* disk = nullptr;
  void* file = nullptr;  ///< MemoryDisk::File
  int lock = SQLITE_LOCK_NONE;
  bool delete_on_close = false;
  std::string* name = nullptr;
};

/// The calls of SQLite's file and system interface. Source: sqlite.org/c3ref/io_methods.html and vfs.html.
struct MemoryVfsCalls {
  using Disk = MemoryDisk;
  using File = MemoryDisk::File;
  using Operation = MemoryDisk::Operation;
  using Outcome = MemoryDisk::Outcome;

  static MemoryFile& self(sqlite3_file* file) { return *static_cast<MemoryFile*>(file); }
  static File& data(MemoryFile& file) { return *static_cast<File*>(file.file); }
  static MemoryVfs& vfs(sqlite3_vfs* vfs) { return *static_cast<MemoryVfs*>(vfs->pAppData); }

  // ---- files
  static int close(sqlite3_file* file) {
    MemoryFile& me = self(file);
    {
      const std::lock_guard lock(me.disk->mutex_);
      set_lock(me, SQLITE_LOCK_NONE);
      if (me.delete_on_close) me.disk->files_.erase(*me.name);
    }
    delete me.name;
    return SQLITE_OK;
  }

  static int read(sqlite3_file* file, void* into, int size, sqlite3_int64 at) {
    MemoryFile& me = self(file);
    const std::lock_guard lock(me.disk->mutex_);
    if (me.disk->dead_) return SQLITE_IOERR_READ;
    const Bytes& now = data(me).now;
    const auto have = static_cast<sqlite3_int64>(now.size());
    const sqlite3_int64 got = std::clamp<sqlite3_int64>(have - at, 0, size);
    if (got > 0) std::memcpy(into, now.data() + at, static_cast<std::size_t>(got));
    if (got == size) return SQLITE_OK;
    std::memset(static_cast<char*>(into) + got, 0, static_cast<std::size_t>(size - got));  // SQLite relies on it
    return SQLITE_IOERR_SHORT_READ;
  }

  static int write(sqlite3_file* file, const void* from, int size, sqlite3_int64 at) {
    MemoryFile& me = self(file);
    const std::lock_guard lock(me.disk->mutex_);
    const Outcome outcome = me.disk->count(Operation::write);
    const auto* bytes = static_cast<const std::byte*>(from);
    if (outcome == Outcome::short_write) me.disk->write(data(me), at, bytes, static_cast<std::size_t>(size / 2));
    if (outcome == Outcome::short_write) return SQLITE_FULL;
    if (outcome != Outcome::done) {
      // A machine that stops in the middle of a write may have done it: the crash decides, sector by sector.
      if (me.disk->dead_ && is_last_breath(*me.disk))
        me.disk->write(data(me), at, bytes, static_cast<std::size_t>(size));
      return SQLITE_IOERR_WRITE;
    }
    const sqlite3_int64 grows = at + size - static_cast<sqlite3_int64>(data(me).now.size());
    const std::int64_t bound = me.disk->faults_.full_at;
    if (bound != 0 && grows > 0 && me.disk->used() + grows > bound) return SQLITE_FULL;
    me.disk->write(data(me), at, bytes, static_cast<std::size_t>(size));
    return SQLITE_OK;
  }

  /// True at the very call at which the machine stopped.
  static bool is_last_breath(const Disk& disk) { return disk.counts_.operations() == disk.faults_.die_at; }

  static int truncate(sqlite3_file* file, sqlite3_int64 size) {
    MemoryFile& me = self(file);
    const std::lock_guard lock(me.disk->mutex_);
    if (me.disk->count(Operation::truncate) != Outcome::done) return SQLITE_IOERR_TRUNCATE;
    me.disk->resize(data(me), size);
    return SQLITE_OK;
  }

  static int sync(sqlite3_file* file, int) {
    MemoryFile& me = self(file);
    const std::lock_guard lock(me.disk->mutex_);
    const bool works = me.disk->count(Operation::sync) == Outcome::done;
    if (me.disk->dead_) return SQLITE_IOERR_FSYNC;  // what was pending stays a matter of luck
    if (!me.disk->faults_.lies_about_sync) me.disk->sync(data(me), works);
    return works ? SQLITE_OK : SQLITE_IOERR_FSYNC;
  }

  static int file_size(sqlite3_file* file, sqlite3_int64* size) {
    MemoryFile& me = self(file);
    const std::lock_guard lock(me.disk->mutex_);
    if (me.disk->dead_) return SQLITE_IOERR_FSTAT;
    *size = static_cast<sqlite3_int64>(data(me).now.size());
    return SQLITE_OK;
  }

  // ---- locks: sqlite.org/lockingv3.html
  static void set_lock(MemoryFile& me, int level) {
    File& file = data(me);
    if (me.lock >= SQLITE_LOCK_SHARED && level < SQLITE_LOCK_SHARED) --file.shared;
    if (me.lock < SQLITE_LOCK_SHARED && level >= SQLITE_LOCK_SHARED) ++file.shared;
    const auto hold = [&](const void*& holder, int from) {
      if (level >= from) holder = &me;
      if (level < from && holder == &me) holder = nullptr;
    };
    hold(file.reserved, SQLITE_LOCK_RESERVED);
    hold(file.pending_lock, SQLITE_LOCK_PENDING);
    hold(file.exclusive, SQLITE_LOCK_EXCLUSIVE);
    me.lock = level;
  }

  static bool held_by_other(const MemoryFile& me, const void* holder) { return holder && holder != &me; }

  static int lock(sqlite3_file* sqlite_file, int level) {
    MemoryFile& me = self(sqlite_file);
    const std::lock_guard lock(me.disk->mutex_);
    if (me.disk->dead_) return SQLITE_IOERR_LOCK;
    if (level <= me.lock) return SQLITE_OK;
    const File& file = data(me);
    if (held_by_other(me, file.exclusive)) return SQLITE_BUSY;
    if (level == SQLITE_LOCK_SHARED && held_by_other(me, file.pending_lock)) return SQLITE_BUSY;
    if (level >= SQLITE_LOCK_RESERVED && held_by_other(me, file.reserved)) return SQLITE_BUSY;
    if (level == SQLITE_LOCK_EXCLUSIVE && file.shared > 1) {
      set_lock(me, SQLITE_LOCK_PENDING);
      return SQLITE_BUSY;
    }
    set_lock(me, level);
    return SQLITE_OK;
  }

  static int unlock(sqlite3_file* file, int level) {
    MemoryFile& me = self(file);
    const std::lock_guard lock(me.disk->mutex_);
    if (level < me.lock) set_lock(me, level);
    return SQLITE_OK;
  }

  static int is_reserved(sqlite3_file* file, int* answer) {
    MemoryFile& me = self(file);
    const std::lock_guard lock(me.disk->mutex_);
    *answer = data(me).reserved != nullptr;
    return SQLITE_OK;
  }

  static int control(sqlite3_file*, int, void*) { return SQLITE_NOTFOUND; }
  static int sector_size(sqlite3_file*) { return static_cast<int>(Disk::sector); }
  // As the machine's own files: a write does not disturb bytes beside it.
  static int characteristics(sqlite3_file*) { return SQLITE_IOCAP_POWERSAFE_OVERWRITE; }

  // ---- the system
  static int open(sqlite3_vfs* sqlite_vfs, const char* name, sqlite3_file* into, int flags, int* out_flags) {
    static const sqlite3_io_methods methods{
        1,       close,       read,    write,       truncate,        sync,    file_size, lock,
        unlock,  is_reserved, control, sector_size, characteristics, nullptr, nullptr,   nullptr,
        nullptr, nullptr,     nullptr};
    into->pMethods = nullptr;
    MemoryVfs& owner = vfs(sqlite_vfs);
    const std::lock_guard lock(owner.disk_.mutex_);
    if (owner.disk_.dead_) return SQLITE_IOERR;
    const std::string path = name ? name : "temporary-" + std::to_string(owner.entropy_.next());
    auto& file = owner.disk_.files_[path];
    if (!file) file = std::make_unique<File>();
    if (!file->exists_now && !(flags & SQLITE_OPEN_CREATE)) return SQLITE_CANTOPEN;
    file->exists_now = true;
    auto* made = new (into) MemoryFile;
    made->pMethods = &methods;
    made->vfs = &owner;
    made->disk = &owner.disk_;
    made->file = file.get();
    made->delete_on_close = (flags & SQLITE_OPEN_DELETEONCLOSE) != 0;
    made->name = new std::string(path);
    if (out_flags) *out_flags = flags;
    return SQLITE_OK;
  }

  static int remove(sqlite3_vfs* sqlite_vfs, const char* name, int sync_folder) {
    Disk& disk = vfs(sqlite_vfs).disk_;
    const std::lock_guard lock(disk.mutex_);
    if (disk.count(Operation::remove) != Outcome::done) return SQLITE_IOERR_DELETE;
    const auto found = disk.files_.find(name);
    if (found == disk.files_.end() || !found->second->exists_now) return SQLITE_IOERR_DELETE_NOENT;
    File& file = *found->second;
    file.now.clear();
    file.exists_now = false;
    file.pending.push_back({Disk::Pending::Kind::remove, 0, {}});
    if (sync_folder) disk.sync(file, true);
    return SQLITE_OK;
  }

  static int access(sqlite3_vfs* sqlite_vfs, const char* name, int, int* answer) {
    Disk& disk = vfs(sqlite_vfs).disk_;
    const std::lock_guard lock(disk.mutex_);
    if (disk.dead_) return SQLITE_IOERR_ACCESS;
    const auto found = disk.files_.find(name);
    *answer = found != disk.files_.end() && found->second->exists_now;
    return SQLITE_OK;
  }

  static int full_path(sqlite3_vfs*, const char* name, int size, char* into) {
    sqlite3_snprintf(size, into, "%s", name);
    return SQLITE_OK;
  }

  static int random(sqlite3_vfs* sqlite_vfs, int size, char* into) {
    MemoryVfs& owner = vfs(sqlite_vfs);
    const std::lock_guard lock(owner.disk_.mutex_);
    for (int i = 0; i < size; ++i) into[i] = static_cast<char>(owner.entropy_.next() >> 56);
    return size;
  }

  static int sleep(sqlite3_vfs*, int microseconds) { return microseconds; }  // nobody else could free a lock meanwhile

  static int time(sqlite3_vfs*, double* julian_day) {
    *julian_day = 2461376.0;  // the ledger takes no time from SQLite
    return SQLITE_OK;
  }

  static int last_error(sqlite3_vfs*, int, char*) { return 0; }
};

MemoryVfs::MemoryVfs(MemoryDisk& disk, std::string name, std::uint64_t seed)
    : disk_(disk), name_(std::move(name)), entropy_(seed), vfs_(std::make_unique<sqlite3_vfs>()) {
  using Calls = MemoryVfsCalls;
  if (sqlite3_initialize() != SQLITE_OK || sqlite3_vfs_find(name_.c_str()))
    throw std::runtime_error("there is already a VFS " + name_);
  vfs_->iVersion = 1;
  vfs_->szOsFile = sizeof(MemoryFile);
  vfs_->mxPathname = 512;
  vfs_->zName = name_.c_str();
  vfs_->pAppData = this;
  vfs_->xOpen = Calls::open;
  vfs_->xDelete = Calls::remove;
  vfs_->xAccess = Calls::access;
  vfs_->xFullPathname = Calls::full_path;
  vfs_->xRandomness = Calls::random;
  vfs_->xSleep = Calls::sleep;
  vfs_->xCurrentTime = Calls::time;
  vfs_->xGetLastError = Calls::last_error;
  if (sqlite3_vfs_register(vfs_.get(), 0) != SQLITE_OK)
    throw std::runtime_error("SQLite does not take the VFS " + name_);
}

MemoryVfs::~MemoryVfs() { sqlite3_vfs_unregister(vfs_.get()); }

}  // namespace probewright::db
