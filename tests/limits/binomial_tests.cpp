#include "limits/statistics/binomial.h"

#include <gtest/gtest.h>

#include <cmath>
#include <stdexcept>

#include "tests/support/expect.h"

namespace probewright::limits::statistics {
namespace {

void expect_interval(const Interval& interval, double low, double high, double within) {
  expect_within(interval.low, low, within);
  expect_within(interval.high, high, within);
}

// Source: R. G. Newcombe, Statistics in Medicine 17 (1998) 857, table I, the exact method (from memory).
TEST(ExactInterval, AgreesWithNewcombe) {
  expect_interval(exact_interval(81, 263, 0.95), 0.2527, 0.3676, 6e-5);  // the table has 4 digits
  expect_interval(exact_interval(15, 148, 0.95), 0.0578, 0.1617, 6e-5);
  expect_interval(exact_interval(0, 20, 0.95), 0.0000, 0.1684, 6e-5);
  expect_interval(exact_interval(1, 29, 0.95), 0.0009, 0.1776, 6e-5);
}

// Source: NIST/SEMATECH e-Handbook of Statistical Methods, 7.2.4.1: 4 failures of 20, 90 % (from memory).
TEST(ExactInterval, AgreesWithTheNistHandbook) {
  expect_interval(exact_interval(4, 20, 0.90), 0.071354, 0.401029, 1e-6);
}

// Source: closed forms: with none of n the upper end solves (1 - p)^n = risk, with all of n the lower one p^n = risk.
TEST(ExactInterval, HasItsClosedFormsAtTheEnds) {
  for (const long long n : {1LL, 20LL, 1000LL, 1000000LL})
    for (const double confidence : {0.90, 0.95, 0.999}) {
      const double risk = 0.5 * (1.0 - confidence), root = std::pow(risk, 1.0 / static_cast<double>(n));
      const Interval none = exact_interval(0, n, confidence), all = exact_interval(n, n, confidence);
      EXPECT_EQ(none.low, 0.0);
      EXPECT_EQ(all.high, 1.0);
      expect_within(none.high, -std::expm1(std::log(risk) / static_cast<double>(n)), 1e-12);
      expect_within(all.low, root, 1e-12);
    }
}

/// Probability of at most k successes of n, summed term by term.
double at_most(long long k, long long n, double p) {
  double sum = 0.0;
  for (long long i = 0; i <= k; ++i) {
    const auto hits = static_cast<double>(i), misses = static_cast<double>(n - i);
    sum += std::exp(std::lgamma(hits + misses + 1.0) - std::lgamma(hits + 1.0) - std::lgamma(misses + 1.0) +
                    hits * std::log(p) + misses * std::log1p(-p));
  }
  return sum;
}

// Source: the definition: at either end what was seen, or more extreme, has half of the risk.
TEST(ExactInterval, LeavesHalfOfTheRiskOnEachSide) {
  for (const long long k : {1LL, 7LL, 60LL, 99LL}) {
    const Interval interval = exact_interval(k, 100, 0.95);
    expect_within(at_most(k, 100, interval.high), 0.025, 1e-9);
    expect_within(1.0 - at_most(k - 1, 100, interval.low), 0.025, 1e-9);
  }
}

TEST(ExactInterval, KnowsNothingWithoutTrialsAndRefusesNonsense) {
  EXPECT_EQ(exact_interval(0, 0, 0.95), (Interval{0.0, 1.0}));
  EXPECT_THROW(exact_interval(2, 1, 0.95), std::domain_error);
  EXPECT_THROW(exact_interval(-1, 1, 0.95), std::domain_error);
  EXPECT_THROW(exact_interval(1, 2, 1.0), std::domain_error);
  EXPECT_THROW(exact_interval(1, 2, std::nan("")), std::domain_error);
}

}  // namespace
}  // namespace probewright::limits::statistics
