#include "station/measure/extinction.h"

#include <gtest/gtest.h>

#include "synthetic.h"
#include "tests/support/expect.h"
#include "tests/support/reference.h"

using namespace synthetic;

namespace {
ExtinctionTable prahl() {
  return read_extinction(text_of(source_path("configs/tables/haemoglobin_prahl.csv")), "haemoglobin_prahl.csv").value();
}
}  // namespace

// Source: S. Prahl's compilation (tests/reference/hb_prahl_250_1000nm.csv): 660 nm 319.6 / 3226.56, 940 nm 1214 /
// 693.44, equal absorption at 796.8 nm; "near 800 nm" is common practice.
TEST(Extinction, AgreesWithThePublishedTable) {
  const ExtinctionTable table = prahl();
  expect_within(table.at(660.0).value().oxygenated, 319.6, 1e-9);
  expect_within(table.at(660.0).value().deoxygenated, 3226.56, 1e-9);
  expect_within(table.at(940.0).value().oxygenated, 1214.0, 1e-9);
  expect_within(table.at(940.0).value().deoxygenated, 693.44, 1e-9);
  expect_within(table.equal_absorption_nm(750.0, 850.0).value(), 796.8, 0.1);
}

TEST(Extinction, OurCopyIsThePublishedTableRowByRow) {
  const auto published = reference::load("hb_prahl_250_1000nm.csv");
  const auto nm = published.numbers("wavelength_nm"), oxygenated = published.numbers("HbO2"),
             bare = published.numbers("Hb");
  ASSERT_EQ(nm.size(), 376u);
  const ExtinctionTable table = prahl();
  for (std::size_t i = 0; i < nm.size(); ++i) {
    EXPECT_EQ(table.at(nm[i]).value().oxygenated, oxygenated[i]);
    EXPECT_EQ(table.at(nm[i]).value().deoxygenated, bare[i]);
  }
}

TEST(Extinction, IsLinearBetweenRowsAndRefusedBeyond) {
  const ExtinctionTable table = prahl();
  expect_relative(table.at(661.0).value().oxygenated,
                  0.5 * (table.at(660.0).value().oxygenated + table.at(662.0).value().oxygenated), 1e-12);
  EXPECT_EQ(table.at(1000.1).error().id, "table_outside");
  EXPECT_EQ(table.at(249.9).error().id, "table_outside");
  EXPECT_EQ(table.equal_absorption_nm(650.0, 700.0).error().id, "table_no_crossing");
}

TEST(Extinction, BadTablesAreRefusedWithAllFaults) {
  const auto bad = read_extinction("wavelength_nm,HbO2,Hb\n600,1,2\n600,0,2\n610,1,-1\n", "t.csv");
  ASSERT_FALSE(bad);
  EXPECT_EQ(bad.error().size(), 3u);
  EXPECT_FALSE(read_extinction("wavelength_nm,Hb\n600,1\n", "t.csv"));
}
