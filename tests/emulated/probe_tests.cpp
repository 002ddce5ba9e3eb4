#include <gtest/gtest.h>

#include <cmath>
#include <cstdio>
#include <functional>
#include <nlohmann/json.hpp>
#include <vector>

#include "drivers/emulated/deviates.h"
#include "drivers/emulated/model_nominals.h"
#include "drivers/emulated/probe.h"
#include "drivers/emulated/station_errors.h"
#include "drivers/emulated/truth.h"

namespace probewright::emulated {
namespace {

struct Spread {
  double mean = 0.0, sd = 0.0;
};

Spread spread_of(const std::vector<double>& values) {
  Spread spread;
  for (const double value : values) spread.mean += value / static_cast<double>(values.size());
  for (const double value : values) {
    spread.sd += (value - spread.mean) * (value - spread.mean) / static_cast<double>(values.size() - 1);
  }
  spread.sd = std::sqrt(spread.sd);
  return spread;
}

std::vector<Truth> many_probes(int count, std::string_view model = "AQ-20") {
  std::vector<Truth> truths;
  for (int i = 0; i < count; ++i) truths.push_back(truth_of(draw_probe(7, "AQ20-048-" + std::to_string(i), model)));
  return truths;
}

Spread spread_of(const std::vector<Truth>& truths, const std::function<double(const Truth&)>& value) {
  std::vector<double> values;
  for (const Truth& truth : truths) values.push_back(value(truth));
  return spread_of(values);
}

double share(const std::vector<Truth>& truths, const std::function<bool(const Truth&)>& holds) {
  double count = 0.0;
  for (const Truth& truth : truths) count += holds(truth) ? 1.0 : 0.0;
  return count / static_cast<double>(truths.size());
}

// SplitMix64's first outputs for seed 1234567 (reference values published with the algorithm's C code, from memory).
TEST(Deviates, RestOnSplitMix64) {
  Deviates deviates(1234567);
  EXPECT_EQ(deviates.bits(), 6457827717110365317u);
  EXPECT_EQ(deviates.bits(), 3203168211198807973u);
}

TEST(Deviates, NormalHasTheMomentsOfANormal) {
  Deviates deviates(3);
  constexpr int count = 400000;
  double sums[5] = {};
  for (int i = 0; i < count; ++i) {
    const double x = deviates.normal();
    double power = 1.0;
    for (double& sum : sums) {
      sum += power / count;
      power *= x;
    }
  }
  EXPECT_NEAR(sums[1], 0.0, 0.008);
  EXPECT_NEAR(sums[2], 1.0, 0.012);
  EXPECT_NEAR(sums[3], 0.0, 0.03);
  EXPECT_NEAR(sums[4], 3.0, 0.08);
}

TEST(Deviates, SameSeedSameNumbers) {
  Deviates first(99), again(99), other(100);
  for (int i = 0; i < 100; ++i) EXPECT_EQ(first.normal(), again.normal());
  EXPECT_NE(first.normal(), other.normal());
  EXPECT_NE(named_seed(1, "a"), named_seed(1, "b"));
  EXPECT_NE(named_seed(1, "a"), named_seed(2, "a"));
}

TEST(Probe, IsDrawnFromSeedAndSerialAlone) {
  const Probe first = draw_probe(1, "AQ20-048-00137", "AQ-20"), again = draw_probe(1, "AQ20-048-00137", "AQ-20");
  EXPECT_EQ(first.red.line.peak_nm, again.red.line.peak_nm);
  EXPECT_EQ(first.ambient_nA, again.ambient_nA);
  EXPECT_NE(first.red.line.peak_nm, draw_probe(1, "AQ20-048-00138", "AQ-20").red.line.peak_nm);
  EXPECT_NE(first.red.line.peak_nm, draw_probe(2, "AQ20-048-00137", "AQ-20").red.line.peak_nm);
}

// Source: the design's part-to-part spreads (1 sigma) and nominals. The bounds are four standard errors.
TEST(Probe, TwoThousandHaveTheDesignsSpread) {
  const auto truths = many_probes(2000);
  const auto near = [&](const char* what, double mean, double sd, const std::function<double(const Truth&)>& value) {
    const Spread spread = spread_of(truths, value);
    std::printf("[  figures ] %-24s mean %9.4f  sd %7.4f\n", what, spread.mean, spread.sd);
    EXPECT_NEAR(spread.mean, mean, 4.0 * sd / std::sqrt(2000.0)) << what;
    EXPECT_NEAR(spread.sd, sd, 4.0 * sd / std::sqrt(4000.0)) << what;
  };
  near("red whole centroid, nm", 659.94, 1.3, [](const Truth& t) { return t.red.whole_centroid_nm; });
  near("infrared whole centroid", 940.30, 2.0, [](const Truth& t) { return t.infrared.whole_centroid_nm; });
  near("red FWHM, nm", 19.07, 0.8, [](const Truth& t) { return t.red.width_nm; });
  near("infrared FWHM, nm", 46.08, 2.0, [](const Truth& t) { return t.infrared.width_nm; });
  near("red skew", -0.15, 0.1, [](const Truth& t) { return t.probe.red.line.skew; });
  near("red Vf, V", 1.95, 0.03, [](const Truth& t) { return t.red.forward_voltage_V; });
  near("infrared Vf, V", 1.30, 0.02, [](const Truth& t) { return t.infrared.forward_voltage_V; });
  near("doubling, K", 10.0, 1.5, [](const Truth& t) { return t.probe.photodiode.doubling_K; });
}

// Source: the design's demo limits for AQ-20. Nearly all healthy probes conform; what does not is the tail of the
// stated spreads.
TEST(Probe, HealthyOnesConformToTheDemoLimits) {
  const auto truths = many_probes(2000);
  const auto most = [&](const char* what, double least, const std::function<bool(const Truth&)>& holds) {
    EXPECT_GE(share(truths, holds), least) << what;
  };
  const auto inside = [](double value, double low, double high) { return value >= low && value <= high; };
  most("red rise", 0.99, [&](const Truth& t) { return inside(t.red.voltage_rise_mV, 55.0, 150.0); });
  most("infrared rise", 0.99, [&](const Truth& t) { return inside(t.infrared.voltage_rise_mV, 55.0, 150.0); });
  most("red transfer", 0.99, [&](const Truth& t) { return inside(t.red.transfer_nA_per_mA, 65.0, 140.0); });
  most("infrared transfer", 0.99, [&](const Truth& t) { return inside(t.infrared.transfer_nA_per_mA, 97.0, 210.0); });
  most("red centroid", 0.995, [&](const Truth& t) { return inside(t.red.centroid_nm, 655.0, 665.0); });
  most("infrared centroid", 0.995, [&](const Truth& t) { return inside(t.infrared.centroid_nm, 932.3, 948.3); });
  most("dark", 0.999, [](const Truth& t) { return t.dark_current_nA < 5.0; });
  most("secondary", 0.999, [](const Truth& t) { return t.secondary_emission_percent < 0.10; });
  most("warm-up", 0.999, [](const Truth& t) { return t.red.warmup_mV < 14.0; });
  most("id", 0.999, [](const Truth& t) { return std::abs(t.id_deviation_percent) < 1.5; });
  most("ratio", 0.999, [](const Truth& t) { return std::abs(t.ratios[0].ratio_deviation_percent) < 0.5; });
  const Spread rise = spread_of(truths, [](const Truth& t) { return t.red.voltage_rise_mV; });
  EXPECT_NEAR(rise.mean, 100.0, 3.0);
}

TEST(Probe, IsCodedForItsBin) {
  int off = 0;
  for (const Truth& truth : many_probes(500)) {
    double nominal = 0.0;
    for (const BinNominals& bin : all_bins()) {
      if (bin.name == truth.probe.coded_bin) nominal = bin.centre_nm;
    }
    if (std::abs(truth.red.whole_centroid_nm - nominal) > 1.0) ++off;
  }
  EXPECT_LT(off, 75);  // sorting is not perfect, and the outer bins take what lies beyond
}

TEST(Probe, BinResistorsAreFifteenPercentApart) {
  const auto& bins = all_bins();
  for (std::size_t i = 1; i < bins.size(); ++i) {
    EXPECT_GE(bins[i].id_ohm / bins[i - 1].id_ohm, 1.15) << bins[i].name;
    EXPECT_NEAR(bins[i].centre_nm - bins[i - 1].centre_nm, 2.0, 1e-12) << bins[i].name;
  }
}

TEST(Probe, TheOtherModelIsAntiparallelAndDarker) {
  const auto truths = many_probes(300, "AQ-35");
  for (const Truth& truth : truths) {
    EXPECT_EQ(truth.probe.wiring, Wiring::antiparallel);
    EXPECT_EQ(truth.red.drive_mA, 10.0);
    EXPECT_EQ(truth.red.reverse_leakage_uA, 0.0);
  }
  EXPECT_GE(
      share(truths, [](const Truth& t) { return t.red.transfer_nA_per_mA > 30 && t.red.transfer_nA_per_mA < 70; }),
      0.99);
  EXPECT_FALSE(knows_model("AQ-99"));
  EXPECT_THROW(draw_probe(1, "x", "AQ-99"), std::invalid_argument);
}

Probe spotless() {
  Probe probe = draw_probe(1, "AQ20-048-00001", "AQ-20");
  for (Led* led : {&probe.red, &probe.infrared}) led->optical_power = 1.0;
  probe.red.transfer_nA_per_mA = 100.0;
  probe.infrared.transfer_nA_per_mA = 150.0;
  probe.secondary_power = probe.secondary_current = probe.slot_crosstalk = probe.direct_light = 0.0;
  return probe;
}

TEST(Truth, OfASpotlessProbeIsThePhantomsOwn) {
  const Truth truth = truth_of(spotless());
  for (const RatioTruth& ratio : truth.ratios) {
    EXPECT_NEAR(ratio.ratio_deviation_percent, 0.0, 1e-9);
    EXPECT_NEAR(ratio.red_modulation_deviation_percent, 0.0, 1e-9);
  }
  EXPECT_NEAR(truth.secondary_emission_percent, 0.0, 1e-6);
}

// Source: the design's table of causes: 2 % secondary emission moves R by +1.9 % at 0.4 and -0.5 % at 1.6; 1 % slot
// cross-talk by +2.6 % and -1 %; a light shunt moves AC/DC of both bands alike and R not at all.
TEST(Truth, DefectsMoveTheRatiosAsTheDesignSays) {
  Probe probe = spotless();
  probe.secondary_power = 0.02;
  probe.secondary_current = 0.635 * 0.02;
  Truth truth = truth_of(probe);
  EXPECT_NEAR(truth.ratios[0].ratio_deviation_percent, 1.9, 0.05);
  EXPECT_NEAR(truth.ratios[2].ratio_deviation_percent, -0.5, 0.05);
  EXPECT_NEAR(truth.secondary_emission_percent, 2.0, 0.01);
  probe = spotless();
  probe.slot_crosstalk = 0.01;
  truth = truth_of(probe);
  EXPECT_NEAR(truth.ratios[0].ratio_deviation_percent, 2.6, 0.1);
  EXPECT_NEAR(truth.ratios[2].ratio_deviation_percent, -1.0, 0.1);
  probe = spotless();
  probe.direct_light = 0.05;
  truth = truth_of(probe);
  EXPECT_NEAR(truth.ratios[0].ratio_deviation_percent, 0.0, 1e-9);
  EXPECT_NEAR(truth.ratios[0].red_modulation_deviation_percent, -5.0, 1e-9);
  EXPECT_NEAR(truth.ratios[0].infrared_modulation_deviation_percent, -5.0, 1e-9);
}

TEST(Truth, FileHoldsEverySerialWithSlugsAndParameters) {
  std::map<std::string, Truth> truths;
  for (const char* serial : {"AQ20-048-00001", "AQ20-048-00002"}) {
    truths[serial] = truth_of(draw_probe(5, serial, "AQ-20"));
  }
  const auto file = nlohmann::json::parse(truth_json(5, truths));
  EXPECT_EQ(file["seed"], 5);
  EXPECT_EQ(file["emulated"], true);
  ASSERT_EQ(file["probes"].size(), 2u);
  const auto& probe = file["probes"]["AQ20-048-00002"];
  const Truth& truth = truths["AQ20-048-00002"];
  EXPECT_EQ(probe["measurands"]["red_centroid"].get<double>(), truth.red.centroid_nm);
  EXPECT_EQ(probe["measurands"]["ratio_deviation_1p0"].get<double>(), truth.ratios[1].ratio_deviation_percent);
  EXPECT_EQ(probe["parameters"]["red"]["line"]["peak_nm"].get<double>(), truth.probe.red.line.peak_nm);
  EXPECT_EQ(probe["model"], "AQ-20");
}

// The spread of R over stations from the set points alone: the design's U of R is 0.7 % (k = 2), most of it common.
TEST(StationErrors, AreOfTheSizeThatCalibrationLeaves) {
  std::vector<double> ratios, offsets;
  for (int nest = 1; nest <= 2000; ++nest) {
    const StationErrors errors = draw_station_errors(3, nest);
    ratios.push_back(100.0 * ((1.0 + errors.set_points[1].red) / (1.0 + errors.set_points[1].infrared) - 1.0));
    offsets.push_back(errors.wavelength_offset_nm);
  }
  EXPECT_NEAR(spread_of(ratios).sd, 0.31, 0.03);
  EXPECT_NEAR(spread_of(offsets).mean, 0.0, 0.01);
  EXPECT_EQ(draw_station_errors(3, 1).thermometer_K, draw_station_errors(3, 1).thermometer_K);
}

}  // namespace
}  // namespace probewright::emulated
