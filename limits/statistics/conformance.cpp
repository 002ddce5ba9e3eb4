#include "limits/statistics/conformance.h"

#include "limits/statistics/normal.h"

namespace probewright::limits::statistics {

double conformance_probability(double value, double standard_uncertainty, const Limits& tolerance) {
  if (standard_uncertainty == 0.0) return tolerance.contain(value) ? 1.0 : 0.0;
  const double below = tolerance.lower ? normal_below((*tolerance.lower - value) / standard_uncertainty) : 0.0;
  const double above = tolerance.upper ? normal_above((*tolerance.upper - value) / standard_uncertainty) : 0.0;
  return 1.0 - below - above;
}

}  // namespace probewright::limits::statistics
