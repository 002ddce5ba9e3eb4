#pragma once

namespace probewright::limits::statistics {

struct Interval {
  double low = 0.0, high = 1.0;
  bool operator==(const Interval&) const = default;
};

/// Confidence interval of a probability from `successes` of `trials` independent trials, each end with a risk of
/// (1 - confidence) / 2 at most: exact, hence somewhat wide. Without a trial it is 0 to 1.
/// Throws std::domain_error unless 0 <= successes <= trials and 0 < confidence < 1.
/// Source: Clopper and Pearson, Biometrika 26 (1934) 404.
Interval exact_interval(long long successes, long long trials, double confidence);

}  // namespace probewright::limits::statistics
