#include "station/base/entropy.h"

#include <sys/random.h>

#include <cerrno>
#include <system_error>

namespace probewright {
namespace {

constexpr std::uint64_t golden_gamma = 0x9E3779B97F4A7C15u;

/// The finaliser of SplitMix64 (David Stafford's "Mix13" constants).
std::uint64_t mix(std::uint64_t z) {
  z = (z ^ (z >> 30)) * 0xBF58476D1CE4E5B9u;
  z = (z ^ (z >> 27)) * 0x94D049BB133111EBu;
  return z ^ (z >> 31);
}

}  // namespace

std::uint64_t SystemEntropy::next() {
  std::uint64_t bits = 0;
  for (;;) {
    const auto got = ::getrandom(&bits, sizeof bits, 0);  // up to 256 bytes come whole or not at all
    if (got == static_cast<ssize_t>(sizeof bits)) return bits;
    if (got < 0 && errno != EINTR) throw std::system_error(errno, std::generic_category(), "getrandom");
  }
}

std::uint64_t SeededEntropy::next() { return mix(state_ += golden_gamma); }

std::uint64_t derived_seed(std::uint64_t seed, std::uint64_t index) {
  return mix(mix(seed + golden_gamma) + golden_gamma * (index + 1));
}

}  // namespace probewright
