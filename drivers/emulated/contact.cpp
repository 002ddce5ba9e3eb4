#include "drivers/emulated/contact.h"

#include <cmath>

#include "drivers/emulated/deviates.h"

namespace probewright::emulated {

bool is_open(const Contact& contact, double time_s) {
  constexpr double window_s = 0.020, gap_s = 0.004;  // at most one gap in each window, whole inside it
  if (contact.gaps_per_s <= 0.0) return false;
  const double window = std::floor(time_s / window_s);
  Deviates deviates(derived_seed(contact.seed, static_cast<std::uint64_t>(window)));
  if (deviates.uniform() >= contact.gaps_per_s * window_s) return false;
  const double since_gap_s = time_s - window * window_s - deviates.uniform() * (window_s - gap_s);
  return since_gap_s >= 0.0 && since_gap_s < gap_s;
}

}  // namespace probewright::emulated
