#include "limits/acceptance.h"

#include <gtest/gtest.h>

#include <cmath>

#include "limits/fixed_number.h"
#include "sample_sheet.h"
#include "tests/support/expect.h"
#include "tests/support/reference.h"

namespace probewright::limits {
namespace {

TEST(Acceptance, FactorTimesUMovesBothLimitsInwards) {
  const Limits accept = acceptance_limits({-1.0, 1.0}, {Guard::Kind::factor, 0.83}, 0.195);
  EXPECT_EQ(accept, (Limits{-0.83815, 0.83815}));  // by hand: 1 - 0.83 * 0.195
}

TEST(Acceptance, AnOpenSideStaysOpen) {
  const Limits accept = acceptance_limits({std::nullopt, 0.30}, {Guard::Kind::factor, 0.83}, 0.05);
  EXPECT_EQ(accept, (Limits{std::nullopt, 0.2585}));
}

TEST(Acceptance, WithoutGuardTheLimitsAreAccepted) {
  const Limits limits{655.0, 665.0};
  EXPECT_EQ(acceptance_limits(limits, {}, 0.33), limits);
}

// Source: JCGM 106:2012 Table 1, z for p_c = 0.95 (recalled 1.64; recomputed to 9 digits).
TEST(Acceptance, RiskTakesTheOneSidedQuantile) {
  const double z =
      reference::load("jcgm106_examples.csv").number_where("quantity", "Table 1 z for p_c 0.95", "recomputed");
  expect_relative(guard_band({Guard::Kind::risk, 0.05}, 0.4), z * 0.2, 1e-8);
}

// Source: JCGM 106:2012 clause 8.3.2, w = U = 2u: p_c 0.977 at the acceptance limit.
TEST(Acceptance, FullGuardBandLeavesTwoPercent) {
  const auto table = reference::load("jcgm106_examples.csv");
  const double wanted = table.number_where(
      "quantity", "8.3.2 guard band w = U = 2u: p_c at the acceptance limit (one limit)", "recomputed");
  const Limits limits{std::nullopt, 10.0};
  const Limits accept = acceptance_limits(limits, {Guard::Kind::factor, 1.0}, 0.5);
  expect_relative(conformance_at_acceptance(limits, accept, 0.5), wanted, 1e-8);
}

TEST(Acceptance, TheDemonstrationsGuardIsNinetyFivePercent) {
  const CheckRule rule = *sample_sheet().find("saturation_error_70");
  const double p = conformance_at_acceptance(rule.limits, rule.acceptance, rule.expanded_uncertainty);
  EXPECT_GE(p, 0.95);
  EXPECT_LT(p, 0.953);
}

TEST(Acceptance, RiskOnTheSheetIsTheRiskAtTheAcceptanceLimit) {
  const CheckRule rule = *sample_sheet().find("secondary_emission");
  expect_within(conformance_at_acceptance(rule.limits, rule.acceptance, rule.expanded_uncertainty), 0.95, 1e-8);
}

TEST(FixedNumber, IsTheDecimalThatAPersonComputes) {
  EXPECT_EQ(fixed_number(0.1 + 0.2), 0.3);
  EXPECT_EQ(fixed_number(20.0 * 1.02), 20.4);
  EXPECT_EQ(fixed_number(-1.0 + 0.83 * 0.195), -0.83815);
  EXPECT_EQ(fixed_number(1.0 / 3.0), 0.3333333333);
  EXPECT_EQ(fixed_number(2.0 / 3.0 * 1e-7), 6.666666667e-8);
  EXPECT_FALSE(std::signbit(fixed_number(-0.0)));
}

}  // namespace
}  // namespace probewright::limits
