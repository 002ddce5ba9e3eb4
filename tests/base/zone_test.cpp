#include "station/base/zone.h"

#include <gtest/gtest.h>

namespace probewright {
namespace {

UtcTime utc(const char* text) { return parse_utc(text).value(); }

// Source: tz database, rule EU: summer time from the last Sunday of March to the last Sunday of October, 01:00 UTC.
TEST(Zone, EuropeanSummerTimeChangesAtOneUtc) {
  const auto zone = Zone::read("Europe/Amsterdam");
  ASSERT_TRUE(zone) << zone.error().text();
  EXPECT_EQ(zone->offset_s(utc("2026-03-29T00:59:59Z")), 3600);
  EXPECT_EQ(zone->offset_s(utc("2026-03-29T01:00:00Z")), 7200);
  EXPECT_EQ(zone->offset_s(utc("2026-10-25T00:59:59Z")), 7200);
  EXPECT_EQ(zone->offset_s(utc("2026-10-25T01:00:00Z")), 3600);
}

TEST(Zone, ADayEndsByThePlantsClock) {
  const auto zone = Zone::read("Europe/Amsterdam").value();
  EXPECT_EQ(zone.day(utc("2027-06-30T21:59:59Z")), "2027-06-30");
  EXPECT_EQ(zone.day(utc("2027-06-30T22:00:00Z")), "2027-07-01");
  EXPECT_EQ(zone.local_text(utc("2026-12-01T05:36:12Z")), "2026-12-01 06:36:12");
}

TEST(Zone, UtcIsTheDefault) { EXPECT_EQ(Zone{}.day(utc("2027-06-30T23:59:59Z")), "2027-06-30"); }

TEST(Zone, AnUnknownOrClimbingNameIsRefused) {
  EXPECT_EQ(Zone::read("Nowhere/Quay").error().id, "zone_unknown");
  EXPECT_EQ(Zone::read("../zoneinfo/UTC").error().id, "zone_unknown");
  EXPECT_EQ(Zone::read("tzdata.zi").error().id, "zone_malformed");
}

}  // namespace
}  // namespace probewright
