#include "station/base/times.h"

#include <gtest/gtest.h>

#include <ctime>

#include "station/base/clock.h"
#include "station/base/entropy.h"

namespace probewright {
namespace {

constexpr std::int64_t us = 1'000'000;

// Source: POSIX.1 "seconds since the Epoch" and RFC 3339 section 5.8, whose examples are given here in UTC.
TEST(Times, KnownMoments) {
  EXPECT_EQ(to_text(UtcTime{0}), "1970-01-01T00:00:00.000000Z");
  EXPECT_EQ(to_text(UtcTime{1'000'000'000 * us}), "2001-09-09T01:46:40.000000Z");
  EXPECT_EQ(to_text(UtcTime{2'147'483'647 * us}), "2038-01-19T03:14:07.000000Z");
  EXPECT_EQ(to_text(UtcTime{-1}), "1969-12-31T23:59:59.999999Z");
  EXPECT_EQ(parse_utc("1985-04-12T23:20:50.52Z")->microseconds, 482'196'050'520'000);
  EXPECT_EQ(to_text(*parse_utc("1985-04-12T23:20:50.52Z")), "1985-04-12T23:20:50.520000Z");
  EXPECT_EQ(to_text(*parse_utc("1996-12-20T00:39:57Z")), "1996-12-20T00:39:57.000000Z");
}

TEST(Times, ReadsBackWhatItWrites) {
  SeededEntropy entropy{7};
  for (int i = 0; i < 5000; ++i) {
    const UtcTime time{static_cast<std::int64_t>(entropy.next() % 250'000'000'000'000'000u)};  // to the year 9892
    ASSERT_EQ(parse_utc(to_text(time)).value(), time) << to_text(time);
  }
}

// Outside reference: the C library's gmtime_r on the same moments.
TEST(Times, AgreesWithTheCLibrary) {
  SeededEntropy entropy{8};
  for (int i = 0; i < 2000; ++i) {
    const std::time_t seconds_since = static_cast<std::time_t>(entropy.next() % 250'000'000'000u);
    std::tm parts{};
    ASSERT_NE(gmtime_r(&seconds_since, &parts), nullptr);
    char text[40];
    std::strftime(text, sizeof text, "%Y-%m-%dT%H:%M:%S", &parts);
    ASSERT_EQ(to_text(UtcTime{seconds_since * us}), std::string{text} + ".000000Z");
  }
}

// Source: the Gregorian calendar: 2000 and 2400 are leap years, 1900 and 2100 are not.
TEST(Times, LeapDays) {
  for (const char* good : {"2000-02-29T00:00:00Z", "2024-02-29T23:59:59.9Z", "2400-02-29T00:00:00Z"})
    EXPECT_TRUE(parse_utc(good).has_value()) << good;
  for (const char* bad :
       {"1900-02-29T00:00:00Z", "2100-02-29T00:00:00Z", "2026-02-29T00:00:00Z", "2026-04-31T00:00:00Z"})
    EXPECT_TRUE(parse_utc(bad).has_error()) << bad;
}

TEST(Times, RefusesEveryOtherForm) {
  for (const char* bad :
       {"", "2026-12-01", "2026-12-01T05:36:12", "2026-12-01 05:36:12Z", "2026-12-01T05:36:12+00:00",
        "2026-12-01T05:36:12.Z", "2026-12-01T05:36:12.1234567Z", "2026-13-01T05:36:12Z", "2026-00-01T05:36:12Z",
        "2026-12-00T05:36:12Z", "2026-12-01T24:00:00Z", "2026-12-01T05:60:12Z", "2026-12-01T05:36:60Z",
        "2026-12-01T05:36:12Zz", "2026-12-1T05:36:12Z", "+026-12-01T05:36:12Z", "2026-12-01t05:36:12Z",
        "2026-12-01T05:36:12,5Z"}) {
    const auto time = parse_utc(bad);
    ASSERT_TRUE(time.has_error()) << bad;
    EXPECT_EQ(time.error().id, "time_malformed");
  }
}

TEST(Times, SystemClockGoesForward) {
  const SystemClock clock;
  const SteadyTime first = clock.steady_now();
  const UtcTime now = clock.utc_now();
  EXPECT_GE(clock.steady_now(), first);
  EXPECT_LE(std::abs(now.microseconds / us - std::time(nullptr)), 5);
}

TEST(Times, DurationsConvert) {
  EXPECT_EQ(seconds(std::chrono::milliseconds{1500}), 1.5);
  EXPECT_EQ(from_seconds(0.25), Duration{250'000'000});
  const SteadyTime start{Duration{10}};
  EXPECT_EQ((start + Duration{5}) - start, Duration{5});
}

}  // namespace
}  // namespace probewright
