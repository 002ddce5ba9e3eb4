#include <gtest/gtest.h>

#include <cmath>

#include "station/base/numbers.h"
#include "station/measure/spectrum.h"
#include "synthetic.h"
#include "tests/support/expect.h"
#include "tests/support/reference.h"

using namespace synthetic;

namespace {

Line line_of(const Shape& shape, Band band, double threshold, double slit_nm = 0.0) {
  return find_line(sampled(shape), {band, threshold, slit_nm}).value();
}

/// Centroid over the part above `threshold`, by Simpson's rule on a fine grid between the exact crossings: a second
/// opinion that shares nothing with the code under test.
double centroid_above(const LogNormal& line, double threshold) {
  const double u = std::sqrt(-std::log(threshold) / std::numbers::ln2);
  const auto edge = [&](double side) {
    return line.peak_nm + line.D_nm * (std::exp(side * line.b * u) - 1.0) / (2.0 * line.b);
  };
  const double from = std::min(edge(-1), edge(1)), to = std::max(edge(-1), edge(1));
  constexpr int n = 20000;
  double area = 0.0, moment = 0.0;
  for (int i = 0; i <= n; ++i) {
    const double nm = from + (to - from) * i / n, weight = (i == 0 || i == n) ? 1.0 : (i % 2 ? 4.0 : 2.0);
    area += weight * line(nm), moment += weight * nm * line(nm);
  }
  return moment / area;
}

}  // namespace

// Source: closed forms of the log-normal line (substitution; figures as in the model's nominal lines: centroid 659.94
// and 940.30 nm, half-power centre 660.79 and 941.65 nm, FWHM 19.07 and 46.08 nm, to 0.005 nm).
TEST(LineShape, ClosedFormsGiveTheNominalFigures) {
  expect_within(nominal_red.centroid_nm(), 659.94, 0.005);
  expect_within(nominal_red.half_centre_nm(), 660.79, 0.005);
  expect_within(nominal_red.fwhm_nm(), 19.07, 0.005);
  expect_within(nominal_infrared.centroid_nm(), 940.30, 0.005);
  expect_within(nominal_infrared.half_centre_nm(), 941.65, 0.005);
  expect_within(nominal_infrared.fwhm_nm(), 46.08, 0.008);
}

// Source: the same closed forms.
TEST(LineShape, WholeLineAgreesWithClosedForms) {
  for (const Band band : {Band::red, Band::infrared}) {
    const LogNormal& shape = nominal(band);
    const Line line = line_of(shape, band, 0.0);
    expect_within(line.centroid_nm, shape.centroid_nm(), 0.002);
    expect_within(line.half_power_centre_nm, shape.half_centre_nm(), 0.01);
    expect_within(line.width_nm, shape.fwhm_nm(), 0.02);
    expect_within(line.peak_nm, shape.peak_nm, 0.03);
  }
}

// Source: numerical integration above. The threshold moves the centroid by +0.04 / +0.06 nm at 1 %, +0.29 / +0.44 at 10
// %.
TEST(LineShape, ThresholdIsPartOfTheCentroid) {
  const struct {
    Band band;
    double threshold, shift_nm;
  } cases[] = {
      {Band::red, 0.01, 0.04}, {Band::infrared, 0.01, 0.06}, {Band::red, 0.10, 0.29}, {Band::infrared, 0.10, 0.44}};
  for (const auto& c : cases) {
    const LogNormal& shape = nominal(c.band);
    const double found = line_of(shape, c.band, c.threshold).centroid_nm;
    expect_within(found, centroid_above(shape, c.threshold), 0.004);
    expect_within(found - shape.centroid_nm(), c.shift_nm, 0.01);
  }
}

// Source: tests/reference/led_photodiode_facts.csv, rows "definition check: two-piece Gaussian" (computed there).
TEST(LineShape, TwoPieceGaussianAgreesWithTheTable) {
  const auto table = reference::load("led_photodiode_facts.csv");
  const auto value = [&](std::string_view start) {
    const auto quantities = table.texts("quantity"), values = table.texts("value");
    for (std::size_t i = 0; i < quantities.size(); ++i) {
      const auto at = quantities[i].find_first_not_of(' ');
      if (at != std::string::npos && std::string_view{quantities[i]}.substr(at).starts_with(start))
        return reference::number_in(values[i]);
    }
    throw std::runtime_error("no such row");
  };
  const auto shape = [](double nm) {
    const double x = (nm - 660.0) / (nm < 660.0 ? 8.0 : 6.0);
    return std::exp(-0.5 * x * x);
  };
  const Line line = line_of(shape, Band::red, 0.0);
  expect_within(line.centroid_nm, value("centroid = lp"), 0.003);
  expect_within(line.half_power_centre_nm, value("centre of half-intensity bandwidth"), 0.01);
  expect_within(line.width_nm, value("half-intensity bandwidth ="), 0.02);
  // A cubic cannot follow the jump of the second derivative at the top; the peak is known to a tenth of the width only.
  expect_within(line.peak_nm, value("definition check: two-piece Gaussian"), 0.3);
}

