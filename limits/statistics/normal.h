#pragma once

namespace probewright::limits::statistics {

/// Density of the standard normal distribution at z.
double normal_density(double z);
/// Probability that a standard normal value is at most z.
double normal_below(double z);
/// Probability that a standard normal value is above z; keeps its digits far out, where 1 - normal_below(z) has none.
double normal_above(double z);
/// The z that a standard normal value stays below with probability p. Throws std::domain_error unless 0 < p < 1.
double normal_quantile(double p);

}  // namespace probewright::limits::statistics
