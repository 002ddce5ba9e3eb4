#include "station/base/deviates.h"

#include <cmath>
#include <numbers>

namespace probewright {

double uniform_deviate(Entropy& entropy) { return static_cast<double>(entropy.next() >> 11) * 0x1p-53; }

double normal_deviate(Entropy& entropy) {
  const double above_zero = 1.0 - uniform_deviate(entropy);  // (0, 1]: its logarithm is finite
  const double turn = uniform_deviate(entropy);
  return std::sqrt(-2.0 * std::log(above_zero)) * std::cos(2.0 * std::numbers::pi * turn);
}

}  // namespace probewright
