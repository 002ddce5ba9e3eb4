#include <gtest/gtest.h>

#include <cmath>
#include <cstdio>

#include "drivers/emulated/led.h"
#include "drivers/emulated/line_shape.h"
#include "drivers/emulated/photodiode.h"

namespace probewright::emulated {
namespace {

const LineShape red{661.5, 19.0, -0.15}, infrared{942.8, 46.0, -0.10};

// Source: the design's table of nominal lines, its own prototype's figures, two decimals.
TEST(LineShape, NominalLinesHaveTheTablesFigures) {
  EXPECT_NEAR(red.centroid_nm(), 659.94, 0.005);
  EXPECT_NEAR(red.half_centre_nm(), 660.79, 0.005);
  EXPECT_NEAR(red.fwhm_nm(), 19.07, 0.005);
  EXPECT_NEAR(infrared.centroid_nm(), 940.30, 0.005);
  EXPECT_NEAR(infrared.half_centre_nm(), 941.65, 0.005);
  EXPECT_NEAR(infrared.fwhm_nm(), 46.08, 0.005);
}

struct Sums {
  double area = 0.0, centroid = 0.0;
};
/// Plain rectangles, 0.001 nm wide: nothing of the closed forms is in them.
Sums summed(const LineShape& line) {
  Sums sums;
  for (double wavelength = line.peak_nm - 400.0; wavelength < line.peak_nm + 400.0; wavelength += 0.001) {
    const double light = line.at(wavelength);
    sums.area += light * 0.001;
    sums.centroid += light * 0.001 * (wavelength - line.peak_nm);
  }
  sums.centroid = line.peak_nm + sums.centroid / sums.area;
  return sums;
}

TEST(LineShape, ClosedFormsAgreeWithSums) {
  for (const LineShape& line :
       {red, infrared, LineShape{660.0, 20.0, 0.2}, LineShape{660.0, 20.0, 0.0}, LineShape{660.0, 20.0, 1e-9}}) {
    const Sums sums = summed(line);
    EXPECT_NEAR(line.centroid_nm(), sums.centroid, 1e-6) << line.skew;
    EXPECT_NEAR(line.area_nm(), sums.area, 1e-6 * sums.area) << line.skew;
    EXPECT_NEAR(line.at(line.half_low_nm()), 0.5, 1e-12) << line.skew;
    EXPECT_NEAR(line.at(line.half_high_nm()), 0.5, 1e-12) << line.skew;
    EXPECT_NEAR(line.half_high_nm() - line.half_low_nm(), line.fwhm_nm(), 1e-9) << line.skew;
  }
}

TEST(LineShape, IsMadeFromCentroidAndWidth) {
  for (const double skew : {-0.4, -0.15, 0.0, 0.15, 0.4}) {
    const LineShape line = line_of(660.0, 19.0, skew);
    EXPECT_NEAR(line.centroid_nm(), 660.0, 1e-9) << skew;
    EXPECT_NEAR(line.fwhm_nm(), 19.0, 1e-9) << skew;
  }
}

// Source: the design's figures, 1 % threshold against the whole line: +0.04 and +0.06 nm; 10 %: +0.29 and +0.44 nm.
// Those were taken from pixels, whose edges move the 10 % points by up to 0.2 nm: hence the wider bound there.
TEST(LineShape, ThresholdMovesTheCentroidAsTheDesignSays) {
  const double red_shift = centroid_above_nm(red, 0.01, 605.0, 785.0) - red.centroid_nm();
  const double infrared_shift = centroid_above_nm(infrared, 0.01, 800.0, 1045.0) - infrared.centroid_nm();
  std::printf("[  figures ] 1 %% threshold moves the centroids by %+.3f and %+.3f nm\n", red_shift, infrared_shift);
  EXPECT_NEAR(red_shift, 0.04, 0.006);
  EXPECT_NEAR(infrared_shift, 0.06, 0.006);
  EXPECT_NEAR(centroid_above_nm(red, 0.10, 605.0, 785.0) - red.centroid_nm(), 0.29, 0.010);
  EXPECT_NEAR(centroid_above_nm(infrared, 0.10, 800.0, 1045.0) - infrared.centroid_nm(), 0.44, 0.010);
}

Led nominal_red() {
  Led led;
  led.line = red;
  led.forward_V = 1.95;
  led.series_ohm = 2.0;
  led.temperature = {0.14, 0.05, -0.007, -0.0020};
  led.heating = {1.0, 0.005, 3.62, 0.5};
  return led;
}

TEST(LedPhysics, TemperatureMovesEachValueByItsCoefficient) {
  const Led led = nominal_red();
  EXPECT_NEAR(line_at(led, 10.0).centroid_nm() - red.centroid_nm(), 1.4, 1e-9);
  EXPECT_NEAR(line_at(led, 10.0).fwhm_nm() - red.fwhm_nm(), 0.5, 1e-9);
  EXPECT_NEAR(light_at(led, 10.0), 0.93, 1e-12);
  EXPECT_NEAR(forward_voltage_V(led, 20.0, 10.0), 1.93, 1e-12);
}

// Source: the design's figures for the warm-up of the red LED: -2.8 % (of the warm light), -7.9 mV.
TEST(LedPhysics, WarmUpAsTheDesignSays) {
  const Led led = nominal_red();
  const double early = excess_K(led, 25.0, warmed(led.heating, {}, 1.0, 0.005));
  const double warm = excess_K(led, 25.0, warmed(led.heating, {}, 1.0, 60.0));
  EXPECT_NEAR(warm, 0.0, 1e-9);
  EXPECT_NEAR(1e3 * (forward_voltage_V(led, 20.0, warm) - forward_voltage_V(led, 20.0, early)), -7.9, 0.05);
  EXPECT_NEAR(100.0 * (light_at(led, warm) - light_at(led, early)), -2.8, 0.05);
}

TEST(LedPhysics, MeanWarmthIsTheMeanOfManySteps) {
  const Heating heating{1.0, 0.005, 3.62, 0.5};
  const Warmth from{0.2, 1.0};
  double die = 0.0, package = 0.0;
  constexpr int steps = 20000;
  for (int i = 0; i < steps; ++i) {
    const Warmth at = warmed(heating, from, 0.25, 0.020 * (i + 0.5) / steps);
    die += at.die_K / steps;
    package += at.package_K / steps;
  }
  const Warmth mean = mean_warmth(heating, from, 0.25, 0.020);
  EXPECT_NEAR(mean.die_K, die, 1e-8);
  EXPECT_NEAR(mean.package_K, package, 1e-8);
}

TEST(PhotodiodePhysics, DarkCurrentDoublesPerItsOwnTemperature) {
  for (const double doubling_K : {8.0, 10.0, 11.5}) {
    const Photodiode diode{0.8, doubling_K, 0.02};
    EXPECT_NEAR(dark_current_nA(diode, 25.0, 5.0), 0.8, 1e-12);
    EXPECT_NEAR(dark_current_nA(diode, 25.0 + doubling_K, 5.0), 1.6, 1e-12);
    EXPECT_NEAR(dark_current_nA(diode, 25.0 - doubling_K, 5.0), 0.4, 1e-12);
  }
  EXPECT_EQ(dark_current_nA({}, 25.0, 0.0), 0.0);
  // The design's trap: a true 8 K referred with 10 K gives +19 % at 35 C.
  const double as_if_10_K = dark_current_nA({0.8, 8.0, 0.0}, 35.0, 5.0) / 2.0;
  EXPECT_NEAR(as_if_10_K / 0.8, 1.19, 0.005);
}

// Source: common data-sheet values of silicon photodiodes (from memory).
TEST(PhotodiodePhysics, SiliconAnswersAsUsual) {
  EXPECT_NEAR(silicon_responsivity_A_per_W(660.0), 0.43, 0.01);
  EXPECT_NEAR(silicon_responsivity_A_per_W(940.0), 0.59, 0.01);
  EXPECT_NEAR(silicon_responsivity_A_per_W(1050.0), 0.34, 0.01);
}

}  // namespace
}  // namespace probewright::emulated
