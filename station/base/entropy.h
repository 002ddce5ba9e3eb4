#pragma once
#include <cstdint>

namespace probewright {

/// Where random bits come from: the system in production, a seed in trials. One thread.
class Entropy {
 public:
  virtual ~Entropy() = default;
  virtual std::uint64_t next() = 0;
};

class SystemEntropy final : public Entropy {
 public:
  std::uint64_t next() override;  ///< getrandom(2)
};

/// SplitMix64 (Steele, Lea, Flood 2014): small, the same on every machine, good enough for nonces and trials.
class SeededEntropy final : public Entropy {
 public:
  explicit SeededEntropy(std::uint64_t seed) : state_(seed) {}
  std::uint64_t next() override;

 private:
  std::uint64_t state_;
};

/// A seed of its own for the part `index` of the work seeded by `seed`.
std::uint64_t derived_seed(std::uint64_t seed, std::uint64_t index);

}  // namespace probewright
