#include "station/measure/lab.h"

#include <gtest/gtest.h>

#include <cmath>
#include <numbers>

#include "station/base/numbers.h"
#include "synthetic.h"
#include "tests/support/expect.h"

using namespace synthetic;

namespace {

struct Lab {
  double from_nm = 600.0, to_nm = 1050.0, step_nm = 1.0;
  double scale = 1000.0, noise = 0.0, dark = 0.0;
  bool with_response = false, whole_counts = false;
  std::uint64_t seed = 4;
};

double normal(Entropy& entropy) {
  double sum = 0.0;  // twelve uniform deviates: near enough to normal for these bounds
  for (int i = 0; i < 12; ++i) sum += static_cast<double>(entropy.next() >> 11) * 0x1p-53;
  return sum - 6.0;
}

/// A CSV text as a lab would bring it, through the same reader.
CsvTable csv_of(const Shape& shape, const Lab& lab = {}) {
  SeededEntropy entropy{lab.seed};
  std::string text = "wavelength_nm,signal";
  if (lab.dark != 0.0) text += ",dark";
  if (lab.with_response) text += ",response";
  text += "\n";
  for (double nm = lab.from_nm; nm <= lab.to_nm + 1e-9; nm += lab.step_nm) {
    const double response = lab.with_response ? std::exp(-0.004 * (nm - 800.0)) : 1.0;
    double signal = lab.scale * shape(nm) * response + lab.dark + lab.noise * normal(entropy);
    if (lab.whole_counts) signal = std::round(signal);
    text += shortest(nm) + "," + shortest(signal);
    if (lab.dark != 0.0) text += "," + shortest(lab.dark);
    if (lab.with_response) text += "," + shortest(response);
    text += "\n";
  }
  return read_csv(text, lab_spectrum_columns(), "lab.csv").value();
}

CsvTable pulses_csv(const std::string& header, const std::function<std::string(int)>& row, int rows) {
  std::string text = header + "\n";
  for (int i = 0; i < rows; ++i) text += row(i) + "\n";
  return read_csv(text, lab_pulse_columns(), "pulses.csv").value();
}

std::string problem_of(const Result<LabSpectrum>& result) { return result ? "measured" : result.error().id; }
std::string problem_of(const Result<LabPulses>& result) { return result ? "measured" : result.error().id; }

}  // namespace

// Source: closed forms of the line.
TEST(LabSpectrum, AgreesWithClosedFormsWithinItsOwnUncertainty) {
  for (const Band band : {Band::red, Band::infrared})
    for (const double step : {0.2, 0.5, 1.0, 2.0}) {
      Lab lab;
      lab.step_nm = step;
      LabSpectrumOptions options;
      options.threshold = 0.0;
      const LabSpectrum found = measure_spectrum(csv_of(nominal(band), lab), options).value();
      EXPECT_EQ(found.band, band);
      const auto agrees = [&](const Figure& figure, double truth) {
        expect_within(figure.value, truth, figure.expanded_uncertainty + 0.02);
        expect_within(figure.value, truth, 0.12);
        EXPECT_LT(figure.expanded_uncertainty, 0.3);
      };
      agrees(found.centroid_nm, nominal(band).centroid_nm());
      agrees(found.half_power_centre_nm, nominal(band).half_centre_nm());
      agrees(found.fwhm_nm, nominal(band).fwhm_nm());
      agrees(found.peak_nm, nominal(band).peak_nm);
    }
}

TEST(LabSpectrum, DarkResponseSlitAndTemperatureAreTakenOut) {
  Lab lab;
  lab.dark = 350.0, lab.with_response = true;
  LabSpectrumOptions options;
  const LabSpectrum plain = measure_spectrum(csv_of(nominal_infrared), options).value();
  const LabSpectrum corrected = measure_spectrum(csv_of(nominal_infrared, lab), options).value();
  expect_within(corrected.centroid_nm.value, plain.centroid_nm.value, 1e-6);
  options.temperature_C = 30.0;
  options.slit_nm = 5.0;
  const LabSpectrum referred = measure_spectrum(csv_of(nominal_infrared), options).value();
  expect_within(referred.centroid_nm.value - plain.centroid_nm.value, -0.28 * 5.0, 1e-9);
  expect_within(referred.peak_nm.value - plain.peak_nm.value, -0.28 * 5.0, 1e-9);
  expect_within(referred.fwhm_nm.value, std::sqrt(plain.fwhm_nm.value * plain.fwhm_nm.value - 25.0) - 0.5, 1e-9);
}

