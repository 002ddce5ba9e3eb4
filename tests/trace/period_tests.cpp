#include "station/trace/period.h"

#include <gtest/gtest.h>

namespace probewright::trace {
namespace {

UtcTime utc(std::string_view text) { return parse_utc(text).value(); }

// Central European time is UTC + 1 h in winter, + 2 h in summer; summer time began on 2026-03-29 at 01:00 UTC and ends
// on 2026-10-25 at 01:00 UTC (EU directive 2000/84/EC: last Sundays of March and October).
class PeriodTest : public testing::Test {
 protected:
  const Zone zone = Zone::read("Europe/Amsterdam").value();
};

TEST_F(PeriodTest, ADayBeginsAndEndsByThePlantsClock) {
  EXPECT_EQ(day_in(zone, "2026-12-01").value(), (Period{utc("2026-11-30T23:00:00Z"), utc("2026-12-01T23:00:00Z")}));
  EXPECT_EQ(day_in(zone, "2026-07-01").value(), (Period{utc("2026-06-30T22:00:00Z"), utc("2026-07-01T22:00:00Z")}));
  EXPECT_EQ(day_in(Zone{}, "2026-12-31").value(), (Period{utc("2026-12-31T00:00:00Z"), utc("2027-01-01T00:00:00Z")}));
}

TEST_F(PeriodTest, DaysOfAChangeHave23And25Hours) {
  EXPECT_EQ(day_in(zone, "2026-03-29").value(), (Period{utc("2026-03-28T23:00:00Z"), utc("2026-03-29T22:00:00Z")}));
  EXPECT_EQ(day_in(zone, "2026-10-25").value(), (Period{utc("2026-10-24T22:00:00Z"), utc("2026-10-25T23:00:00Z")}));
}

// Beirut's summer time began on 2025-03-30 at 00:00, which became 01:00 (tz database): that day has no midnight.
TEST_F(PeriodTest, ADayWithoutMidnightBeginsAtTheChange) {
  const Zone beirut = Zone::read("Asia/Beirut").value();
  EXPECT_EQ(day_in(beirut, "2025-03-30").value(), (Period{utc("2025-03-29T22:00:00Z"), utc("2025-03-30T21:00:00Z")}));
}

TEST_F(PeriodTest, MomentsAreReadInTheirForms) {
  EXPECT_EQ(moment_in(zone, "2026-12-01T05:36:12Z").value(), utc("2026-12-01T05:36:12Z"));
  EXPECT_EQ(moment_in(zone, "2026-12-01 06:36").value(), utc("2026-12-01T05:36:00Z"));
  EXPECT_EQ(moment_in(zone, "2026-12-01T06:36:12").value(), utc("2026-12-01T05:36:12Z"));
  EXPECT_EQ(moment_in(zone, "2026-12-01").value(), utc("2026-11-30T23:00:00Z"));
  EXPECT_EQ(moment_in(zone, "2026-03-29 02:30").value(), utc("2026-03-29T01:00:00Z")) << "skipped";
  EXPECT_EQ(moment_in(zone, "2026-10-25 02:30").value(), utc("2026-10-25T00:30:00Z")) << "twice";
}

TEST_F(PeriodTest, WhatIsNoDayOrMomentIsRefused) {
  for (const char* text : {"", "today", "2026-13-01", "2026-02-30", "2026-12-1", "2026-12-01 25:00", "2026-12-01 6:00",
                           "2026-12-01 06:00:00.5", "2026-12-01T06:00:00+01:00", "01.12.2026"}) {
    EXPECT_EQ(moment_in(zone, text).error().id, "moment_malformed") << text;
    EXPECT_EQ(day_in(zone, text).error().id, "day_malformed") << text;
  }
  EXPECT_EQ(day_in(zone, "2026-12-01 06:00").error().id, "day_malformed");
  EXPECT_EQ(day_in(zone, "2026-12-01T06:00:00Z").error().id, "day_malformed");
}

}  // namespace
}  // namespace probewright::trace
