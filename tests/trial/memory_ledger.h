#pragma once
#include <memory>
#include <string>
#include <utility>

#include "db/memory_vfs.h"
#include "db/verify.h"
#include "tests/trial/trial.h"

namespace probewright::trial {

/// A ledger on a disk in memory. Stations on it must be gone before it goes.
class MemoryLedger {
 public:
  MemoryLedger() : MemoryLedger(std::make_unique<db::MemoryDisk>()) {}
  explicit MemoryLedger(std::unique_ptr<db::MemoryDisk> disk)
      : disk_(std::move(disk)), vfs_(std::make_unique<db::MemoryVfs>(*disk_, unused_name())) {}

  db::MemoryDisk& disk() { return *disk_; }
  Options options(std::uint64_t seed) const {
    Options options;
    options.seed = seed;
    options.store.path = "ledger.db";
    options.store.vfs = vfs_->name();
    options.store.exclusive = true;
    return options;
  }
  db::VerifyReport verify() const {
    db::VerifyOptions options;
    options.vfs = vfs_->name();
    options.exclusive = true;
    return db::verify("ledger.db", options).value();
  }

 private:
  static std::string unused_name() {
    static int count = 0;
    return "trial-" + std::to_string(++count);
  }
  std::unique_ptr<db::MemoryDisk> disk_;
  std::unique_ptr<db::MemoryVfs> vfs_;
};

}  // namespace probewright::trial
