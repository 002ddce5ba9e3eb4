#include "limits/judge.h"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <cmath>
#include <limits>

#include "sample_sheet.h"
#include "station/base/numbers.h"
#include "tests/support/expect.h"
#include "tests/support/reference.h"

namespace probewright::limits {
namespace {

using ::testing::ElementsAre;
using ::testing::HasSubstr;
using ::testing::IsEmpty;

constexpr double not_a_number = std::numeric_limits<double>::quiet_NaN();
constexpr double infinite = std::numeric_limits<double>::infinity();

double next_up(double x) { return std::nextafter(x, infinite); }
double next_down(double x) { return std::nextafter(x, -infinite); }

Outcome outcome(const char* check, double value, double own_U) {
  static const Sheet sheet = sample_sheet();
  return judge(sheet, check, value, own_U).outcome;
}
Judgement judged(const char* check, std::optional<double> value, double own_U, std::string_view reason = {}) {
  return judge(sample_sheet(), check, value, own_U, reason);
}

TEST(Judge, ExactlyOnTheLimitIsOk) {
  EXPECT_EQ(outcome("red_centroid", 655.0, 0.3), Outcome::ok);
  EXPECT_EQ(outcome("red_centroid", 665.0, 0.3), Outcome::ok);
  EXPECT_EQ(outcome("red_centroid", next_down(655.0), 0.3), Outcome::not_ok);
  EXPECT_EQ(outcome("red_centroid", next_up(665.0), 0.3), Outcome::not_ok);
  EXPECT_EQ(outcome("dark_current", 5.0, 0.3), Outcome::ok);
  EXPECT_EQ(outcome("dark_current", next_up(5.0), 0.3), Outcome::not_ok);
  EXPECT_EQ(outcome("dark_current", -infinite, 0.3), Outcome::unusable);
}

TEST(Judge, NominalAndToleranceEndWhereAPersonReadsThem) {
  EXPECT_EQ(outcome("red_drive", 20.4, 0.05), Outcome::ok);
  EXPECT_EQ(outcome("red_drive", 19.6, 0.05), Outcome::ok);
  EXPECT_EQ(outcome("red_drive", next_up(20.4), 0.05), Outcome::not_ok);
}

TEST(Judge, BetweenAcceptanceLimitAndLimitIsTooClose) {
  EXPECT_EQ(outcome("saturation_error_70", 0.83815, 0.19), Outcome::ok);
  EXPECT_EQ(outcome("saturation_error_70", next_up(0.83815), 0.19), Outcome::too_close);
  EXPECT_EQ(outcome("saturation_error_70", 1.0, 0.19), Outcome::too_close);
  EXPECT_EQ(outcome("saturation_error_70", next_up(1.0), 0.19), Outcome::not_ok);
  EXPECT_EQ(outcome("saturation_error_70", -0.83815, 0.19), Outcome::ok);
  EXPECT_EQ(outcome("saturation_error_70", -0.9, 0.19), Outcome::too_close);
  EXPECT_EQ(outcome("saturation_error_70", -1.1, 0.19), Outcome::not_ok);
}

TEST(Judge, GuardsHoldPerCheck) {
  // red_centroid has no guard: its whole window is accepted; the guarded checks beside it are not.
  const Sheet sheet = sample_sheet();
  EXPECT_EQ(sheet.find("red_centroid")->acceptance, sheet.find("red_centroid")->limits);
  EXPECT_EQ(sheet.find("saturation_error_70")->acceptance.upper, 0.83815);
  // 0.30 - 1.6448536 * 0.025, z from JCGM 106:2012 Table 1
  expect_within(*sheet.find("secondary_emission")->acceptance.upper, 0.2588786593, 1e-9);
}

TEST(Judge, ANumberThatIsNoneIsNeverOk) {
  for (const double value : {not_a_number, infinite, -infinite}) {
    const Judgement j = judged("red_centroid", value, 0.3);
    EXPECT_EQ(j.outcome, Outcome::unusable);
    EXPECT_EQ(j.reason, "not_a_number");
    EXPECT_FALSE(j.margin);
    EXPECT_FALSE(j.conformance_probability);
    EXPECT_FALSE(j.lets_pass());
  }
}

TEST(Judge, AnUncertaintyAboveTheDeclaredOneIsNeverOk) {
  EXPECT_EQ(outcome("red_centroid", 660.0, 0.33), Outcome::ok);
  const Judgement j = judged("red_centroid", 660.0, next_up(0.33));
  EXPECT_EQ(j.outcome, Outcome::unusable);
  EXPECT_EQ(j.reason, "uncertainty_above_declared");
  EXPECT_FALSE(j.lets_pass());
}

TEST(Judge, OutsideALimitTheLimitIsToldHoweverUncertainTheReading) {
  const Judgement j = judged("dark_current", 500.0, 7.0);
  EXPECT_EQ(j.outcome, Outcome::not_ok);
  EXPECT_EQ(j.words, "dark current: 500.00 nA, above the limit of 5.00 nA");
  EXPECT_LT(*j.margin, 0.0);
}

TEST(Judge, AMissingUncertaintyIsNeverOk) {
  for (const double own : {0.0, -0.1, not_a_number, infinite}) {
    const Judgement j = judged("red_centroid", 660.0, own);
    EXPECT_EQ(j.outcome, Outcome::unusable) << own;
    EXPECT_EQ(j.reason, "no_uncertainty") << own;
  }
}

TEST(Judge, NoReadingKeepsItsReason) {
  const Judgement j = judged("red_centroid", std::nullopt, 0.0, "blocked_by:dark_current");
  EXPECT_EQ(j.outcome, Outcome::no_reading);
  EXPECT_EQ(j.reason, "blocked_by:dark_current");
  EXPECT_EQ(j.words, "red centroid wavelength: no reading, blocked by dark current");
  EXPECT_FALSE(j.lets_pass());
}

TEST(Judge, YesNo) {
  EXPECT_EQ(outcome("probe_present", 1.0, 0.0), Outcome::ok);
  EXPECT_EQ(outcome("probe_present", 0.0, 0.0), Outcome::not_ok);
  EXPECT_EQ(outcome("probe_present", 0.5, 0.0), Outcome::unusable);
  EXPECT_EQ(judged("probe_present", 1.0, 0.0).margin, 1.0);
  EXPECT_EQ(judged("probe_present", 0.0, 0.0).margin, -1.0);
  EXPECT_EQ(judged("probe_present", 0.0, 0.0).words, "probe present: no, and it must be yes");
}

TEST(Judge, WatchedAndRecordedChecksNeverCountInTheVerdict) {
  EXPECT_EQ(outcome("bin_mismatch", 1.4, 0.0), Outcome::watch_ok);
  EXPECT_EQ(outcome("bin_mismatch", -1.4, 0.0), Outcome::watch_ok);
  EXPECT_EQ(outcome("bin_mismatch", -1.41, 0.0), Outcome::watch_alert);
  EXPECT_EQ(outcome("red_half_power_centre", 1e9, 0.0), Outcome::recorded);
  EXPECT_EQ(outcome("red_half_power_centre", not_a_number, 0.0), Outcome::unusable);
  EXPECT_FALSE(judged("bin_mismatch", 9.0, 0.0).judged());
  EXPECT_FALSE(judged("bin_mismatch", 9.0, 0.0).margin);
}

TEST(Judge, ACheckThatTheSheetDoesNotNameIsOurOwnMistake) {
  EXPECT_THROW(judged("infrared_centroid", 940.0, 0.3), std::invalid_argument);
}

TEST(Judge, KeepsTheLimitsAsApplied) {
  const Judgement j = judged("saturation_error_70", 0.1, 0.19);
  EXPECT_EQ(j.limits, (Limits{-1.0, 1.0}));
  EXPECT_EQ(j.acceptance, (Limits{-0.83815, 0.83815}));
  EXPECT_EQ(j.declared_uncertainty, 0.195);
}

// Source: the design's definition of margin: 1 in the middle, 0 at an acceptance limit, negative outside;
// one-sided (limit - x) / (limit - typical).
TEST(Margin, TwoSided) {
  EXPECT_EQ(judged("red_centroid", 660.0, 0.3).margin, 1.0);
  EXPECT_EQ(judged("red_centroid", 665.0, 0.3).margin, 0.0);
  EXPECT_EQ(judged("red_centroid", 655.0, 0.3).margin, 0.0);
  expect_within(*judged("red_centroid", 662.5, 0.3).margin, 0.5, 1e-12);
  expect_within(*judged("red_centroid", 667.5, 0.3).margin, -0.5, 1e-12);
  EXPECT_LT(*judged("red_centroid", next_up(665.0), 0.3).margin, 0.0);
  EXPECT_EQ(judged("saturation_error_70", 0.83815, 0.19).margin, 0.0);  // of the acceptance limits, not the limits
  EXPECT_LT(*judged("saturation_error_70", 0.9, 0.19).margin, 0.0);
}

TEST(Margin, OneSided) {
  EXPECT_EQ(judged("dark_current", 0.8, 0.3).margin, 1.0);
  EXPECT_EQ(judged("dark_current", 5.0, 0.3).margin, 0.0);
  expect_within(*judged("dark_current", 2.9, 0.3).margin, 0.5, 1e-12);
  EXPECT_GT(*judged("dark_current", 0.1, 0.3).margin, 1.0);
  EXPECT_LT(*judged("dark_current", 6.0, 0.3).margin, 0.0);
}

TEST(Margin, SignAgreesWithTheOutcomeEverywhere) {
  const Sheet sheet = sample_sheet();
  for (const char* check : {"red_centroid", "red_drive", "dark_current", "saturation_error_70", "secondary_emission"}) {
    const CheckRule& rule = *sheet.find(check);
    for (const auto& limit : {rule.limits.lower, rule.limits.upper, rule.acceptance.lower, rule.acceptance.upper}) {
      if (!limit) continue;
      for (const double value : {next_down(*limit), *limit, next_up(*limit)}) {
        const Judgement j = judge(sheet, check, value, rule.expanded_uncertainty);
        EXPECT_EQ(j.outcome == Outcome::ok, *j.margin >= 0.0) << check << " at " << shortest(value);
      }
    }
  }
}

// Source: JCGM 106:2012 clause 7, upper limit -5.40 V, reading -5.47 V, u 0.05 V: 0.92. The same distances in nm.
TEST(Judge, ConformanceProbabilityIsOfTheLimits) {
  const double wanted =
      reference::load("jcgm106_examples.csv")
          .number_where("quantity", "7 one-sided: T_U -5.40 V; measured -5.47 V; u 0.05 V: z 1.40; p_c", "recomputed");
  expect_within(*judged("dark_current", 5.0 - 0.07, 0.1).conformance_probability, wanted, 1e-8);
  expect_within(*judged("red_centroid", 665.0, 0.3).conformance_probability, 0.5, 1e-12);
  expect_within(*judged("red_centroid", 660.0, 0.3).conformance_probability, 1.0, 1e-12);
  EXPECT_LT(*judged("red_centroid", 666.0, 0.3).conformance_probability, 1e-6);
}

TEST(Words, SayWhatBecameOfTheReading) {
  EXPECT_EQ(judged("red_centroid", 659.94, 0.3).words,
            "red centroid wavelength: 659.94 nm, inside 655.00 to 665.00 nm");
  EXPECT_EQ(judged("dark_current", 5.34, 0.3).words, "dark current: 5.34 nA, above the limit of 5.00 nA");
  EXPECT_EQ(judged("red_centroid", 650.0, 0.3).words,
            "red centroid wavelength: 650.00 nm, below the limit of 655.00 nm");
  EXPECT_EQ(judged("saturation_error_70", -0.9, 0.19).words,
            "modelled saturation error at 70 %: -0.90 points, inside the limit of -1.00 points, too close for our "
            "uncertainty "
            "(accepted from -0.84 points)");
  EXPECT_EQ(
      judged("red_centroid", 660.0, 0.4).words,
      "red centroid wavelength: not usable, the uncertainty of this reading is 0.40 nm, the sheet allows 0.33 nm");
  EXPECT_EQ(judged("bin_mismatch", -1.62, 0.0).words,
            "bin against centroid: -1.6 nm, further from 0 than the watched 1.4 nm");
  EXPECT_EQ(judged("red_half_power_centre", 660.79, 0.03).words, "red half-power centre: 660.790 nm");
  EXPECT_EQ(judged("secondary_emission", 0.02, 0.04).words,
            "secondary emission: 0.020 % of red power, 800-1000 nm, accepted up to 0.259 %");
}

TEST(Words, FiveNeverFailsAgainstFive) {
  for (const double value : {next_up(5.0), 5.0000001, 5.001, 5.04}) {
    const std::string words = judged("dark_current", value, 0.3).words;
    const auto number_after = [&](const char* mark) {
      const auto from = words.find(mark) + std::string{mark}.size();
      return words.substr(from, words.find(" nA", from) - from);
    };
    EXPECT_NE(number_after("current: "), number_after("limit of ")) << words;
    EXPECT_GT(*parse_double(number_after("current: ")), 5.0) << words;
  }
}

TEST(Words, TooCloseNeverLooksLikeTheAcceptanceLimit) {
  for (const double value : {next_up(0.83815), 0.8382, 0.839, 0.8419}) {
    const std::string words = judged("saturation_error_70", value, 0.19).words;
    const auto number_after = [&](const std::string& mark) {
      const auto from = words.find(mark) + mark.size();
      return parse_double(words.substr(from, words.find(" points", from) - from)).value();
    };
    EXPECT_GT(number_after("at 70 %: "), number_after("accepted up to ")) << words;
  }
}

class Overall : public ::testing::Test {
 protected:
  const Sheet sheet = sample_sheet();
  const std::vector<std::string> routine{"probe_present", "red_drive", "red_half_power_centre", "bin_mismatch"};
  std::vector<Judgement> good{judge(sheet, "probe_present", 1.0, 0.0), judge(sheet, "red_drive", 20.0, 0.05),
                              judge(sheet, "red_half_power_centre", 661.0, 0.3),
                              judge(sheet, "bin_mismatch", 9.0, 0.3)};
};

TEST_F(Overall, AllJudgedOkIsAPass) {
  const Verdict verdict = overall(good, judged_checks(sheet, routine));
  EXPECT_TRUE(verdict.pass);
  EXPECT_THAT(verdict.not_ok, IsEmpty());
  EXPECT_THAT(verdict.no_reading, IsEmpty());
}

TEST_F(Overall, NothingIsNotAPass) {
  EXPECT_FALSE(overall({}).pass);
  const std::vector<Judgement> recorded_only{good[2], good[3]};
  EXPECT_FALSE(overall(recorded_only).pass);
}

TEST_F(Overall, EachKindOfNotOkFails) {
  const std::vector<Judgement> bad{judge(sheet, "red_drive", 21.0, 0.05), judge(sheet, "red_drive", not_a_number, 0.05),
                                   judge(sheet, "red_drive", 20.0, 0.5), judge(sheet, "saturation_error_70", 0.9, 0.1)};
  for (const Judgement& one : bad) {
    std::vector<Judgement> run = good;
    run[1] = one;
    const Verdict verdict = overall(run);
    EXPECT_FALSE(verdict.pass) << one.words;
    EXPECT_THAT(verdict.not_ok, ElementsAre(one.check));
  }
}

TEST_F(Overall, AJudgedCheckWithoutReadingFails) {
  good[1] = judge(sheet, "red_drive", std::nullopt, 0.0, "blocked_by:probe_present");
  const Verdict verdict = overall(good);
  EXPECT_FALSE(verdict.pass);
  EXPECT_THAT(verdict.no_reading, ElementsAre("red_drive"));
}

TEST_F(Overall, AJudgedCheckThatNeverCameFails) {
  good.erase(good.begin() + 1);
  EXPECT_TRUE(overall(good).pass);  // nobody said that it was expected
  const Verdict verdict = overall(good, judged_checks(sheet, routine));
  EXPECT_FALSE(verdict.pass);
  EXPECT_THAT(verdict.no_reading, ElementsAre("red_drive"));
}

TEST_F(Overall, AWatchedCheckWithoutReadingDoesNotFail) {
  good[3] = judge(sheet, "bin_mismatch", std::nullopt, 0.0, "no_peak");
  EXPECT_TRUE(overall(good, judged_checks(sheet, routine)).pass);
}

}  // namespace
}  // namespace probewright::limits
