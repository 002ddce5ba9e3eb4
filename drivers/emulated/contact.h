#pragma once
#include <cstdint>

namespace probewright::emulated {

/// How the detector's line in the cable holds. A good one has no gaps.
struct Contact {
  double gaps_per_s = 0.0;  ///< how often it opens, for 4 ms each time; at most 50
  std::uint64_t seed = 0;   ///< when
};

/// Whether the line is open at a moment. A function of time alone, so the same moment may be asked for twice.
bool is_open(const Contact& contact, double time_s);

}  // namespace probewright::emulated
