#pragma once
#include <optional>

namespace probewright::limits {

/// One or two limits of a quantity, in the unit of the check; a limit that is not there is open.
struct Limits {
  std::optional<double> lower, upper;

  bool any() const { return lower || upper; }
  bool two_sided() const { return lower && upper; }
  /// A value on a limit is inside. NaN is never inside.
  bool contain(double value) const {
    const bool above_lower = !lower || value >= *lower;
    const bool below_upper = !upper || value <= *upper;
    return above_lower && below_upper && value == value;
  }
  bool operator==(const Limits&) const = default;
};

}  // namespace probewright::limits
