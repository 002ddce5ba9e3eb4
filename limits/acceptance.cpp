#include "limits/acceptance.h"

#include <algorithm>

#include "limits/fixed_number.h"
#include "limits/statistics/conformance.h"
#include "limits/statistics/normal.h"

namespace probewright::limits {

double guard_band(const Guard& guard, double expanded_uncertainty) {
  switch (guard.kind) {
    case Guard::Kind::none:
      return 0.0;
    case Guard::Kind::factor:
      return guard.amount * expanded_uncertainty;
    case Guard::Kind::risk:
      return -statistics::normal_quantile(guard.amount) * 0.5 * expanded_uncertainty;
  }
  return 0.0;
}

Limits acceptance_limits(const Limits& limits, const Guard& guard, double expanded_uncertainty) {
  const double band = guard_band(guard, expanded_uncertainty);
  Limits acceptance;
  if (limits.lower) acceptance.lower = fixed_number(*limits.lower + band);
  if (limits.upper) acceptance.upper = fixed_number(*limits.upper - band);
  return acceptance;
}

double conformance_at_acceptance(const Limits& limits, const Limits& acceptance, double expanded_uncertainty) {
  double worst = 1.0;
  for (const auto& reading : {acceptance.lower, acceptance.upper})
    if (reading)
      worst = std::min(worst, statistics::conformance_probability(*reading, 0.5 * expanded_uncertainty, limits));
  return worst;
}

}  // namespace probewright::limits
