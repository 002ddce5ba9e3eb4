#include "limits/statistics/group_shares.h"

#include <gtest/gtest.h>

#include <cmath>
#include <random>
#include <stdexcept>
#include <vector>

#include "tests/support/expect.h"

namespace probewright::limits::statistics {
namespace {

// Source: by hand. Shares 0.1, 0.2, 0.3 of 100 each: mean 0.2, sum of n (p - mean)^2 = 2; chance makes 2 x 0.16 of it;
// what is left over 300 - 100 is 0.0084. The mean's error is sqrt(200 x 3 / 2) / 300 = 0.057735, Student's quantile
// with 2 degrees of freedom 4.30265 (GUM, Table G.2).
TEST(SharesOfGroups, AgreesWithSumsByHand) {
  const std::vector<GroupShare> groups{{20, 100}, {10, 100}, {0, 0}, {30, 100}};
  const SharesOfGroups shares = shares_of_groups(groups, 0.95);
  EXPECT_EQ(shares.groups, 3);
  expect_within(shares.share, 0.2, 1e-15);
  EXPECT_EQ(shares.least, 0.1);
  EXPECT_EQ(shares.median, 0.2);
  EXPECT_EQ(shares.most, 0.3);
  expect_within(shares.between_sd, std::sqrt(0.0084), 1e-12);
  expect_within(shares.mean.high, 0.2 + 4.30265 * 0.0577350, 1e-5);
  EXPECT_EQ(shares.mean.low, 0.0);  // cut
}

// Source: simulation: groups whose true shares spread by a known standard deviation.
TEST(SharesOfGroups, FindsASpreadAndCoversTheMean) {
  std::mt19937_64 random(5);
  constexpr int times = 400, groups = 40, members = 500;
  constexpr double mean = 0.06, sd = 0.02;
  int covered = 0;
  double sum = 0.0;
  for (int i = 0; i < times; ++i) {
    std::vector<GroupShare> drawn;
    for (int g = 0; g < groups; ++g) {
      const double own =
          std::uniform_real_distribution<>(mean - sd * std::sqrt(3.0), mean + sd * std::sqrt(3.0))(random);
      drawn.push_back({std::binomial_distribution<long long>(members, own)(random), members});
    }
    const SharesOfGroups shares = shares_of_groups(drawn, 0.95);
    sum += shares.between_sd * shares.between_sd / times;
    covered += shares.mean.low <= mean && mean <= shares.mean.high ? 1 : 0;
  }
  expect_relative(std::sqrt(sum), sd, 0.05);
  EXPECT_GE(covered, 364);  // 95 % of 400 less four standard deviations of the count
  EXPECT_LE(covered, 396);
}

TEST(SharesOfGroups, TellsNoSpreadWhereThereIsNone) {
  const std::vector<GroupShare> alike(10, GroupShare{5, 50});
  EXPECT_EQ(shares_of_groups(alike, 0.95).between_sd, 0.0);
}

TEST(SharesOfGroups, KnowsLittleOfOneGroupAndNothingOfNone) {
  const std::vector<GroupShare> one{{1, 4}};
  EXPECT_EQ(shares_of_groups(one, 0.95).mean, (Interval{0.0, 1.0}));
  EXPECT_EQ(shares_of_groups(one, 0.95).share, 0.25);
  EXPECT_EQ(shares_of_groups({}, 0.95).groups, 0);
  const std::vector<GroupShare> wrong{{5, 4}};
  EXPECT_THROW(shares_of_groups(wrong, 0.95), std::domain_error);
  EXPECT_THROW(shares_of_groups(one, 1.0), std::domain_error);
}

}  // namespace
}  // namespace probewright::limits::statistics
