#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <cmath>
#include <locale>
#include <numbers>
#include <sstream>

#include "program.h"
#include "station/base/numbers.h"
#include "tests/support/expect.h"

namespace {

using probewright::shortest;
using program::Folder;
using program::run;
using testing::AllOf;
using testing::HasSubstr;

/// The log-normal line of the design's optical model, with its closed forms.
struct LineShape {
  double peak_nm, width_nm, skew;
  double at(double nm) const {
    const double argument = 1.0 + 2.0 * skew * (nm - peak_nm) / width_nm;
    return argument > 0.0 ? std::exp(-std::numbers::ln2 * std::pow(std::log(argument) / skew, 2)) : 0.0;
  }
  double centroid_nm() const {
    return peak_nm + width_nm / (2 * skew) * (std::exp(3 * skew * skew / (4 * std::numbers::ln2)) - 1);
  }
  double half_power_centre_nm() const { return peak_nm + width_nm * (std::cosh(skew) - 1) / (2 * skew); }
  double fwhm_nm() const { return width_nm * std::sinh(skew) / skew; }
};
constexpr LineShape red{661.5, 19.0, -0.15}, infrared{942.8, 46.0, -0.10};

std::string csv_of(const LineShape& shape, double scale = 30000.0) {
  std::ostringstream text;
  text.imbue(std::locale::classic());
  text.precision(17);
  text << "wavelength_nm,signal\n";
  for (int i = 0; i < 1024; ++i) text << 600.0 + 0.44 * i << ',' << scale * shape.at(600.0 + 0.44 * i) << '\n';
  return text.str();
}

class MeasureSpectrum : public testing::Test {
 protected:
  program::Ran ask(const std::string& csv, std::vector<std::string> options) {
    options.insert(options.begin(), {"measure", "spectrum", folder.write("lab.csv", csv)});
    return run(folder, options);
  }
  Folder folder;
};

// Source: the closed forms of the log-normal line; the whole window is asked for, since a threshold moves the centroid.
TEST_F(MeasureSpectrum, AgreesWithTheClosedForms) {
  for (const auto& [band, shape] : {std::pair{"red", red}, std::pair{"infrared", infrared}}) {
    const auto told = ask(csv_of(shape), {"--band", band, "--threshold", "0", "--json"});
    ASSERT_EQ(told.status, 0) << told.out;
    const auto json = told.json();
    EXPECT_EQ(json["format"], 1);
    EXPECT_EQ(json["band"], band);
    expect_within(json["centroid_nm"]["value"], shape.centroid_nm(), 0.02);
    expect_within(json["half_power_centre_nm"]["value"], shape.half_power_centre_nm(), 0.02);
    expect_within(json["fwhm_nm"]["value"], shape.fwhm_nm(), 0.05);
    expect_within(json["peak_nm"]["value"], shape.peak_nm, 0.05);
    for (const char* key : {"peak_nm", "centroid_nm", "half_power_centre_nm", "fwhm_nm"}) {
      EXPECT_EQ(json[key]["unit"], "nm");
      EXPECT_GE(json[key]["expanded_uncertainty"].get<double>(), 0.0);
    }
  }
}

TEST_F(MeasureSpectrum, FindsTheBandFromTheLightAndKnowsSecondaryEmissionOfRedOnly) {
  const auto of_red = ask(csv_of(red), {"--json"}).json(), of_infrared = ask(csv_of(infrared), {"--json"}).json();
  EXPECT_EQ(of_red["band"], "red");
  EXPECT_EQ(of_red["secondary_fraction"]["unit"], "1");
  EXPECT_LT(std::abs(of_red["secondary_fraction"]["value"].get<double>()), 1e-6);
  EXPECT_EQ(of_infrared["band"], "infrared");
  EXPECT_TRUE(of_infrared["secondary_fraction"].is_null());
}

// Source: the demonstration model's coefficients, 0.14 nm per K for red (design's optical model).
TEST_F(MeasureSpectrum, RefersToTwentyFiveDegreesWhenToldTheTemperature) {
  const double as_found = ask(csv_of(red), {"--json"}).json()["centroid_nm"]["value"];
  const auto warm = ask(csv_of(red), {"--temperature-C", "35", "--json"}).json();
  expect_within(warm["centroid_nm"]["value"], as_found - 1.4, 1e-9);
  EXPECT_EQ(warm["referred_to_C"], 25.0);
}

TEST_F(MeasureSpectrum, PrintsATableForPeople) {
  const auto told = ask(csv_of(red), {"--slit-nm", "2.5"});
  EXPECT_EQ(told.status, 0);
  EXPECT_THAT(told.out, AllOf(HasSubstr("red line"), HasSubstr("centroid"), HasSubstr("659.9"), HasSubstr("nm")));
}

TEST_F(MeasureSpectrum, ASpectrumThatCannotBeUsedIsAnAnswerNotAnAccident) {
  std::string dark = "wavelength_nm,signal\n", clipped = dark;
  for (int i = 0; i < 1024; ++i) {
    const double nm = 600.0 + 0.44 * i;
    dark += shortest(nm) + "," + std::to_string(i % 2) + "\n";
    clipped += shortest(nm) + "," + shortest(std::min(20000.0, 65000.0 * red.at(nm))) + "\n";
  }
  for (const std::string& csv : {dark, clipped}) {
    const auto json = ask(csv, {"--band", "red", "--json"});
    EXPECT_EQ(json.status, 1) << json.out;
    for (const char* key : {"what", "where", "remedy"}) EXPECT_FALSE(json.json()["problem"][key].empty()) << key;
    const auto text = ask(csv, {"--band", "red"});
    EXPECT_EQ(text.status, 1);
    EXPECT_EQ(text.out, "");
    EXPECT_THAT(text.err, HasSubstr("lab.csv: "));
  }
}

TEST_F(MeasureSpectrum, AFileThatCannotBeReadIsRefusedWithEveryFaultAndItsPlace) {
  const auto told = ask("wavelength_nm,signal\n600,1\n601,x\n602\n603,nan\n", {"--json"});
  EXPECT_EQ(told.status, 2);
  const auto json = told.json();
  ASSERT_GE(json["problems"].size(), 3u);
  EXPECT_THAT(json["problems"][0]["where"], HasSubstr("lab.csv:3:"));
  EXPECT_THAT(json["problems"][1]["where"], HasSubstr("lab.csv:4"));
  EXPECT_EQ(ask("wavelength,signal\n600,1\n", {}).status, 2);
  EXPECT_EQ(run(folder, {"measure", "spectrum", folder.file("none.csv")}).status, 2);
}

class MeasurePulses : public MeasureSpectrum {
 protected:
  program::Ran ask(const std::string& csv, std::vector<std::string> options) {
    options.insert(options.begin(), {"measure", "pulses", folder.write("slots.csv", csv)});
    return run(folder, options);
  }
};

constexpr double cycle_s = 4 * 439e-6, rate_Hz = 5.0;

double level(double dc, double depth, double phase, double t) {
  return dc * (1.0 + depth * std::sin(2 * std::numbers::pi * rate_Hz * t + phase));
}

/// Slots as an adapter takes them, each at its own moment of the cycle, over a dark level that drifts.
std::string slots() {
  std::ostringstream text;
  text.imbue(std::locale::classic());
  text.precision(17);
  text << "t_s,red,dark_a,infrared,dark_b\n";
  const auto dark = [](double t) { return 5.0 + 2.0 * t; };
  for (int k = 0; k < 352; ++k) {
    const double t = k * cycle_s, r = t + cycle_s / 8, a = t + 3 * cycle_s / 8, i = t + 5 * cycle_s / 8,
                 b = t + 7 * cycle_s / 8;
    text << t << ',' << level(2000, 0.016, 0.3, r) + dark(r) << ',' << dark(a) << ','
         << level(3000, 0.010, 0.3, i) + dark(i) << ',' << dark(b) << '\n';
  }
  return text.str();
}

TEST_F(MeasurePulses, FindsWhatTheTrainWasMadeOf) {
  const auto told = ask(slots(), {"--rate-Hz", "5", "--cycle-s", "0.001756", "--json"});
  ASSERT_EQ(told.status, 0) << told.out;
  const auto json = told.json();
  EXPECT_EQ(json["format"], 1);
  expect_relative(json["red"]["dc_nA"], 2000, 1e-4);
  expect_relative(json["red"]["ac_nA"], 32, 1e-4);
  expect_relative(json["red"]["modulation"], 0.016, 1e-4);
  expect_within(json["red"]["phase_rad"], 0.3, 1e-3);
  expect_relative(json["infrared"]["modulation"], 0.010, 1e-4);
  expect_relative(json["ratio"], 1.6, 1e-4);
  EXPECT_LT(json["red"]["residual_relative"].get<double>(), 1e-6);
}

TEST_F(MeasurePulses, FitsTheRateTooWhenAsked) {
  for (const std::vector<std::string>& start : {std::vector<std::string>{}, {"--rate-Hz", "5.1"}}) {
    std::vector<std::string> options{"--frequency", "free", "--cycle-s", "0.001756", "--json"};
    options.insert(options.end(), start.begin(), start.end());
    const auto told = ask(slots(), options);
    ASSERT_EQ(told.status, 0) << told.out;
    expect_relative(told.json()["red"]["rate_Hz"], 5.0, 1e-4);
    expect_relative(told.json()["ratio"], 1.6, 1e-4);
  }
}

TEST_F(MeasurePulses, TakesTrainsThatAreDarkCorrectedAlready) {
  std::ostringstream text;
  text.imbue(std::locale::classic());
  text << "t_s,red,infrared\n";
  text.precision(17);
  for (int k = 0; k < 600; ++k)
    text << k * 0.001 << ',' << level(500, 0.02, 0, k * 0.001) << ',' << level(900, 0.02, 0, k * 0.001) << '\n';
  const auto told = ask(text.str(), {"--rate-Hz", "5", "--json"});
  ASSERT_EQ(told.status, 0) << told.out;
  expect_relative(told.json()["ratio"], 1.0, 1e-6);
}

TEST_F(MeasurePulses, ATrainThatCannotBeUsedEndsWithOne) {
  const auto short_one = ask("t_s,red,infrared\n0,1,1\n0.1,2,2\n", {"--rate-Hz", "5", "--json"});
  EXPECT_EQ(short_one.status, 1);
  EXPECT_THAT(short_one.json()["problem"]["what"], HasSubstr("too few"));
  const auto no_cycle = ask(slots(), {"--rate-Hz", "5"});
  EXPECT_EQ(no_cycle.status, 2);
  EXPECT_THAT(no_cycle.err, HasSubstr("--cycle-s"));
}

}  // namespace
