#include "station/trace/rails.h"

#include <gtest/gtest.h>

#include "tests/made/ledger.h"

namespace probewright::trace {
namespace {

// By hand, for limits 655 to 665 and acceptance 656 to 664 nm: half width 4, middle 660. 662: (662 - 660) / 4 = 0.5;
// guard strips 1 / 4; U = 0.3 gives 0.075.
TEST(RailMark, TwoLimitsStandAtMinusAndPlusOne) {
  const auto mark = rail_mark(made::centroid(662.0)).value();
  EXPECT_DOUBLE_EQ(mark.position, 0.5);
  EXPECT_DOUBLE_EQ(mark.guard_below, 0.25);
  EXPECT_DOUBLE_EQ(mark.guard_above, 0.25);
  EXPECT_DOUBLE_EQ(mark.whisker, 0.075);
  EXPECT_TRUE(mark.has_lower && mark.has_upper);
  EXPECT_DOUBLE_EQ(rail_mark(made::centroid(656.0))->position, -1.0);
  EXPECT_DOUBLE_EQ(rail_mark(made::centroid(670.0))->position, 2.5);
  EXPECT_EQ(rail_mark(made::centroid(670.0))->standing, Standing::outside);
}

// Up to 5 nA, accepted up to 4.8, margin 1 at 0.8: one unit of the scale is 4 nA. 2.8: margin 0.5, so 0.5 from the
// typical value at 0; guard strip 0.2 / 4; U = 0.1 gives 0.025.
TEST(RailMark, OneLimitHasTheTypicalValueAtZero) {
  const auto mark = rail_mark(made::dark_current(2.8)).value();
  EXPECT_DOUBLE_EQ(mark.position, 0.5);
  EXPECT_NEAR(mark.guard_above, 0.05, 1e-12);
  EXPECT_NEAR(mark.whisker, 0.025, 1e-12);
  EXPECT_FALSE(mark.has_lower);
  EXPECT_NEAR(rail_mark(made::dark_current(0.8))->position, 0.0, 1e-12);
  EXPECT_NEAR(rail_mark(made::dark_current(8.8))->position, 2.0, 1e-12);
}

// The same turned round: from 2 up, accepted from 2.2, typical 6.2, so the scale is 4 again and 4.2 stands at -0.5.
TEST(RailMark, ALowerLimitAloneLiesAtMinusOne) {
  db::ReadingRow row = made::dark_current(4.2);
  row.upper.reset(), row.acceptance_upper.reset();
  row.lower = 2.0, row.acceptance_lower = 2.2;
  row.margin = (4.2 - 2.2) / 4.0;
  const auto mark = rail_mark(row).value();
  EXPECT_DOUBLE_EQ(mark.position, -0.5);
  EXPECT_NEAR(mark.guard_below, 0.05, 1e-12);
}

TEST(RailMark, OnALimitTheScaleIsNotKnownAndNothingIsDividedByZero) {
  const auto mark = rail_mark(made::dark_current(4.8)).value();
  EXPECT_DOUBLE_EQ(mark.position, 1.0);
  EXPECT_DOUBLE_EQ(mark.whisker, 0.0);
  EXPECT_DOUBLE_EQ(mark.guard_above, 0.0);
}

TEST(RailMark, WhatWasNotJudgedByNumbersHasNone) {
  db::ReadingRow none = made::centroid(660.0);
  none.value.reset();
  EXPECT_FALSE(rail_mark(none));
  db::ReadingRow recorded = made::centroid(660.0);
  recorded.margin.reset();
  EXPECT_FALSE(rail_mark(recorded));
  db::ReadingRow yes;
  yes.check = "probe_present", yes.unit = "yes/no", yes.value = 1.0, yes.margin = 1.0;
  EXPECT_FALSE(rail_mark(yes));
}

}  // namespace
}  // namespace probewright::trace