// Noise found from the data alone covers what it does: about 95 of 100 results lie within U.
TEST(LabSpectrum, UncertaintyCoversTheNoise) {
  int inside = 0;
  constexpr int n = 200;
  const double truth = measure_spectrum(csv_of(nominal_infrared), {}).value().centroid_nm.value;
  for (int i = 0; i < n; ++i) {
    Lab lab;
    lab.noise = 3.0, lab.seed = 500u + static_cast<unsigned>(i);
    const Figure centroid = measure_spectrum(csv_of(nominal_infrared, lab), {}).value().centroid_nm;
    inside += std::abs(centroid.value - truth) <= centroid.expanded_uncertainty;
    EXPECT_LT(centroid.expanded_uncertainty, 1.0);
  }
  RecordProperty("inside_of_200", inside);
  EXPECT_GE(inside, 178);  // 89 %: the run's ends add a little that the samples' noise does not tell
}

TEST(LabSpectrum, SecondaryFractionOnlyForRedAndOnlyWithTheRange) {
  const auto hump = [](double nm) {
    return nominal_red(nm) + 0.008 * std::exp(-0.5 * std::pow((nm - 890.0) / 20.4, 2));
  };
  const auto whole = measure_spectrum(csv_of(hump), {}).value().secondary_fraction;
  ASSERT_TRUE(whole);
  expect_within(whole->value, 0.02, 0.001);
  Lab narrow;
  narrow.to_nm = 900.0;
  EXPECT_FALSE(measure_spectrum(csv_of(hump, narrow), {}).value().secondary_fraction);
  EXPECT_FALSE(measure_spectrum(csv_of(nominal_infrared), {}).value().secondary_fraction);
}

TEST(LabSpectrum, WhatCannotBeUsedIsRefused) {
  EXPECT_EQ(problem_of(measure_spectrum(csv_of([](double nm) { return std::min(0.9, nominal_red(nm)); }), {})),
            "spectrum_flat_top");
  EXPECT_EQ(problem_of(measure_spectrum(csv_of([](double) { return 0.0; }), {})), "spectrum_no_peak");
  Lab noise_only;
  noise_only.noise = 5.0;
  EXPECT_EQ(problem_of(measure_spectrum(csv_of([](double) { return 0.0; }, noise_only), {})), "spectrum_no_peak");
  Lab cut;
  cut.to_nm = 662.0;
  EXPECT_EQ(problem_of(measure_spectrum(csv_of(nominal_red, cut), {})), "spectrum_cut_off");
  LabSpectrumOptions options;
  options.band = Band::infrared;
  EXPECT_EQ(problem_of(measure_spectrum(csv_of(nominal_red), options)), "spectrum_no_peak");
  options = {};
  options.threshold = 0.7;
  EXPECT_EQ(problem_of(measure_spectrum(csv_of(nominal_red), options)), "spectrum_threshold");
  options.threshold = -0.1;
  EXPECT_EQ(problem_of(measure_spectrum(csv_of(nominal_red), options)), "spectrum_threshold");
  CsvTable falling = csv_of(nominal_red);
  std::swap(falling.columns[0][3], falling.columns[0][4]);
  EXPECT_EQ(problem_of(measure_spectrum(falling, {})), "spectrum_axis");
  Lab with_response;
  with_response.with_response = true;
  CsvTable zero = csv_of(nominal_red, with_response);
  zero.columns[2][5] = 0.0;
  EXPECT_EQ(problem_of(measure_spectrum(zero, {})), "spectrum_response");
  EXPECT_EQ(
      problem_of(measure_spectrum(read_csv("wavelength_nm,signal\n600,1\n", lab_spectrum_columns(), "x").value(), {})),
      "spectrum_axis");
}

// An axis that ends at 985 nm, where the infrared line still stands at 3 % of its peak: the whole line's centroid
// moves, and the figure says so.
TEST(LabSpectrum, ACutTailIsToldAsUncertainty) {
  Lab lab;
  lab.to_nm = 985.0;
  LabSpectrumOptions options;
  options.threshold = 0.0;
  const Figure cut = measure_spectrum(csv_of(nominal_infrared, lab), options).value().centroid_nm;
  const Figure whole = measure_spectrum(csv_of(nominal_infrared), options).value().centroid_nm;
  EXPECT_GT(std::abs(cut.value - nominal_infrared.centroid_nm()), 0.1);
  expect_within(cut.value, nominal_infrared.centroid_nm(), cut.expanded_uncertainty);
  EXPECT_LT(whole.expanded_uncertainty, 0.05);
}

