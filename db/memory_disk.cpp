#include <algorithm>

#include "db/memory_vfs.h"

namespace probewright::db {
namespace {

void put_bytes(Bytes& content, std::int64_t at, const std::byte* bytes, std::size_t size) {
  const auto begin = static_cast<std::size_t>(at);
  if (content.size() < begin + size) content.resize(begin + size);
  std::copy_n(bytes, size, content.begin() + at);
}

/// How much of what was not synced is on the disk after a stop.
enum class Luck { nothing, everything, by_call, by_sector };

/// Parts of a write, sector by sector: each is kept or lost alone.
template <class Keep>
void put_sectors(Bytes& content, std::int64_t at, const Bytes& bytes, Keep keep) {
  const auto size = static_cast<std::int64_t>(bytes.size());
  for (std::int64_t begin = 0; begin < size;) {
    const std::int64_t end = std::min(size, ((at + begin) / MemoryDisk::sector + 1) * MemoryDisk::sector - at);
    if (keep()) put_bytes(content, at + begin, bytes.data() + begin, static_cast<std::size_t>(end - begin));
    begin = end;
  }
}

}  // namespace

void MemoryDisk::set_faults(const DiskFaults& faults) {
  const std::lock_guard lock(mutex_);
  faults_ = faults;
  counts_ = {};
}

DiskCounts MemoryDisk::counts() const {
  const std::lock_guard lock(mutex_);
  return counts_;
}

bool MemoryDisk::dead() const {
  const std::lock_guard lock(mutex_);
  return dead_;
}

Bytes MemoryDisk::content(const std::string& name) const {
  const std::lock_guard lock(mutex_);
  const auto found = files_.find(name);
  return found == files_.end() ? Bytes{} : found->second->now;
}

void MemoryDisk::put(const std::string& name, const Bytes& content) {
  const std::lock_guard lock(mutex_);
  auto file = std::make_unique<File>();
  file->now = file->kept = content;
  file->exists_now = file->exists_kept = true;
  files_[name] = std::move(file);
}

std::int64_t MemoryDisk::used() const {
  std::int64_t bytes = 0;
  for (const auto& [name, file] : files_) bytes += static_cast<std::int64_t>(file->now.size());
  return bytes;
}

MemoryDisk::Outcome MemoryDisk::count(Operation operation) {
  const auto hit = [this](std::int64_t number, std::int64_t wanted) {
    return wanted != 0 && (number == wanted || (faults_.from_then_on && number > wanted));
  };
  Outcome outcome = Outcome::done;
  switch (operation) {
    case Operation::write:
      ++counts_.writes;
      if (hit(counts_.writes, faults_.fail_write)) outcome = Outcome::fails;
      if (counts_.writes == faults_.short_write) outcome = Outcome::short_write;
      break;
    case Operation::sync:
      ++counts_.syncs;
      if (hit(counts_.syncs, faults_.fail_sync)) outcome = Outcome::fails;
      break;
    case Operation::truncate:
      ++counts_.truncates;
      if (hit(counts_.truncates, faults_.fail_truncate)) outcome = Outcome::fails;
      break;
    case Operation::remove:
      ++counts_.removes;
      break;
  }
  if (faults_.die_at != 0 && counts_.operations() >= faults_.die_at) dead_ = true;
  return dead_ ? Outcome::fails : outcome;
}

void MemoryDisk::write(File& file, std::int64_t at, const std::byte* bytes, std::size_t size) {
  put_bytes(file.now, at, bytes, size);
  file.pending.push_back({Pending::Kind::write, at, Bytes(bytes, bytes + size)});
}

void MemoryDisk::resize(File& file, std::int64_t size) {
  file.now.resize(static_cast<std::size_t>(size));
  file.pending.push_back({Pending::Kind::truncate, size, {}});
}

void MemoryDisk::sync(File& file, bool works) {
  if (!works) {
    for (Pending& pending : file.pending) pending.lost = true;
    return;
  }
  // A removal that was not synced before this file was made again is done with it: the name leads to the new file.
  std::vector<Pending> still_lost;
  for (Pending& pending : file.pending) {
    if (pending.lost) {
      still_lost.push_back(std::move(pending));
      continue;
    }
    switch (pending.kind) {
      case Pending::Kind::write:
        put_bytes(file.kept, pending.at, pending.bytes.data(), pending.bytes.size());
        break;
      case Pending::Kind::truncate:
        file.kept.resize(static_cast<std::size_t>(pending.at));
        break;
      case Pending::Kind::remove:
        file.kept.clear();
        break;
    }
  }
  file.exists_kept = file.exists_now;
  file.pending = std::move(still_lost);
}

void MemoryDisk::survive(File& survivor, const File& file, SeededEntropy& entropy) {
  const auto luck = static_cast<Luck>(entropy.next() % 4);
  const auto coin = [&] { return (entropy.next() >> 40) % 2 == 0; };
  const auto keep_call = [&] { return luck == Luck::everything || (luck != Luck::nothing && coin()); };
  survivor.kept = file.kept;
  survivor.exists_kept = file.exists_kept;
  for (const Pending& pending : file.pending) {
    if (pending.lost) continue;
    if (pending.kind == Pending::Kind::remove) {
      if (!keep_call()) break;  // the name still leads to the old file: what was written to a new one is out of reach
      survivor.kept.clear();
      survivor.exists_kept = false;
    } else if (pending.kind == Pending::Kind::truncate) {
      if (!keep_call()) continue;
      survivor.kept.resize(static_cast<std::size_t>(pending.at));
      survivor.exists_kept = true;
    } else if (luck == Luck::by_sector) {
      put_sectors(survivor.kept, pending.at, pending.bytes, coin);
      survivor.exists_kept = true;
    } else if (keep_call()) {
      put_bytes(survivor.kept, pending.at, pending.bytes.data(), pending.bytes.size());
      survivor.exists_kept = true;
    }
  }
  survivor.now = survivor.kept;
  survivor.exists_now = survivor.exists_kept;
}

std::unique_ptr<MemoryDisk> MemoryDisk::after_crash(std::uint64_t seed) const {
  const std::lock_guard lock(mutex_);
  SeededEntropy entropy(seed);
  auto disk = std::make_unique<MemoryDisk>();
  for (const auto& [name, file] : files_) {
    auto survivor = std::make_unique<File>();
    survive(*survivor, *file, entropy);
    if (survivor->exists_now) disk->files_[name] = std::move(survivor);
  }
  return disk;
}

std::unique_ptr<MemoryDisk> MemoryDisk::after_restart() const {
  const std::lock_guard lock(mutex_);
  auto disk = std::make_unique<MemoryDisk>();
  for (const auto& [name, file] : files_) {
    auto same = std::make_unique<File>(*file);
    same->shared = 0;
    same->reserved = same->pending_lock = same->exclusive = nullptr;
    disk->files_[name] = std::move(same);
  }
  return disk;
}

}  // namespace probewright::db
