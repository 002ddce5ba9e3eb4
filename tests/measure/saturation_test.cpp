#include "station/measure/saturation.h"

#include <gtest/gtest.h>

#include <sstream>

#include "station/base/numbers.h"
#include "synthetic.h"
#include "tests/support/expect.h"
#include "tests/support/reference.h"

using namespace synthetic;

namespace {

std::string prahl_text() { return text_of(source_path("configs/tables/haemoglobin_prahl.csv")); }

/// Zijlstra's table as far as it goes (800 nm), per tetramer (x 4000), and Prahl's beyond it: what moves in the red
/// only does not depend on the infrared part.
std::string zijlstra_text() {
  const auto table = reference::load("haemoglobin_zijlstra_adult_600_800nm.csv");
  const auto nm = table.numbers("wavelength_nm"), bare = table.numbers("HHb"), oxygenated = table.numbers("O2Hb");
  std::string out = "wavelength_nm,HbO2,Hb\n";
  for (std::size_t i = 1; i < nm.size(); ++i)  // the first row lacks HHb
    out += shortest(nm[i]) + "," + shortest(4000.0 * oxygenated[i]) + "," + shortest(4000.0 * bare[i]) + "\n";
  std::istringstream lines{prahl_text()};
  for (std::string line; std::getline(lines, line);)
    if (const auto at = parse_double(line.substr(0, line.find(','))); at && *at > 800.0) out += line + "\n";
  return out;
}

PerBand<Absorption> probe(const SaturationModel& model, double red_nm, double infrared_nm) {
  return {nominal_absorption(model.shape.red, red_nm, 2.5, 0.01, model),
          nominal_absorption(model.shape.infrared, infrared_nm, 2.5, 0.01, model)};
}

double error_at(const SaturationModel& model, double red_nm, double infrared_nm, double saturation) {
  return saturation_error_of(probe(model, red_nm, infrared_nm), probe(model, 660.0, 940.3), saturation, model).value();
}

double points_per_nm(const SaturationModel& model, Band band, double saturation) {
  const auto at = [&](double moved) {
    return band == Band::red ? error_at(model, 660.0 + moved, 940.3, saturation)
                             : error_at(model, 660.0, 940.3 + moved, saturation);
  };
  return at(0.5) - at(-0.5);
}

/// A hump at 890 nm with as much power as the nominal red line.
Absorption hump_of(const SaturationModel& model) {
  SaturationModel plain = model;
  plain.responsivity.clear();
  const double red = probe(plain, 660.0, 940.3).red.area();
  const auto hump = [](const SaturationModel& m) { return nominal_absorption({48.0, 0.0}, 890.0, 0.0, 0.0, m); };
  Absorption out;
  out.add(hump(model), red / hump(plain).area());
  return out;
}

constexpr std::array saturations = {100.0, 90.0, 80.0, 70.0};

}  // namespace

TEST(SaturationError, TheNominalProbeHasNone) {
  const SaturationModel model = saturation_model(prahl_text());
  for (const double s : saturations) expect_within(error_at(model, 660.0, 940.3, s), 0.0, 1e-9);
}

// Source of the sensitivities: the station's design, from its own prototype; the extinctions are S. Prahl's
// compilation.
TEST(SaturationError, SensitivitiesWithPrahlsTable) {
  const SaturationModel model = saturation_model(prahl_text());
  constexpr std::array red = {0.117, 0.266, 0.416, 0.566}, infrared = {-0.007, -0.024, -0.051, -0.090};
  for (std::size_t i = 0; i < saturations.size(); ++i) {
    expect_within(points_per_nm(model, Band::red, saturations[i]), red[i], 0.01);
    expect_within(points_per_nm(model, Band::infrared, saturations[i]), infrared[i], 0.005);
  }
}

// Source: W. G. Zijlstra and others (2000), table 8.2. The table decides more than anything else: about half of what
// Prahl's gives.
TEST(SaturationError, SensitivityWithZijlstrasTableIsAboutHalf) {
  const SaturationModel model = saturation_model(zijlstra_text());
  expect_within(points_per_nm(model, Band::red, 70.0), 0.295, 0.015);
}

// Source: common practice. Both bands absorbed alike give R = 1, which the curve 110 - 25 R shows as 85 %.
TEST(SaturationError, EqualAbsorbersShow85) {
  const Curve curve = all_checks().saturation->curve;
  expect_within(curve.saturation_at(1.0).value(), 85.0, 1e-12);
  expect_within(curve.ratio_at(85.0).value(), 1.0, 1e-12);
  EXPECT_FALSE(curve.saturation_at(2.5));
  EXPECT_FALSE(curve.ratio_at(106.0));
  EXPECT_TRUE(curve.falls());
}

// In closed form: with a table in which nothing depends on the wavelength, no LED causes an error; and R = <red> /
// <infrared> of a table that is linear in the wavelength is that of the centroids.
TEST(SaturationError, ClosedForms) {
  const SaturationModel flat = saturation_model("wavelength_nm,HbO2,Hb\n600,1,3\n1050,1,3\n");
  for (const double s : saturations) expect_within(error_at(flat, 667.0, 930.0, s), 0.0, 1e-9);
  SaturationModel linear = saturation_model("wavelength_nm,HbO2,Hb\n600,100,100\n1100,600,600\n");
  linear.responsivity.clear();
  const auto of = [](double nm) { return nm - 500.0; };  // the same extinction for both
  const double ratio = (of(663.0) / of(660.0)) / (of(945.0) / of(940.3));
  for (const double s : saturations)
    expect_within(error_at(linear, 663.0, 945.0, s), 110.0 - (110.0 - s) * ratio - s, 1e-5);
}

// Source: the station's design: 2 % of secondary emission shifts about -0.7 points at 100 % and changes sign near 75 %.
// That holds with the detector's responsivity, which is a third higher for the hump: a photodiode of one quantum
// efficiency gives in proportion to the wavelength (tests/reference/led_photodiode_facts.csv). Without it -0.51.
TEST(SaturationError, SecondaryEmissionShowsAtHighSaturation) {
  SaturationModel model = saturation_model(prahl_text());
  const auto at_100 = [&] {
    const auto nominal = probe(model, 660.0, 940.3);
    PerBand<Absorption> humped = nominal;
    humped.red.add(hump_of(model), 0.02 / 0.98);
    return saturation_error_of(humped, nominal, 100.0, model).value();
  };
  const auto nominal = probe(model, 660.0, 940.3);
  PerBand<Absorption> humped = nominal;
  humped.red.add(hump_of(model), 0.02 / 0.98);
  const auto at = [&](double s) { return saturation_error_of(humped, nominal, s, model).value(); };
  expect_within(at(100.0), -0.7, 0.05);
  EXPECT_LT(at(80.0), 0.0);
  EXPECT_GT(at(70.0), 0.0);
  model.responsivity.clear();
  expect_within(at_100(), -0.51, 0.03);
}

TEST(SaturationError, ResponsivityWeighsTheSpectrum) {
  SaturationModel model = saturation_model(prahl_text());
  const double plain = error_at(model, 663.0, 940.3, 70.0);
  model.responsivity = {{600.0, 0.4}, {700.0, 0.5}, {1000.0, 0.5}};  // more at longer wavelengths: the centroid moves
  const double weighed = error_at(model, 663.0, 940.3, 70.0);
  EXPECT_NE(plain, weighed);
  expect_within(weighed, plain, 0.1);  // on both sides of the comparison, so little is left
}