// The foot of a Gaussian red line reaches into the infrared window as numbers above 0, but is no infrared line.
TEST(LabSpectrum, TheFootOfAnotherLineIsNoLine) {
  LabSpectrumOptions options;
  options.band = Band::infrared;
  const auto gaussian = [](double nm) { return std::exp(-0.5 * std::pow((nm - 660.0) / 30.0, 2)); };
  EXPECT_EQ(problem_of(measure_spectrum(csv_of(gaussian), options)), "spectrum_no_peak");
}

// Whole counts on a fine grid give equal samples at the top of a good line: that is no clipping.
TEST(LabSpectrum, RoundingIsNotClipping) {
  Lab lab;
  lab.step_nm = 0.1, lab.whole_counts = true;
  EXPECT_EQ(problem_of(measure_spectrum(csv_of(nominal_red, lab), {})), "measured");
}

// Source: the signal in closed form, both kinds of header.
TEST(LabPulses, BothHeadersGiveTheClosedForm) {
  constexpr double cycle_s = 0.001756, pi = std::numbers::pi;
  const auto light = [](double dc, double depth, double t) {
    return dc * (1.0 + depth * std::sin(2 * pi * 5.0 * t + 0.3));
  };
  const auto slots = pulses_csv(
      "t_s,red,dark_a,infrared,dark_b",
      [&](int i) {
        const double t = cycle_s * i, ambient = 70.0;
        return shortest(t) + "," + shortest(light(2000, 0.004, t + cycle_s / 8) + ambient) + "," + shortest(ambient) +
               "," + shortest(light(3000, 0.01, t + 5 * cycle_s / 8) + ambient) + "," + shortest(ambient);
      },
      400);
  const auto corrected = pulses_csv(
      "t_s,red,infrared",
      [&](int i) {
        const double t = 0.002 * i;
        return shortest(t) + "," + shortest(light(2000, 0.004, t)) + "," + shortest(light(3000, 0.01, t));
      },
      400);
  const auto expect_truth = [](const LabPulses& p) {
    expect_relative(p.band.red.dc_nA.value, 2000.0, 1e-9);
    expect_relative(p.band.red.ac_nA.value, 8.0, 1e-8);
    expect_relative(p.band.red.modulation.value, 0.004, 1e-8);
    expect_within(p.band.red.phase_rad.value, 0.3, 1e-8);
    expect_within(p.band.infrared.phase_rad.value, 0.3, 1e-8);
    expect_relative(p.band.infrared.modulation.value, 0.01, 1e-8);
    expect_relative(p.ratio.value, 0.4, 1e-8);
    EXPECT_LT(p.band.red.residual_relative, 1e-12);
  };
  LabPulseOptions options;
  options.rate_Hz = 5.0;
  expect_truth(measure_pulses(corrected, options).value());
  EXPECT_EQ(problem_of(measure_pulses(slots, options)), "pulses_cycle_needed");
  options.cycle_s = cycle_s;
  expect_truth(measure_pulses(slots, options).value());
  options.free_rate = true;
  const LabPulses free = measure_pulses(slots, options).value();
  expect_relative(free.band.red.rate_Hz.value().value, 5.0, 1e-8);
  expect_relative(free.ratio.value, 0.4, 1e-6);
  options.rate_Hz.reset();
  expect_relative(measure_pulses(slots, options).value().band.infrared.rate_Hz.value().value, 5.0, 1e-8);
}

TEST(LabPulses, WhatCannotBeUsedIsRefused) {
  const auto one_dark = pulses_csv(
      "t_s,red,infrared,dark_a", [](int i) { return shortest(0.002 * i) + ",1,1,0"; }, 300);
  EXPECT_EQ(problem_of(measure_pulses(one_dark, {5.0, false, 0.002})), "pulses_one_dark");
  const auto flat = pulses_csv(
      "t_s,red,infrared", [](int i) { return shortest(0.002 * i) + ",100,100"; }, 300);
  EXPECT_EQ(problem_of(measure_pulses(flat, {5.0, false, {}})), "pulses_no_modulation");
  EXPECT_EQ(problem_of(measure_pulses(flat, {std::nullopt, true, {}})), "pulses_no_modulation");
  EXPECT_EQ(problem_of(measure_pulses(flat, {1.0, false, {}})), "pulses_too_short");
}
