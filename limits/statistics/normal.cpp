#include "limits/statistics/normal.h"

#include <boost/math/special_functions/erf.hpp>
#include <cmath>
#include <numbers>
#include <stdexcept>

namespace probewright::limits::statistics {

using std::numbers::inv_sqrtpi;
using std::numbers::sqrt2;

double normal_density(double z) { return inv_sqrtpi / sqrt2 * std::exp(-0.5 * z * z); }

double normal_below(double z) { return 0.5 * std::erfc(-z / sqrt2); }

double normal_above(double z) { return 0.5 * std::erfc(z / sqrt2); }

double normal_quantile(double p) {
  if (!(p > 0.0 && p < 1.0))
    throw std::domain_error("a quantile is asked for a probability that is not between 0 and 1");
  return -sqrt2 * boost::math::erfc_inv(2.0 * p);
}

}  // namespace probewright::limits::statistics
