#include "station/base/units.h"

#include <gtest/gtest.h>

#include "tests/support/expect.h"

namespace probewright {
namespace {

double convert(std::string_view text, std::string_view unit) {
  const auto quantity = parse_quantity(text);
  return in_unit(quantity.value(), unit).value();
}

TEST(Units, ReadsWhatPeopleWrite) {
  const auto expect = [](std::string_view text, double value, std::string_view unit) {
    const auto quantity = parse_quantity(text);
    ASSERT_TRUE(quantity.has_value()) << text << ": " << quantity.error().text();
    EXPECT_EQ(quantity->value, value) << text;
    EXPECT_EQ(quantity->unit, unit) << text;
  };
  expect("655.0 nm", 655.0, "nm");
  expect("10.2 kohm", 10.2, "kohm");
  expect("2 %", 2.0, "%");
  expect("2%", 2.0, "%");
  expect("-1.0 points", -1.0, "points");
  expect("+1.0 %SpO2", 1.0, "%SpO2");
  expect("  25 degC ", 25.0, "degC");
  expect("1.5e-3 A", 0.0015, "A");
  expect("120 nA/mA", 120.0, "nA/mA");
  expect("0.5", 0.5, "");
}

// Source: SI Brochure, 9th edition, table 7 (prefixes): each result must be the double nearest to the decimal number.
TEST(Units, ScalesExactly) {
  EXPECT_EQ(convert("260 uA", "mA"), 0.26);
  EXPECT_EQ(convert("0.02 A", "mA"), 20.0);
  EXPECT_EQ(convert("1.3 pA", "nA"), 0.0013);
  EXPECT_EQ(convert("10.2 kohm", "ohm"), 10200.0);
  EXPECT_EQ(convert("1.1 Mohm", "kohm"), 1100.0);
  EXPECT_EQ(convert("1850 mV", "V"), 1.85);
  EXPECT_EQ(convert("0.66 um", "nm"), 660.0);
  EXPECT_EQ(convert("250 us", "ms"), 0.25);
  EXPECT_EQ(convert("1.5 min", "s"), 90.0);
  EXPECT_EQ(convert("2 h", "min"), 120.0);
  EXPECT_EQ(convert("1 points", "%SpO2"), 1.0);
  EXPECT_EQ(convert("7", "1"), 7.0);
  for (const char* unit : {"nm", "mA", "V", "mV", "nA", "uA", "ohm", "nA/mA", "%", "%SpO2", "degC"})
    EXPECT_EQ(convert("655.04 " + std::string{unit}, unit), 655.04) << unit;  // its own unit: untouched
}

// Source: SI Brochure, 9th edition, 2.3.1: t/degC = T/K - 273.15.
TEST(Units, DegreesCelsius) {
  EXPECT_EQ(convert("25 degC", "K"), 298.15);
  expect_within(convert("298.15 K", "degC"), 25.0, 1e-12);
}

TEST(Units, RefusesWhatIsNoNumber) {
  for (const char* bad : {"", "nm", "1,5 nm", "1.5.2 nm", "0x10 nm", "--5 nm", "+-5 nm", "5 -", "1.2-1.4 nm", "%"}) {
    const auto quantity = parse_quantity(bad, "here");
    ASSERT_TRUE(quantity.has_error()) << bad;
    EXPECT_TRUE(quantity.error().id == "number_malformed" || quantity.error().id == "unit_unknown") << bad;
    EXPECT_EQ(quantity.error().where, "here");
  }
  EXPECT_EQ(parse_quantity("1,5 nm").error().id, "number_malformed");
  for (const char* bad : {"nan nm", "inf", "-inf mA", "1e999 nm"})
    EXPECT_EQ(parse_quantity(bad).error().id, "number_not_finite") << bad;
}

TEST(Units, NamesTheNearestUnit) {
  const auto nearest = [](std::string_view text) {
    const auto quantity = parse_quantity(text);
    EXPECT_TRUE(quantity.has_error()) << text;
    return quantity.has_error() ? quantity.error().remedy() : "";
  };
  EXPECT_EQ(nearest("660 nM"), "did you mean \"nm\"?");
  EXPECT_EQ(nearest("20 ma"), "did you mean \"mA\"?");
  EXPECT_EQ(nearest("20 \u00B5A"), "did you mean \"uA\"?");
  EXPECT_EQ(nearest("10 k\u03A9"), "did you mean \"kohm\"?");
  EXPECT_EQ(nearest("25 \u00B0C"), "did you mean \"degC\"?");
  EXPECT_EQ(nearest("1 point"), "did you mean \"points\"?");
  EXPECT_EQ(nearest("10 Ohms"), "did you mean \"ohm\"?");
  EXPECT_EQ(nearest("98 %spo2"), "did you mean \"%SpO2\"?");
}

TEST(Units, RefusesAnotherQuantity) {
  const auto mismatch = in_unit(Quantity{20.0, "mA"}, "nm", "sheet.yaml:6:40");
  ASSERT_TRUE(mismatch.has_error());
  EXPECT_EQ(mismatch.error().id, "unit_mismatch");
  EXPECT_EQ(
      mismatch.error().text(),
      "sheet.yaml:6:40: \"mA\" is a current, but a length belongs here (write the number in nm or a multiple of it)");
  EXPECT_EQ(in_unit(Quantity{2.0, "%"}, "%SpO2").error().id, "unit_mismatch");
  EXPECT_EQ(in_unit(Quantity{2.0, "%"}, "1").error().id, "unit_mismatch");
  EXPECT_EQ(in_unit(Quantity{2.0, ""}, "nm").error().id, "unit_missing");
  EXPECT_EQ(in_unit(Quantity{2.0, "nm"}, "furlong").error().id, "unit_unknown");
  EXPECT_EQ(parse_quantity("1 yes/no").error().id, "unit_unknown");  // nothing that is written after a number
}

TEST(Units, Dimensions) {
  EXPECT_EQ(dimension_of("kohm").value(), Dimension::resistance);
  EXPECT_EQ(dimension_of("points").value(), dimension_of("%SpO2").value());
  EXPECT_EQ(dimension_of("1").value(), Dimension::none);
  EXPECT_EQ(dimension_of("").error().id, "unit_unknown");
}

}  // namespace
}  // namespace probewright
