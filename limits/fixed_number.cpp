#include "limits/fixed_number.h"

#include <array>
#include <charconv>
#include <cmath>

namespace probewright::limits {

double fixed_number(double value) {
  if (!std::isfinite(value)) return value;
  std::array<char, 32> text{};
  char* const first = text.data();
  const auto written = std::to_chars(first, first + text.size(), value, std::chars_format::scientific, 9);
  double rounded = value;
  std::from_chars(first, written.ptr, rounded);
  return rounded == 0.0 ? 0.0 : rounded;  // no negative zero in a document
}

}  // namespace probewright::limits
