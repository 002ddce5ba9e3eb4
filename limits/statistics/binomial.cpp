#include "limits/statistics/binomial.h"

#include <boost/math/distributions/beta.hpp>
#include <stdexcept>

namespace probewright::limits::statistics {

Interval exact_interval(long long successes, long long trials, double confidence) {
  if (!(successes >= 0 && successes <= trials)) throw std::domain_error("more successes than trials, or below none");
  if (!(confidence > 0.0 && confidence < 1.0)) throw std::domain_error("a confidence lies between 0 and 1");
  const double risk = 0.5 * (1.0 - confidence);
  const auto x = static_cast<double>(successes), rest = static_cast<double>(trials - successes);
  Interval interval;
  if (successes > 0) interval.low = boost::math::quantile(boost::math::beta_distribution<>{x, rest + 1.0}, risk);
  if (successes < trials)
    interval.high = boost::math::quantile(complement(boost::math::beta_distribution<>{x + 1.0, rest}, risk));
  return interval;
}

}  // namespace probewright::limits::statistics
