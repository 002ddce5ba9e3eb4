// The published data itself: a file that was damaged or cut short must not weaken the tests that lean on it.
#include <gtest/gtest.h>

#include <cmath>

#include "tests/support/expect.h"
#include "tests/support/reference.h"

namespace {

// Source: NIST StRD, Norris: the residual standard deviation of the certified line over the 36 points.
TEST(Reference, NorrisReproducesItsOwnResiduals) {
  const auto table = reference::load("nist_strd/Norris.csv");
  const double b0 = reference::number_in(table.notes.at("certified_B0")),
               b1 = reference::number_in(table.notes.at("certified_B1"));
  const auto x = table.numbers("x"), y = table.numbers("y");
  double squares = 0.0;
  for (std::size_t i = 0; i < x.size(); ++i) squares += std::pow(y[i] - b0 - b1 * x[i], 2);
  expect_relative(std::sqrt(squares / 34.0), reference::number_in(table.notes.at("certified_residual_stddev")), 1e-10);
}

// Source: IEC 60063: each value of E96 is 100 * 10^(i/96), rounded.
TEST(Reference, E96FollowsItsFormula) {
  const auto table = reference::load("iec60063_e96.csv");
  const auto index = table.numbers("index"), value = table.numbers("value");
  ASSERT_EQ(value.size(), 96u);
  for (std::size_t i = 0; i < value.size(); ++i)
    EXPECT_EQ(value[i], std::round(100.0 * std::pow(10.0, index[i] / 96.0))) << i;
}

// Source: known features of the Prahl table: values at 660 and 940 nm, equal absorption near 797 nm.
TEST(Reference, HaemoglobinTableIsWhole) {
  const auto table = reference::load("hb_prahl_250_1000nm.csv");
  ASSERT_EQ(table.rows.size(), 376u);
  EXPECT_EQ(table.number_where("wavelength_nm", "660", "HbO2"), 319.6);
  EXPECT_EQ(table.number_where("wavelength_nm", "660", "Hb"), 3226.56);
  EXPECT_EQ(table.number_where("wavelength_nm", "940", "HbO2"), 1214.0);
  EXPECT_EQ(table.number_where("wavelength_nm", "940", "Hb"), 693.44);
  const auto difference = [&](const char* nm) {
    return table.number_where("wavelength_nm", nm, "HbO2") - table.number_where("wavelength_nm", nm, "Hb");
  };
  const double left = difference("796"), right = difference("798");
  expect_within(796.0 + 2.0 * left / (left - right), 796.8, 0.1);
}

// Source: Zijlstra, Buursma, van Assendelft 2000, table 8.2.
TEST(Reference, SecondHaemoglobinTableIsWhole) {
  const auto table = reference::load("haemoglobin_zijlstra_adult_600_800nm.csv");
  const auto nm = table.numbers("wavelength_nm");
  EXPECT_EQ(nm.front(), 600.0);
  EXPECT_EQ(nm.back(), 800.0);
  ASSERT_EQ(table.rows.size(), 101u);
  EXPECT_EQ(table.number_where("wavelength_nm", "660", "O2Hb"),
            0.1);  // 400 in the unit of the Prahl table, which has 319.6
  EXPECT_EQ(table.number_where("wavelength_nm", "660", "HHb"), 0.815);
}

TEST(Reference, OddFilesAreRefused) {
  EXPECT_THROW(reference::load("no_such_file.csv"), std::runtime_error);
  const auto table = reference::load("crc_check_values.csv");
  EXPECT_THROW(table.texts("no_such_column"), std::runtime_error);
  EXPECT_THROW(table.text_where("name", "no such row", "check"), std::runtime_error);
  EXPECT_EQ(table.text_where("name", "CRC-32/ISCSI (alias CRC-32C)", "check"), "0xE3069283");
}

}  // namespace
