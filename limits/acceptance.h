#pragma once
#include "limits/sheet.h"

namespace probewright::limits {

/// Width of the guard band in the unit of the check: factor x U (ISO 14253-1), or the one-sided normal quantile of the
/// risk times the standard uncertainty U / 2 (JCGM 106:2012 clause 8). Not rounded; risk in (0, 0.5].
double guard_band(const Guard& guard, double expanded_uncertainty);

/// Limits moved inwards by the guard band, as fixed numbers (fixed_number.h), so that the signed form shows exactly
/// what is applied.
Limits acceptance_limits(const Limits& limits, const Guard& guard, double expanded_uncertainty);

/// Probability that the true value lies within `limits` when a reading stands on the acceptance limit that is worse
/// off; 1 when there is no limit. The uncertainty is the declared one, normal.
double conformance_at_acceptance(const Limits& limits, const Limits& acceptance, double expanded_uncertainty);

}  // namespace probewright::limits
