#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <cmath>
#include <set>

#include "limits/diagnosis/likelihood.h"
#include "probe_pattern.h"

namespace probewright::limits::diagnosis {
namespace {

using ::testing::HasSubstr;
using Change = std::map<std::string, double>;

const std::vector<std::string> from_the_pulses{"cable_noise",
                                               "closed_path_light",
                                               "slot_crosstalk",
                                               "red_modulation_deviation",
                                               "infrared_modulation_deviation",
                                               "ratio_deviation_0p4",
                                               "ratio_deviation_1p0",
                                               "ratio_deviation_1p6"};
const std::vector<std::string> of_the_spectra{
    "red_centroid", "infrared_centroid",    "red_width",           "infrared_width",      "secondary_emission",
    "bin_mismatch", "saturation_error_100", "saturation_error_90", "saturation_error_80", "saturation_error_70",
    "red_peak"};

/// The modelled saturation errors of a red line that lies off by so many nanometres. Source: the design: +0.117,
/// +0.266, +0.416, +0.566 points per nm at 100, 90, 80, 70 %.
Change red_shift_errors(double nm) {
  return {{"saturation_error_100", 0.117 * nm},
          {"saturation_error_90", 0.266 * nm},
          {"saturation_error_80", 0.416 * nm},
          {"saturation_error_70", 0.566 * nm}};
}

/// AC/DC and R of a probe with `x` of the other LED's light in each slot and a part `s` of the red photocurrent that is
/// modulated as infrared. Source: the slots' own algebra; infrared photocurrent 1.5 times the red one.
Change mixed_slots(double x, double s) {
  constexpr double q = 1.5;
  Change change;
  double worst_red = 0.0, worst_infrared = 0.0;
  const struct {
    const char* check;
    double red, infrared;
  } points[] = {{"ratio_deviation_0p4", 0.010, 0.025},
                {"ratio_deviation_1p0", 0.010, 0.010},
                {"ratio_deviation_1p6", 0.016, 0.010}};
  for (const auto& p : points) {
    const double red = ((1.0 - s) * p.red + s * p.infrared + x * q * p.infrared) / (1.0 + x * q);
    const double infrared = (p.infrared + x / q * p.red) / (1.0 + x / q);
    change[p.check] = 100.0 * (red / infrared / (p.red / p.infrared) - 1.0);
    const double red_off = 100.0 * (red / p.red - 1.0), infrared_off = 100.0 * (infrared / p.infrared - 1.0);
    if (std::abs(red_off) > std::abs(worst_red)) worst_red = red_off;
    if (std::abs(infrared_off) > std::abs(worst_infrared)) worst_infrared = infrared_off;
  }
  change["red_modulation_deviation"] = worst_red;
  change["infrared_modulation_deviation"] = worst_infrared;
  return change;
}

/// Secondary emission of `power` of the red LED's power. Source: the design: 2 % is 1.27 % of the red photocurrent,
/// about -0.7 points at 100 %, changing sign near 75 %.
ProbeReadings with_secondary_emission(double power) {
  const double times = power / 0.02;
  return nominal_probe()
      .with(mixed_slots(0.0, 0.635 * power))
      .with({{"secondary_emission", 0.02 + 100.0 * power},
             {"saturation_error_100", -0.7 * times},
             {"saturation_error_90", -0.45 * times},
             {"saturation_error_80", -0.18 * times},
             {"saturation_error_70", 0.15 * times}});
}

ProbeReadings with_crosstalk(double share) {
  return nominal_probe().with(mixed_slots(share, 0.0)).with({{"slot_crosstalk", 100.0 * share}});
}

/// A die attach with 2.86 times the heating of itself. Source: the design: warm-up 2 to 3 times, centroid +1.2 nm,
/// width +0.4, light droops (-0.7 % per K), forward voltage -2 mV per K, for 8.6 K.
ProbeReadings with_red_die_attach() {
  return nominal_probe()
      .with(red_shift_errors(1.2))
      .with({{"red_warmup", 22.6},
             {"red_centroid", 661.2},
             {"bin_mismatch", 1.2},
             {"red_width", 19.5},
             {"red_transfer", 94.0},
             {"red_forward_voltage", 1.933}});
}

/// Each cause's own pattern in full severity, in the units of the checks, from the design's table and what follows from
/// it by arithmetic; not from the emulated bench, which the trial of faults tries.
std::map<std::string, ProbeReadings> own_patterns() {
  const auto nominal = nominal_probe;
  std::vector<std::string> lit = from_the_pulses;
  lit.insert(lit.end(), of_the_spectra.begin(), of_the_spectra.end());
  lit.insert(lit.end(), {"red_transfer", "infrared_transfer", "ambient_uptake"});
  std::vector<std::string> id_lost{"id_deviation",        "bin_mismatch",        "saturation_error_100",
                                   "saturation_error_90", "saturation_error_80", "saturation_error_70"};
  std::map<std::string, ProbeReadings> all;
  all["red_led_open"] = nominal()
                            .with({{"red_forward_voltage", 5.0},
                                   {"red_drive", 0.0},
                                   {"red_voltage_rise", 0.0},
                                   {"red_reverse_leakage", 0.0},
                                   {"red_warmup", 0.0}})
                            .without(lit, "blocked_by:red_forward_voltage");
  all["infrared_led_open"] = nominal()
                                 .with({{"infrared_forward_voltage", 5.0},
                                        {"infrared_drive", 0.0},
                                        {"infrared_voltage_rise", 0.0},
                                        {"infrared_reverse_leakage", 0.0},
                                        {"infrared_warmup", 0.0}})
                                 .without(lit, "blocked_by:infrared_forward_voltage");
  // 0.5 ohm of leads at 20 and 5 mA.
  all["red_led_short"] = nominal()
                             .with({{"red_forward_voltage", 0.010},
                                    {"red_voltage_rise", 7.5},
                                    {"red_reverse_leakage", 1000.0},
                                    {"red_warmup", 0.0},
                                    {"red_transfer", 0.0}})
                             .without(of_the_spectra, "too_dark")
                             .without(from_the_pulses, "too_dark");
  all["infrared_led_short"] = nominal()
                                  .with({{"infrared_forward_voltage", 0.010},
                                         {"infrared_voltage_rise", 7.5},
                                         {"infrared_reverse_leakage", 1000.0},
                                         {"infrared_warmup", 0.0},
                                         {"infrared_transfer", 0.0}})
                                  .without({"infrared_centroid", "infrared_width"}, "too_dark")
                                  .without(from_the_pulses, "too_dark");
  all["leds_reversed"] = nominal()
                             .with({{"red_forward_voltage", 5.0},
                                    {"infrared_forward_voltage", 5.0},
                                    {"red_drive", 0.0},
                                    {"infrared_drive", 0.0},
                                    {"red_voltage_rise", 0.0},
                                    {"infrared_voltage_rise", 0.0},
                                    {"red_warmup", 0.0},
                                    {"infrared_warmup", 0.0},
                                    {"red_reverse_leakage", 1000.0},
                                    {"infrared_reverse_leakage", 1000.0}})
                             .without(lit, "blocked_by:red_forward_voltage");
  // Forward voltages exchanged, spectra exchanged (none in either window), R inverted at 0.4 and 1.6.
  all["leds_swapped"] = nominal()
                            .with({{"red_forward_voltage", 1.30},
                                   {"infrared_forward_voltage", 1.95},
                                   {"red_warmup", 4.0},
                                   {"infrared_warmup", 7.9},
                                   {"red_transfer", 150.0},
                                   {"infrared_transfer", 100.0},
                                   {"ratio_deviation_0p4", 525.0},
                                   {"ratio_deviation_1p6", -61.0},
                                   {"red_modulation_deviation", 150.0},
                                   {"infrared_modulation_deviation", -60.0}})
                            .without(of_the_spectra, "no_peak");
  all["red_led_wrong_bin"] =
      nominal().with(red_shift_errors(4.0)).with({{"red_centroid", 663.5}, {"bin_mismatch", 4.0}});
  // A typical LED in the middle; the resistor is that of two bins below.
  all["id_other_bin"] = nominal().with(red_shift_errors(4.0)).with({{"bin_mismatch", 4.0}});
  // Source: the design: -0.007, -0.024, -0.051, -0.090 points per nm.
  all["infrared_led_wrong_bin"] = nominal().with({{"infrared_centroid", 954.3},
                                                  {"saturation_error_100", -0.007 * 14.0},
                                                  {"saturation_error_90", -0.024 * 14.0},
                                                  {"saturation_error_80", -0.051 * 14.0},
                                                  {"saturation_error_70", -0.090 * 14.0}});
  all["secondary_emission"] = with_secondary_emission(0.02);
  all["red_die_attach"] = with_red_die_attach();
  // 1.86 times 3.08 K more: 0.28 nm, 0.10 nm, -0.5 %, -1.5 mV per K.
  all["infrared_die_attach"] = nominal().with({{"infrared_warmup", 11.4},
                                               {"infrared_centroid", 941.9},
                                               {"infrared_width", 46.65},
                                               {"infrared_transfer", 145.7},
                                               {"infrared_forward_voltage", 1.2914}});
  all["red_led_weak"] = nominal().with({{"red_transfer", 50.0}});
  all["infrared_led_weak"] = nominal().with({{"infrared_transfer", 75.0}});
  all["detector_open"] =
      nominal()
          .with({{"dark_current", 0.0}, {"red_transfer", 0.0}, {"infrared_transfer", 0.0}, {"ambient_uptake", 0.0}})
          .without(from_the_pulses, "too_dark");
  all["detector_short"] =
      nominal()
          .with({{"dark_current", 10000.0}, {"red_transfer", 0.0}, {"infrared_transfer", 0.0}, {"ambient_uptake", 0.0}})
          .without(from_the_pulses, "too_dark");
  all["detector_reversed"] = nominal()
                                 .with({{"dark_current", 0.0},
                                        {"red_transfer", -100.0},
                                        {"infrared_transfer", -150.0},
                                        {"ambient_uptake", -60.0}})
                                 .without(from_the_pulses, "too_dark");
  all["detector_leaky"] = nominal().with({{"dark_current", 20.8}});
  all["shield_open"] = nominal().with({{"mains_pickup", 10.2}});
  all["housing_light_leak"] = nominal().with({{"ambient_uptake", 300.0}});
  all["direct_light_shunt"] = nominal().with({{"closed_path_light", 5.1},
                                              {"red_modulation_deviation", -5.0},
                                              {"infrared_modulation_deviation", -5.0},
                                              {"red_transfer", 105.0},
                                              {"infrared_transfer", 157.5}});
  all["slot_crosstalk"] = with_crosstalk(0.01);
  all["id_wrong"] = nominal().with({{"id_deviation", 7.0}});
  all["id_missing"] = nominal().without(id_lost, "id_open");
  all["cable_intermittent"] = nominal().with({{"cable_noise", 1.2e-3}, {"ratio_deviation_1p6", 2.9}});
  all["red_series_resistance"] = nominal().with({{"red_voltage_rise", 176.0}, {"red_forward_voltage", 2.05}});
  all["infrared_series_resistance"] =
      nominal().with({{"infrared_voltage_rise", 176.0}, {"infrared_forward_voltage", 1.40}});
  return all;
}

}  // namespace

// The numbers of the design's table come out of the arithmetic above.
TEST(ProbePatterns, AreThoseOfTheTable) {
  const Change secondary = mixed_slots(0.0, 0.0127), crosstalk = mixed_slots(0.01, 0.0);
  EXPECT_NEAR(secondary.at("ratio_deviation_0p4"), 1.9, 0.05);
  EXPECT_NEAR(secondary.at("ratio_deviation_1p6"), -0.5, 0.05);
  EXPECT_NEAR(crosstalk.at("ratio_deviation_0p4"), 2.6, 0.1);
  EXPECT_NEAR(crosstalk.at("ratio_deviation_1p6"), -1.0, 0.1);
  EXPECT_NEAR(secondary.at("ratio_deviation_1p0"), 0.0, 1e-9);
}

TEST(ProbeRules, AreWithoutFaultsAndKnowEveryCause) {
  std::set<std::string> known, tried;
  int stations = 0;
  for (const Cause& cause : probe_rules().causes)
    if (cause.kind == CauseKind::probe)
      known.insert(cause.slug);
    else
      ++stations;
  for (const auto& [cause, readings] : own_patterns()) tried.insert(cause);
  EXPECT_EQ(known, tried);
  EXPECT_EQ(stations, 5);  // drift of either band, set points, amplifier, temperature
  for (const Cause& cause : probe_rules().causes)
    if (cause.kind == CauseKind::probe) EXPECT_THAT(cause.rework, ::testing::StartsWith("RW-")) << cause.slug;
}

TEST(ProbeRules, EachCausesOwnPatternNamesIt) {
  for (const auto& [cause, readings] : own_patterns()) {
    const Diagnosis told = diagnosed(readings);
    EXPECT_EQ(first_cause(told), cause) << told.words;
    EXPECT_TRUE(told.besides.empty()) << cause << ": " << told.words;
    EXPECT_TRUE(told.ask_reference.empty()) << cause << ": " << told.words;
    ASSERT_TRUE(told.first());
    EXPECT_EQ(told.first()->rework, probe_rules().find(cause)->rework);
    EXPECT_EQ(told.first()->hard, probe_rules().find(cause)->hard_at.has_value());
    for (const Evidence& one : told.first()->evidence) EXPECT_TRUE(one.explained) << cause << ": " << one.words;
  }
}

// Severities differ from probe to probe: the pattern counts, not its size.
TEST(Diagnosis, APatternIsKnownAtOtherSeveritiesToo) {
  for (const double times : {0.25, 0.5, 1.5}) {
    const Diagnosis secondary = diagnosed(with_secondary_emission(0.02 * times));
    const Diagnosis crosstalk = diagnosed(with_crosstalk(0.01 * times));
    EXPECT_EQ(first_cause(secondary), "secondary_emission") << times << ": " << secondary.words;
    EXPECT_EQ(first_cause(crosstalk), "slot_crosstalk") << times << ": " << crosstalk.words;
    EXPECT_NEAR(secondary.first()->severity / times, 1.0, 0.15);
    EXPECT_NEAR(crosstalk.first()->severity / times, 1.0, 0.15);
  }
}

// Both raise R at 0.4 and lower it at 1.6; without their own checks only the pattern of R is left, and it is not
// enough.
TEST(Diagnosis, WithoutTheirOwnChecksTwoCausesAreHardToTell) {
  ProbeReadings readings = nominal_probe().with(mixed_slots(0.002, 0.0095));
  readings.without({"slot_crosstalk", "secondary_emission", "saturation_error_100", "saturation_error_90",
                    "saturation_error_80", "saturation_error_70", "infrared_modulation_deviation"},
                   "not_captured");
  const Diagnosis told = diagnosed(readings);
  ASSERT_GE(told.causes.size(), 2u) << told.words;
  EXPECT_EQ((std::set{told.causes[0].slug, told.causes[1].slug}),
            (std::set<std::string>{"slot_crosstalk", "secondary_emission"}));
  EXPECT_LT(told.causes[0].share, 0.8);
  EXPECT_THAT(told.words, HasSubstr("(perhaps " + told.causes[1].words + ")"));
}

TEST(Diagnosis, EvidenceIsToldInWords) {
  const Diagnosis leaky = diagnosed(nominal_probe().with({{"dark_current", 40.0}}));
  EXPECT_EQ(leaky.words, "leaky detector: dark current 9.3 times its tolerance; everything else normal");
  const Diagnosis open = diagnosed(own_patterns().at("red_led_open"));
  EXPECT_EQ(open.decided_at, "voltages");
  EXPECT_THAT(open.words, HasSubstr("red drive current -50 times its tolerance (expected below -20)"));
  EXPECT_THAT(open.words, HasSubstr("what comes after \"voltages\" was not looked at"));
  const Diagnosis missing = diagnosed(own_patterns().at("id_missing"));
  EXPECT_THAT(missing.words, HasSubstr("ID resistor has no reading (id open)"));
  const Diagnosis crosstalk = diagnosed(with_crosstalk(0.01));
  EXPECT_THAT(crosstalk.words, HasSubstr("ratio at 0.4 1.3 times its tolerance (expected 1.3)"));
}

// Nothing tells a wrong resistor from a wrong LED but which of the two is the unusual part; both are named.
TEST(Diagnosis, WhatLooksTheSameIsSaid) {
  const Diagnosis told = diagnosed(own_patterns().at("id_other_bin"));
  ASSERT_GE(told.causes.size(), 2u);
  EXPECT_EQ(told.causes[1].slug, "red_led_wrong_bin");
  EXPECT_THAT(told.words, HasSubstr("(or red LED of another bin, which looks the same)"));
}

TEST(Diagnosis, TwoFaultsAreBothNamed) {
  const struct {
    std::string first, second;
    ProbeReadings readings;
  } mixtures[] = {
      {"slot_crosstalk", "detector_leaky", with_crosstalk(0.01).with({{"dark_current", 20.8}})},
      {"secondary_emission", "shield_open", with_secondary_emission(0.02).with({{"mains_pickup", 10.2}})},
      {"red_die_attach", "housing_light_leak", with_red_die_attach().with({{"ambient_uptake", 300.0}})},
      {"infrared_led_weak", "id_wrong", nominal_probe().with({{"infrared_transfer", 75.0}, {"id_deviation", 7.0}})},
  };
  for (const auto& mixture : mixtures) {
    const Diagnosis told = diagnosed(mixture.readings);
    ASSERT_TRUE(told.first()) << mixture.first << ": " << told.words;
    ASSERT_EQ(told.besides.size(), 1u) << told.words;
    EXPECT_EQ((std::set{told.first()->slug, told.besides.front().slug}), (std::set{mixture.first, mixture.second}))
        << told.words;
    EXPECT_THAT(told.words, HasSubstr(" and "));
    EXPECT_THAT(told.words, HasSubstr("everything else normal"));
  }
}

// Both mix the slots: what the two together do to R is neither's pattern.
TEST(Diagnosis, TwoFaultsThatMoveTheSameChecksAreToldApart) {
  ProbeReadings readings = with_secondary_emission(0.02);
  readings.with(mixed_slots(0.01, 0.0127)).with({{"slot_crosstalk", 1.0}});
  const Diagnosis told = diagnosed(readings);
  ASSERT_TRUE(told.first()) << told.words;
  ASSERT_EQ(told.besides.size(), 1u) << told.words;
  EXPECT_EQ((std::set{told.first()->slug, told.besides.front().slug}),
            (std::set<std::string>{"slot_crosstalk", "secondary_emission"}));
}

TEST(Diagnosis, ThreeFaultsAreAllNamed) {
  const Diagnosis told =
      diagnosed(nominal_probe().with({{"infrared_transfer", 75.0}, {"id_deviation", 7.0}, {"dark_current", 20.8}}));
  ASSERT_TRUE(told.first());
  std::set<std::string> named{told.first()->slug};
  for (const LikelyCause& more : told.besides) named.insert(more.slug);
  EXPECT_EQ(named, (std::set<std::string>{"infrared_led_weak", "id_wrong", "detector_leaky"})) << told.words;
}

// A hard fault stops attribution: what comes after it is its consequence, whatever it looks like.
TEST(Diagnosis, AfterAHardFaultNothingIsAttributed) {
  ProbeReadings readings = own_patterns().at("detector_open");
  readings.with({{"infrared_centroid", 954.3}, {"secondary_emission", 2.0}});
  Diagnosis told = diagnosed(readings);
  EXPECT_EQ(first_cause(told), "detector_open");
  EXPECT_TRUE(told.besides.empty()) << told.words;
  EXPECT_EQ(told.decided_at, "detector");
  // The order decides: an LED that is open comes before a detector that is.
  told = diagnosed(own_patterns().at("red_led_open").with({{"dark_current", 10000.0}}));
  EXPECT_EQ(first_cause(told), "red_led_open");
  EXPECT_EQ(told.decided_at, "voltages");
  EXPECT_TRUE(told.besides.empty()) << told.words;
}

// What comes before the hard fault's stage, or in it, counts.
TEST(Diagnosis, AFaultBeforeTheHardOneIsNamedBesideIt) {
  const Diagnosis told = diagnosed(own_patterns().at("detector_open").with({{"id_deviation", 7.0}}));
  EXPECT_EQ(first_cause(told), "detector_open") << told.words;
  ASSERT_EQ(told.besides.size(), 1u) << told.words;
  EXPECT_EQ(told.besides.front().slug, "id_wrong");
  ProbeReadings both = own_patterns().at("red_led_short");
  both.with({{"infrared_forward_voltage", 0.010},
             {"infrared_voltage_rise", 7.5},
             {"infrared_reverse_leakage", 1000.0},
             {"infrared_warmup", 0.0}});
  const Diagnosis shorts = diagnosed(both);
  ASSERT_TRUE(shorts.first());
  ASSERT_EQ(shorts.besides.size(), 1u) << shorts.words;
  EXPECT_EQ((std::set{shorts.first()->slug, shorts.besides.front().slug}),
            (std::set<std::string>{"red_led_short", "infrared_led_short"}));
}

TEST(Diagnosis, AHealthyProbeHasNothingWrong) {
  const Diagnosis told = diagnosed(nominal_probe());
  EXPECT_EQ(told.answer, Diagnosis::Answer::nothing_wrong);
  EXPECT_EQ(told.first(), nullptr);
  EXPECT_TRUE(told.causes.empty() && told.besides.empty() && told.ask_reference.empty());
  EXPECT_EQ(told.words, "the readings are those of a healthy probe");
}

// A reading whose uncertainty is too large is no fault of a probe's: it fails the run, and no cause is made up for it.
TEST(Diagnosis, AReadingThatMayNotBeJudgedIsNoCause) {
  std::vector<JudgedValue> readings = nominal_probe().judged();
  const double too_uncertain = 1.5 * probe_sheet().find("ambient_uptake")->expanded_uncertainty;
  for (JudgedValue& one : readings)
    if (one.judgement.check == "ambient_uptake")
      one = {judge(probe_sheet(), "ambient_uptake", 60.0, too_uncertain), 60.0, too_uncertain};
  const Diagnosis told = likely_causes(probe_rules(), probe_sheet(), readings);
  EXPECT_EQ(first_cause(told), "none_of_known");
  EXPECT_THAT(told.words, ::testing::StartsWith("none of the known causes: ambient light taken up "));
  EXPECT_THAT(told.words, HasSubstr("but not usable (uncertainty above declared)"));
}

// A probe at the end of the healthy spread fails without a fault: there is no cause to name, and that is said.
TEST(Diagnosis, JustOutsideALimitNeedsNoCause) {
  const Diagnosis told = diagnosed(nominal_probe().with({{"red_width", 24.1}}));
  EXPECT_EQ(first_cause(told), "none_of_known") << told.words;
  EXPECT_THAT(told.words, HasSubstr("none of the known causes: red width (FWHM) 1.0 times its tolerance"));
}

TEST(Diagnosis, WhatNoCauseExplainsIsNotForcedOnOne) {
  const std::vector<Change> nonsense = {
      {{"red_width", 40.0}},
      {{"red_drive", 17.0}, {"infrared_drive", 23.0}},
      {{"ratio_deviation_1p0", 9.0}},
      {{"red_width", 2.0},
       {"ambient_uptake", -200.0},
       {"ratio_deviation_0p4", -9.0},
       {"id_deviation", -7.0},
       {"red_voltage_rise", 20.0},
       {"mains_pickup", -5.0},
       {"infrared_width", 90.0}},
  };
  for (const Change& change : nonsense) {
    const Diagnosis told = diagnosed(nominal_probe().with(change));
    EXPECT_EQ(first_cause(told), "none_of_known") << change.begin()->first << ": " << told.words;
    EXPECT_THAT(told.words, ::testing::StartsWith("none of the known causes"));
  }
}

TEST(Diagnosis, WithoutReadingsThereIsNoCause) {
  EXPECT_EQ(diagnose(probe_rules(), {}).answer, Diagnosis::Answer::nothing_wrong);
  ProbeReadings blocked = nominal_probe();
  std::vector<std::string> all;
  for (const auto& [check, value] : blocked.values)
    if (check != "probe_present") all.push_back(check);
  blocked.without(all, "blocked_by:probe_present").with({{"probe_present", 0.0}});
  const Diagnosis told = diagnosed(blocked);
  EXPECT_EQ(first_cause(told), "none_of_known") << told.words;
}

TEST(Diagnosis, ValuesBeyondAllMeasureAreSurvived) {
  for (const double value : {1e300, -1e300, HUGE_VAL, -HUGE_VAL, std::nan("")}) {
    for (const char* check : {"dark_current", "red_transfer", "ratio_deviation_0p4", "id_deviation"}) {
      const Diagnosis told = diagnosed(nominal_probe().with({{check, value}}));
      EXPECT_FALSE(told.words.empty());
      for (const LikelyCause& cause : told.causes) EXPECT_TRUE(cause.share >= 0.0 && cause.share <= 1.0);
    }
  }
  // The first of two readings of one check counts.
  std::vector<JudgedValue> twice = nominal_probe().judged(),
                           again = nominal_probe().with({{"dark_current", 40.0}}).judged();
  twice.insert(twice.end(), again.begin(), again.end());
  EXPECT_EQ(likely_causes(probe_rules(), probe_sheet(), twice).answer, Diagnosis::Answer::nothing_wrong);
}

TEST(Diagnosis, TheSameReadingsGiveTheSameAnswerInAnyOrder) {
  std::vector<JudgedValue> readings = with_red_die_attach().judged();
  const std::string words = likely_causes(probe_rules(), probe_sheet(), readings).words;
  std::reverse(readings.begin(), readings.end());
  EXPECT_EQ(likely_causes(probe_rules(), probe_sheet(), readings).words, words);
}

// A station's faults, as one probe sees them. Source: the design's table. A new reel of LEDs looks the same, so no
// probe convicts a nest: its cause is asked about and never ranked.
TEST(Diagnosis, AStationIsAskedAboutNeverConvicted) {
  Change warm{{"red_centroid", 662.8},
              {"bin_mismatch", 2.8},
              {"infrared_centroid", 945.9},
              {"red_width", 20.07},
              {"infrared_width", 48.1},
              {"red_forward_voltage", 1.91},
              {"infrared_forward_voltage", 1.27},
              {"red_transfer", 86.0},
              {"infrared_transfer", 135.0}};
  for (const auto& [check, points] : red_shift_errors(2.8)) warm[check] = points;
  for (const auto& [check, per_nm] : Change{{"saturation_error_100", -0.007},
                                            {"saturation_error_90", -0.024},
                                            {"saturation_error_80", -0.051},
                                            {"saturation_error_70", -0.090}})
    warm[check] += 5.6 * per_nm;
  const std::map<std::string, Change> stations = {
      {"wrong_temperature", warm},
      {"set_point_error",
       {{"ratio_deviation_0p4", 3.0},
        {"ratio_deviation_1p0", 3.0},
        {"ratio_deviation_1p6", 3.0},
        {"red_modulation_deviation", 3.0}}},
      {"amplifier_gain", {{"red_transfer", 142.0}, {"infrared_transfer", 213.0}}},
  };
  for (const auto& [cause, change] : stations) {
    const Diagnosis told = diagnosed(nominal_probe().with(change));
    ASSERT_FALSE(told.ask_reference.empty()) << cause << ": " << told.words;
    EXPECT_EQ(told.ask_reference.front().slug, cause) << told.words;
    EXPECT_THAT(told.words, HasSubstr("ask for a reference check"));
    for (const LikelyCause& ranked : told.causes) EXPECT_EQ(ranked.kind, CauseKind::probe) << ranked.slug;
    for (const LikelyCause& ranked : told.besides) EXPECT_EQ(ranked.kind, CauseKind::probe) << ranked.slug;
  }
}

TEST(Pattern, IsInUnitsOfTolerance) {
  const Rules& rules = probe_rules();
  const Sheet& sheet = probe_sheet();
  ProbeReadings readings = nominal_probe();
  readings.with({{"red_centroid", 665.0},
                 {"dark_current", 40.0},
                 {"bin_mismatch", -2.8},
                 {"infrared_warmup", 7.05},
                 {"probe_present", 0.0}});
  readings.without({"ratio_deviation_0p4"}, "too_dark");
  const Pattern pattern = pattern_of(rules, sheet, readings.judged());
  std::map<std::string, Deviation> by_check;
  for (const Deviation& one : pattern) by_check[one.check] = one;
  EXPECT_NEAR(by_check.at("red_centroid").value.value(), 1.0, 1e-12);             // on its upper limit
  EXPECT_NEAR(by_check.at("red_centroid").standard_u, 0.25 * 0.33 / 5.0, 1e-12);  // half of half the declared U
  EXPECT_FALSE(by_check.at("red_centroid").not_ok);
  EXPECT_NEAR(by_check.at("dark_current").value.value(), 39.2 / 4.2, 1e-12);  // one limit: from the typical value
  EXPECT_TRUE(by_check.at("dark_current").not_ok);
  EXPECT_NEAR(by_check.at("bin_mismatch").value.value(), -2.0, 1e-12);  // watched
  EXPECT_TRUE(by_check.at("bin_mismatch").not_ok);
  EXPECT_NEAR(
      by_check.at("infrared_warmup").value.value(),
      (7.05 - rules.check("infrared_warmup")->scale->typical) / rules.check("infrared_warmup")->scale->tolerance,
      1e-12);                                                  // recorded: the rules' own scale
  EXPECT_EQ(by_check.at("probe_present").value.value(), 1.0);  // no
  EXPECT_FALSE(by_check.at("ratio_deviation_0p4").value);
  EXPECT_EQ(by_check.at("ratio_deviation_0p4").no_reading, "too_dark");
  EXPECT_TRUE(by_check.at("ratio_deviation_0p4").not_ok);
  EXPECT_FALSE(by_check.contains("red_peak"));  // recorded, and the rules give it no scale
}

TEST(Pattern, ALowerLimitAloneIsOneTolerance) {
  const Sheet sheet = [] {
    auto read = read_sheet(
        "sheet: X\nrevision: 1\nreason: r\ndecision: d\nchecks:\n"
        "  red_transfer: {lower: 60 nA/mA, typical: 100 nA/mA, U: 1 nA/mA}\n",
        "x.yaml");
    return read.value();
  }();
  const std::vector<JudgedValue> readings{{judge(sheet, "red_transfer", 20.0, 1.0), 20.0, 1.0}};
  const Pattern pattern = pattern_of(probe_rules(), sheet, readings);
  ASSERT_EQ(pattern.size(), 1u);
  EXPECT_NEAR(pattern[0].value.value(), 2.0, 1e-12);  // (20 - 100) / (60 - 100): beyond the limit is above 1
  EXPECT_NEAR(pattern[0].standard_u, 0.5 / 40.0, 1e-12);
}

// The likelihood by hand: one check, one figure.
TEST(Likelihood, IsTheDocumentedDensity) {
  UsedCheck used;
  used.check = "dark_current", used.usual = 0.1, used.spread = 0.3;
  Deviation seen{"dark_current", 2.6, 0.4, true, {}, {}};
  Cause cause;
  cause.slug = "leaky", cause.everything_else_still = true;
  cause.moves = {{"dark_current", {{Expected::Form::by, 2.0, 0.25, ""}}}};
  const Part part{&cause, 1.5};
  const Datum datum{&used, &seen};
  const double variance = 0.09 + 0.16 + 0.25 * 0.25 * 9.0, off = 2.6 - (0.1 + 3.0);
  const double normal = std::exp(-0.5 * off * off / variance) / std::sqrt(2.0 * 3.14159265358979 * variance);
  const double anywhere = 1.0 / (3.14159265358979 * 3.0 * (1.0 + 2.6 * 2.6 / 9.0));
  const std::vector<Part> parts{part};
  const double stray = 0.02;
  const double expected = std::log((1.0 - stray) * normal + stray * anywhere);
  EXPECT_NEAR(log_likelihood(datum, outlook("dark_current", parts), stray), expected, 1e-9);
  EXPECT_NEAR(stray_probability(datum, outlook("dark_current", parts), stray),
              stray * anywhere / (stray * anywhere + (1.0 - stray) * normal), 1e-9);
  used.weight = 0.25;
  EXPECT_NEAR(log_likelihood(datum, outlook("dark_current", parts), stray), 0.25 * expected, 1e-9);
}

// A cause that could have any severity has less evidence than one that says which.
TEST(Likelihood, SeveritiesThatDoNotFitCost) {
  UsedCheck used;
  used.check = "dark_current", used.spread = 0.1;
  Deviation seen{"dark_current", 1.0, 0.0, true, {}, {}};
  Cause sure;
  sure.everything_else_still = true;
  sure.moves = {{"dark_current", {{Expected::Form::by, 1.0, 0.1, ""}}}};
  Cause wide = sure;
  wide.least = 0.01, wide.most = 100.0;
  const std::vector<Datum> data{{&used, &seen}};
  const Fitted of_sure = fit(data, sure, {}, 0.01), of_wide = fit(data, wide, {}, 0.01);
  EXPECT_GT(of_sure.log_evidence, of_wide.log_evidence + 2.0);
  EXPECT_NEAR(of_wide.severity, 1.0, 0.2);
  wide.either_way = true;
  seen.value = -1.0;
  EXPECT_NEAR(fit(data, wide, {}, 0.01).severity, -1.0, 0.2);
}

}  // namespace probewright::limits::diagnosis
