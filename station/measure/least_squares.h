#pragma once
#include <cstddef>
#include <span>
#include <vector>

#include "station/base/result.h"

namespace probewright::measure {

/// A linear least-squares fit of p coefficients to n values.
struct LinearFit {
  std::vector<double> coefficients;  ///< p
  std::vector<double> covariance;    ///< p x p, row by row
  std::vector<double> residuals;     ///< n, value minus fit, not weighted
  double noise_sd = 0.0;             ///< of one value, from the weighted residuals; 0 when n == p

  double variance(std::size_t i) const { return covariance[i * coefficients.size() + i]; }
  double covariance_of(std::size_t i, std::size_t j) const { return covariance[i * coefficients.size() + j]; }
};

/// Minimises sum w (y - design b)^2 by a column-pivoting Householder factorisation.
/// design   n x p, row by row, n >= p
/// values   n
/// weights  n, not negative; empty: all 1
/// The weights only shape the fit (a window); all values are taken to have the same noise, whose sd is estimated, so
/// covariance = sd^2 (A'WA)^-1 A'W^2A (A'WA)^-1.
/// Errors: fit_impossible (lengths, fewer values than coefficients, columns not independent, a value not finite).
/// Source: ordinary weighted least squares, any text on regression; the covariance is the one of a linear estimator
/// whose weights are not the inverse variances.
Result<LinearFit> fit_linear(std::span<const double> design, std::size_t p, std::span<const double> values,
                             std::span<const double> weights = {});

}  // namespace probewright::measure
