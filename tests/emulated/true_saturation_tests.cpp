#include "drivers/emulated/true_saturation.h"

#include <gtest/gtest.h>

#include <cmath>

#include "drivers/emulated/colour_windows.h"
#include "tests/support/expect.h"
#include "tests/support/reference.h"

namespace probewright::emulated {
namespace {

/// The compilation of Prahl, read on a grid of 2 nm, and the curve 110 - 25 R (common practice).
SaturationStandard standard_with(LineShape red, LineShape infrared) {
  const auto table = reference::load("hb_prahl_250_1000nm.csv");
  const auto nm = table.numbers("wavelength_nm"), oxygenated = table.numbers("HbO2"),
             deoxygenated = table.numbers("Hb");
  SaturationStandard standard;
  standard.blood.from_nm = nm.front();
  standard.blood.step_nm = nm[1] - nm[0];
  for (std::size_t i = 0; i < nm.size(); ++i)
    standard.blood.points.push_back({oxygenated[i], deoxygenated[i], nm[i]});  // one electron for each photon
  standard.displayed = [](double ratio) { return 110.0 - 25.0 * ratio; };
  standard.ratio_showing = [](double saturation) { return (110.0 - saturation) / 25.0; };
  standard.red = red, standard.infrared = infrared;
  return standard;
}

constexpr LineShape red{661.5, 19.0, -0.15}, infrared{942.8, 46.0, -0.10};

Probe nominal_probe() {
  Probe probe;
  probe.red.colour = LedColour::red;
  probe.red.line = red;
  probe.infrared.colour = LedColour::infrared;
  probe.infrared.line = infrared;
  probe.secondary_line = line_of(890.0, 48.0, 0.0);
  return probe;
}

Probe moved(double red_nm, double infrared_nm) {
  Probe probe = nominal_probe();
  probe.red.line.peak_nm += red_nm;
  probe.infrared.line.peak_nm += infrared_nm;
  return probe;
}

TEST(TrueSaturation, IsNoneForTheNominalProbe) {
  const auto standard = standard_with(red, infrared);
  for (const double saturation : {100.0, 90.0, 80.0, 70.0})
    expect_within(true_saturation_error(nominal_probe(), saturation, standard), 0.0, 0.002);  // the red line's far tail
}

// Source: the design's prototype, computed with the same table and curve on its own: points per nm of either LED.
TEST(TrueSaturation, HasTheSensitivitiesOfThePrototype) {
  const auto standard = standard_with(red, infrared);
  const struct {
    double saturation, per_red_nm, per_infrared_nm;
  } rows[] = {{100.0, 0.117, -0.007}, {90.0, 0.266, -0.024}, {80.0, 0.416, -0.051}, {70.0, 0.566, -0.090}};
  for (const auto& row : rows) {
    const auto per_nm = [&](double in_red, double in_infrared) {
      return 0.5 * (true_saturation_error(moved(in_red, in_infrared), row.saturation, standard) -
                    true_saturation_error(moved(-in_red, -in_infrared), row.saturation, standard));
    };
    expect_within(per_nm(1.0, 0.0), row.per_red_nm, 0.010);
    expect_within(per_nm(0.0, 1.0), row.per_infrared_nm, 0.005);
  }
}

// Source: the design's prototype: 2 % of secondary emission does about -0.7 points at 100 %, and nothing near 75 %.
TEST(TrueSaturation, KnowsWhatSecondaryEmissionDoes) {
  const auto standard = standard_with(red, infrared);
  Probe probe = nominal_probe();
  probe.secondary_power = 0.02;
  expect_within(true_saturation_error(probe, 100.0, standard), -0.7, 0.1);
  expect_within(true_saturation_error(probe, 75.0, standard), 0.0, 0.15);
}

TEST(TrueSaturation, IsNoNumberWithoutItsLight) {
  const auto standard = standard_with(red, infrared);
  Probe dead = nominal_probe();
  dead.infrared.circuit = LedCircuit::open;
  EXPECT_TRUE(std::isnan(true_saturation_error(dead, 90.0, standard)));
  Probe swapped = nominal_probe();
  std::swap(swapped.red, swapped.infrared);
  EXPECT_TRUE(std::isnan(true_saturation_error(swapped, 90.0, standard)));
}

TEST(TrueSaturation, NominalLineStandsWhereTheBinSays) {
  const LineShape line = nominal_line(658.0, 19.0, -0.15);
  expect_within(centroid_above_nm(line, centroid_threshold, 600.0, 800.0), 658.0, 1e-6);
  EXPECT_EQ(line.width_nm, 19.0);
}

TEST(BloodGrid, IsStraightBetweenAndSteadyBeyond) {
  const BloodGrid grid{600.0, 2.0, {{1.0, 10.0, 0.5}, {3.0, 20.0, 0.7}}};
  EXPECT_DOUBLE_EQ(grid.at(601.0).oxygenated, 2.0);
  EXPECT_DOUBLE_EQ(grid.at(601.0).deoxygenated, 15.0);
  EXPECT_DOUBLE_EQ(grid.at(599.0).responsivity, 0.5);
  EXPECT_DOUBLE_EQ(grid.at(700.0).oxygenated, 3.0);
}

}  // namespace
}  // namespace probewright::emulated
