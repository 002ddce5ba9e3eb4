#pragma once
#include <span>

#include "limits/statistics/binomial.h"

namespace probewright::limits::statistics {

/// How many of a group's members have something.
struct GroupShare {
  long long count = 0, of = 0;
};

/// A share in several groups that were drawn from many.
struct SharesOfGroups {
  int groups = 0;                                ///< with members
  double share = 0.0;                            ///< of all members together
  double least = 0.0, median = 0.0, most = 0.0;  ///< of the groups' own shares, what chance did among them
  double between_sd = 0.0;                       ///< standard deviation between groups, chance taken out; 0 at least
  Interval mean;                                 ///< of the share over all groups there could be; 0 to 1 below 2 groups
};

/// Groups without members are passed over.
/// between_sd  sum of n (p - mean)^2, less what chance makes of it, by the method of moments of a one-way random model
/// mean        ratio estimate over clusters of unequal size with Student's quantile; cut at 0 and 1. It knows nothing
/// of
///             what no group has: where the count is 0, take the exact interval.
/// source      W. G. Cochran, Sampling Techniques, 3rd ed. (1977), chapters 6.3 and 9A (from memory)
/// Throws std::domain_error when a count lies outside its group, or unless 0 < confidence < 1.
SharesOfGroups shares_of_groups(std::span<const GroupShare> groups, double confidence);

}  // namespace probewright::limits::statistics
