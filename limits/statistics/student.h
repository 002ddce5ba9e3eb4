#pragma once

namespace probewright::limits::statistics {

/// Quantile of Student's distribution: the t that stays above a fraction p of it.
/// degrees_of_freedom  > 0; infinity gives the normal quantile
/// Throws std::domain_error unless 0 < p < 1 and degrees_of_freedom > 0.
double student_quantile(double p, double degrees_of_freedom);

/// Coverage factor k of JCGM 100:2008 (GUM) Annex G: an interval of +-k standard uncertainties holds the fraction
/// `coverage` (0.9545 for 95.45 %). Errors as above.
double coverage_factor(double coverage, double degrees_of_freedom);

}  // namespace probewright::limits::statistics
