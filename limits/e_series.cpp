#include "limits/e_series.h"

#include <cmath>

namespace probewright::limits {

// In E96 (three digits, one decade) the i-th value is 100 * 10^(i/96), rounded: true for all 96 entries of the
// standard.
bool is_e96(double resistance_ohm) {
  if (!(resistance_ohm >= 1.0) || !std::isfinite(resistance_ohm)) return false;
  double three_digits = resistance_ohm * 100.0;
  while (three_digits >= 999.5) three_digits /= 10.0;
  const double whole = std::round(three_digits);
  if (std::abs(three_digits - whole) > 1e-9 * whole) return false;
  const double step = std::round(96.0 * std::log10(whole / 100.0));
  return std::round(100.0 * std::pow(10.0, step / 96.0)) == whole;
}

}  // namespace probewright::limits
