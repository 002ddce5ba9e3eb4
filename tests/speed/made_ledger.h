#pragma once
#include <cstdint>
#include <functional>
#include <string>
#include <vector>

#include "db/store.h"
#include "station/base/entropy.h"

// A ledger of any size through the store itself: runs with 40 readings, documents and devices like those of the line.
namespace probewright::speed {

/// The machine's clock in steps of a millisecond from a fixed moment, so that two ledgers of one seed are the same.
class CountedClock final : public Clock {
 public:
  UtcTime utc_now() const override { return {start_us + 1000 * ++asked_}; }
  SteadyTime steady_now() const override { return {std::chrono::microseconds{1000 * asked_}}; }

 private:
  static constexpr std::int64_t start_us = 1'796'103'000'000'000;
  mutable std::int64_t asked_ = 0;
};

struct MadeOptions {
  std::int64_t runs = 1000;
  int captures_in_one_of = 100;  ///< 1 run in so many has captures (13 of them, about 25 kB packed); 0: none
  int runs_a_commit = 500;
};

/// Serial number of run `i`: 1 run in 20 is the second try of the serial before it.
std::string serial_of(std::int64_t i);

/// Makes runs in an open store. `after_commit` is called after each commit with its number of runs.
void make_runs(db::Store& store, const MadeOptions& options,
               const std::function<void(std::int64_t runs)>& after_commit);

db::StoreOptions store_options(const std::string& path);

}  // namespace probewright::speed
