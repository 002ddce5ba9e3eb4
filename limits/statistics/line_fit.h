#pragma once
#include <span>

#include "station/base/result.h"

namespace probewright::limits::statistics {

/// A straight line through points, y = intercept + slope x, with what is known about it.
struct LineFit {
  double intercept = 0.0, slope = 0.0;
  double intercept_error = 0.0, slope_error = 0.0;  ///< standard errors, from the residuals
  double residual_sd = 0.0;                         ///< with n - 2 degrees of freedom
  double r_squared = 0.0;           ///< share of the spread of y that the line explains; 1 if y has none
  double degrees_of_freedom = 0.0;  ///< n - 2
};

/// Ordinary least squares, both sums taken about the means (two passes), so that large offsets cost no digits.
/// x, y    n values each, n >= 3, finite; x not all equal
/// errors  line_fit_sizes, line_fit_not_finite, line_fit_no_spread
/// source  standard normal equations; checked against NIST StRD "Norris"
Result<LineFit> fit_line(std::span<const double> x, std::span<const double> y);

}  // namespace probewright::limits::statistics
