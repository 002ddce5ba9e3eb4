#pragma once
#include <cstdint>
#include <string_view>

#include "station/base/entropy.h"

namespace probewright::emulated {

/// Random deviates that are the same on every machine for the same seed. One thread.
class Deviates {
 public:
  explicit Deviates(std::uint64_t seed) : entropy_(seed) {}

  /// Uniform in (0, 1): neither end ever occurs.
  double uniform();
  /// Mean 0, standard deviation 1: Marsaglia's polar method (1964).
  double normal();
  double normal(double mean, double sd) { return mean + sd * normal(); }
  /// Log-normal with the given median; `relative_sd` is the standard deviation of the logarithm.
  double log_normal(double median, double relative_sd);
  std::uint64_t bits() { return entropy_.next(); }

 private:
  SeededEntropy entropy_;
  double spare_ = 0.0;
  bool has_spare_ = false;
};

/// A seed for the thing called `name` in the bench seeded by `seed` (FNV-1a over the name, then mixed).
std::uint64_t named_seed(std::uint64_t seed, std::string_view name);

}  // namespace probewright::emulated