// Why the peak is a cubic: a parabola over the top 20 % of the skewed line is off by about 0.2 nm.
TEST(LineShape, CubicPeakBeatsAParabolaByFar) {
  const Line line = line_of(nominal_infrared, Band::infrared, 0.01);
  EXPECT_LT(std::abs(line.peak_nm - nominal_infrared.peak_nm), 0.03);
}

// Source: widths of independent blurs add in quadrature (exact for Gaussians, common practice).
TEST(LineShape, SlitIsRemovedFromTheWidthInQuadrature) {
  const double sigma = 8.0, slit_nm = 2.5, fwhm = sigma * std::sqrt(8.0 * std::numbers::ln2);
  const double seen = std::hypot(fwhm, slit_nm) / std::sqrt(8.0 * std::numbers::ln2);
  const auto shape = [&](double nm) { return std::exp(-0.5 * (nm - 660.0) * (nm - 660.0) / (seen * seen)); };
  expect_within(line_of(shape, Band::red, 0.01, slit_nm).width_nm, fwhm, 0.01);
}

// 2 % of the red LED's power as a hump 0.8 % high: the centroid does not see it, the band integral does.
TEST(LineShape, SecondaryEmissionNeedsItsOwnIntegral) {
  const LogNormal& red = nominal_red;
  const LogNormal hump{890.0, 48.0, 0.001};
  double red_area = 0.0, hump_area = 0.0;
  for (double nm = 500.0; nm < 1100.0; nm += 0.01) red_area += 0.01 * red(nm), hump_area += 0.01 * hump(nm);
  const double height = 0.02 / 0.98 * red_area / hump_area;
  expect_within(height, 0.008, 0.001);
  const auto shape = [&](double nm) { return red(nm) + height * hump(nm); };
  expect_within(secondary_fraction(sampled(shape))->value, 0.02, 0.0002);
  expect_within(line_of(shape, Band::red, 0.01).centroid_nm, line_of(red, Band::red, 0.01).centroid_nm, 0.01);
}

TEST(LineShape, LinesThatCannotBeUsedAreRefused) {
  const auto problem = [](const Spectrum& s, Band band) {
    const auto line = find_line(s, {band, standard_threshold, 0.0});
    return line ? std::string{"found"} : line.error().id;
  };
  EXPECT_EQ(problem(sampled([](double) { return 0.0; }), Band::red), "spectrum_no_peak");
  EXPECT_EQ(problem(sampled([](double nm) { return nm - 600.0; }), Band::red), "spectrum_cut_off");  // only rises
  EXPECT_EQ(problem(sampled(nominal_red, 605.0, 663.0, 0.5), Band::red), "spectrum_cut_off");
  EXPECT_EQ(problem(sampled(nominal_red, 700.0, 760.0, 10.0), Band::red), "spectrum_axis");  // 7 samples
  // A dark level of a fifth of the peak that nobody subtracted.
  EXPECT_EQ(problem(sampled([](double nm) { return 0.2 + nominal_red(nm); }), Band::red), "spectrum_cut_off");
  Spectrum falls = sampled(nominal_red);
  std::swap(falls.wavelength_nm[10], falls.wavelength_nm[11]);
  EXPECT_EQ(problem(falls, Band::red), "spectrum_axis");
  Spectrum hole = sampled(nominal_red);
  hole.power[7] = std::nan("");
  EXPECT_EQ(problem(hole, Band::red), "spectrum_axis");
}

// The run ends between samples, so the centroid hardly depends on where the grid happens to lie.
TEST(LineShape, CoarseGridsAgreeWithFineOnes) {
  for (const Band band : {Band::red, Band::infrared}) {
    const LogNormal& shape = nominal(band);
    const double fine = find_line(sampled(shape, 600.0, 1050.0, 0.05), {band, 0.01, 0.0}).value().centroid_nm;
    for (const double step : {0.5, 1.0, 2.0, 3.0})
      for (const double start : {600.0, 600.3})
        expect_within(find_line(sampled(shape, start, 1050.0, step), {band, 0.01, 0.0}).value().centroid_nm, fine,
                      0.02);
  }
}
