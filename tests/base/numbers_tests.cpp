#include "station/base/numbers.h"

#include <gtest/gtest.h>

#include <cmath>
#include <cstdio>
#include <cstdlib>
#include <cstring>
#include <limits>

#include "station/base/entropy.h"

namespace probewright {
namespace {

// Source: IEEE 754-2019 clause 5.12.2: 17 significant digits always read back as the same binary64; shortest is never
// longer.
TEST(Numbers, ShortestReadsBackAsTheSameDouble) {
  SeededEntropy entropy{2026};
  for (int i = 0; i < 20'000; ++i) {
    const std::uint64_t bits = entropy.next();
    double value;
    static_assert(sizeof value == sizeof bits);
    std::memcpy(&value, &bits, sizeof value);
    if (!std::isfinite(value)) continue;
    const std::string text = shortest(value);
    ASSERT_EQ(parse_double(text), value) << text;
    ASSERT_LE(text.size(), 24u) << text;
  }
}

TEST(Numbers, ShortestIsShort) {
  EXPECT_EQ(shortest(0.1), "0.1");
  EXPECT_EQ(shortest(655.0), "655");
  EXPECT_EQ(shortest(-0.26), "-0.26");
  EXPECT_EQ(shortest(1e-9), "1e-09");
  EXPECT_EQ(shortest(5e-324), "5e-324");  // the smallest double, IEEE 754
}

TEST(Numbers, FixedHasAPointAndNoGroups) {
  EXPECT_EQ(fixed(1234567.5, 2), "1234567.50");
  EXPECT_EQ(fixed(655.04, 1), "655.0");
  EXPECT_EQ(fixed(2.5, 0), "2");  // a tie goes to even, IEEE 754-2019 4.3.1
  EXPECT_EQ(fixed(-0.001, 2), "0.00");
  EXPECT_EQ(fixed(-0.006, 2), "-0.01");
  EXPECT_EQ(fixed(std::numeric_limits<double>::max(), 3).size(), 313u);
}

TEST(Numbers, ParseTakesTheWholeTextOrNothing) {
  EXPECT_EQ(parse_double("655.0"), 655.0);
  EXPECT_EQ(parse_double("-1e-3"), -0.001);
  for (const char* bad :
       {"", " 1", "1 ", "1,5", "1.5.2", "0x10", "nan", "inf", "-infinity", "1e999", "--1", "1e", "+1"})
    EXPECT_EQ(parse_double(bad), std::nullopt) << bad;
  EXPECT_EQ(parse_integer("-42"), -42);
  EXPECT_EQ(parse_integer("9223372036854775807"), std::numeric_limits<long long>::max());
  for (const char* bad : {"", "4.0", "4 ", "1.000", "9223372036854775808", "0x4", "+4"})
    EXPECT_EQ(parse_integer(bad), std::nullopt) << bad;
}

// The runner says when it runs the tests under a locale with a decimal comma; without this test that run could
// be one in the plain locale and nobody would know.
TEST(Numbers, TheLocaleOfTheRunIsInForce) {
  const char* asked = std::getenv("PW_DECIMAL_COMMA");
  char text[8];
  std::snprintf(text, sizeof text, "%.1f", 0.5);
  if (asked != nullptr && std::string_view{asked} == "1")
    EXPECT_STREQ(text, "0,5");
  else
    EXPECT_TRUE(std::string_view{text} == "0.5" || std::string_view{text} == "0,5");
}

}  // namespace
}  // namespace probewright
