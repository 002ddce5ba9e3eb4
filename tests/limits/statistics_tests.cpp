#include <gtest/gtest.h>

#include <cmath>
#include <limits>
#include <numeric>

#include "limits/statistics/conformance.h"
#include "limits/statistics/global_risk.h"
#include "limits/statistics/line_fit.h"
#include "limits/statistics/normal.h"
#include "limits/statistics/student.h"
#include "tests/support/expect.h"
#include "tests/support/reference.h"

namespace probewright::limits::statistics {
namespace {

double jcgm106(const char* quantity) {
  return reference::load("jcgm106_examples.csv").number_where("quantity", quantity, "recomputed");
}

// Source: JCGM 106:2012 Table 1 (z for a wanted conformance probability).
TEST(Normal, QuantilesAgreeWithJcgm106Table1) {
  for (const auto& [p, row] : std::initializer_list<std::pair<double, const char*>>{{0.80, "Table 1 z for p_c 0.80"},
                                                                                    {0.90, "Table 1 z for p_c 0.90"},
                                                                                    {0.95, "Table 1 z for p_c 0.95"},
                                                                                    {0.99, "Table 1 z for p_c 0.99"},
                                                                                    {0.999, "Table 1 z for p_c 0.999"}})
    expect_relative(normal_quantile(p), jcgm106(row), 1e-8);
}

TEST(Normal, QuantileUndoesTheProbability) {
  for (double z = -8.0; z <= 5.0; z += 0.25) expect_within(normal_quantile(normal_below(z)), z, 1e-9);
  EXPECT_THROW(normal_quantile(0.0), std::domain_error);
  EXPECT_THROW(normal_quantile(1.0), std::domain_error);
  EXPECT_THROW(normal_quantile(std::nan("")), std::domain_error);
}

// Source: Abramowitz and Stegun, table 26.1 and 26.2 (from memory): Z(1) = 0.2419707245, Q(5) = 2.866516e-7.
TEST(Normal, KeepsItsDigitsInTheTail) {
  expect_relative(normal_density(1.0), 0.24197072451914337, 1e-12);
  expect_relative(normal_above(5.0), 2.866515718e-7, 1e-9);
  expect_relative(normal_above(10.0), 7.619853024e-24, 1e-9);
}

// Source: JCGM 100:2008 (GUM), Table G.2, recomputed to 8 digits.
TEST(Student, CoverageFactorsAgreeWithGumTableG2) {
  const auto table = reference::load("student_t_coverage_factors.csv");
  const auto freedom = table.texts("nu");
  int tried = 0;
  for (const auto& [column, coverage] : std::initializer_list<std::pair<const char*, double>>{
           {"p68.27", 0.6827}, {"p90", 0.90}, {"p95", 0.95}, {"p95.45", 0.9545}, {"p99", 0.99}, {"p99.73", 0.9973}}) {
    const auto wanted = table.numbers(column);
    for (std::size_t i = 0; i < wanted.size(); ++i, ++tried) {
      const bool infinite = freedom[i].find("inf") != std::string::npos;
      const double nu = infinite ? std::numeric_limits<double>::infinity() : reference::number_in(freedom[i]);
      expect_relative(coverage_factor(coverage, nu), wanted[i], 1e-7);  // the table has 8 digits
    }
  }
  EXPECT_EQ(tried, 6 * 28);
}

TEST(Student, RefusesWhatIsNoProbability) {
  EXPECT_THROW(student_quantile(0.0, 5.0), std::domain_error);
  EXPECT_THROW(student_quantile(0.9, 0.0), std::domain_error);
  EXPECT_THROW(student_quantile(0.9, std::nan("")), std::domain_error);
}

// Source: NIST Statistical Reference Datasets, linear least squares, "Norris"; certified values, 15 digits.
TEST(LineFit, AgreesWithNistNorrisTo1e9) {
  const auto table = reference::load("nist_strd/Norris.csv");
  ASSERT_EQ(table.numbers("x").size(), 36u);
  const LineFit fit = fit_line(table.numbers("x"), table.numbers("y")).value();
  expect_relative(fit.intercept, -0.262323073774029, 1e-9);
  expect_relative(fit.slope, 1.00211681802045, 1e-9);
  expect_relative(fit.intercept_error, 0.232818234301152, 1e-9);
  expect_relative(fit.slope_error, 0.429796848199937e-3, 1e-9);
  expect_relative(fit.residual_sd, 0.884796396144373, 1e-9);
  expect_relative(fit.r_squared, 0.999993745883712, 1e-9);
  EXPECT_EQ(fit.degrees_of_freedom, 34.0);
}

TEST(LineFit, LargeOffsetsCostNoDigits) {
  const std::vector<double> x{1e9 + 1, 1e9 + 2, 1e9 + 3, 1e9 + 4}, y{5.0, 7.0, 9.0, 11.0};
  const LineFit fit = fit_line(x, y).value();
  EXPECT_EQ(fit.slope, 2.0);
  EXPECT_EQ(fit.residual_sd, 0.0);
  EXPECT_EQ(fit.r_squared, 1.0);
}

TEST(LineFit, RefusesWhatIsNoLine) {
  const std::vector<double> x{1.0, 2.0, 3.0}, short_y{1.0, 2.0}, bad{1.0, std::nan(""), 3.0}, same{2.0, 2.0, 2.0};
  EXPECT_EQ(fit_line(x, short_y).error().id, "line_fit_sizes");
  EXPECT_EQ(fit_line(short_y, short_y).error().id, "line_fit_sizes");
  EXPECT_EQ(fit_line(x, bad).error().id, "line_fit_not_finite");
  EXPECT_EQ(fit_line(same, x).error().id, "line_fit_no_spread");
}

// Source: JCGM 106:2012 clause 7: Zener diode (0.92) and motor oil (0.66).
TEST(Conformance, AgreesWithTheExamplesOfJcgm106) {
  const auto table = reference::load("jcgm106_examples.csv");
  const char* one_sided = "7 one-sided: T_U -5.40 V; measured -5.47 V; u 0.05 V: z 1.40; p_c";
  const char* two_sided = "7 two-sided: T_L 12.5; T_U 16.3; measured 13.6; u 1.8 mm2/s: p_c";
  const double zener = conformance_probability(-5.47, 0.05, {std::nullopt, -5.40});
  const double oil = conformance_probability(13.6, 1.8, {12.5, 16.3});
  expect_relative(zener, jcgm106(one_sided), 1e-8);
  expect_relative(oil, jcgm106(two_sided), 1e-8);
  expect_within(zener, table.number_where("quantity", one_sided, "published"), 0.005);
  expect_within(oil, table.number_where("quantity", two_sided, "published"), 0.005);
}

TEST(Conformance, WithoutUncertaintyItIsYesOrNo) {
  EXPECT_EQ(conformance_probability(5.0, 0.0, {std::nullopt, 5.0}), 1.0);
  EXPECT_EQ(conformance_probability(5.1, 0.0, {std::nullopt, 5.0}), 0.0);
}

/// Gamma process of JCGM 106 9.5.4: mean 1, sd 0.5, hence shape 4 and scale 0.25.
Process ball_bearings() {
  return {
      [](double x) { return x <= 0.0 ? 0.0 : std::pow(x, 3.0) * std::exp(-x / 0.25) / (6.0 * std::pow(0.25, 4.0)); },
      0.0, 15.0};
}

// Source: JCGM 106:2012 9.5.4, roundness of ball bearings; figures seen in one public copy.
TEST(GlobalRisk, AgreesWithTheBallBearingsOfJcgm106) {
  const Limits tolerance{std::nullopt, 2.0};
  const Risks simple = global_risks(ball_bearings(), 0.25, tolerance, tolerance).value();
  expect_relative(simple.nonconforming, jcgm106("9.5.4 nonconforming before inspection"), 1e-7);
  expect_relative(simple.consumer, jcgm106("9.5.4 global consumer risk with A_U = 2 (simple acceptance)"), 1e-7);
  expect_relative(simple.producer, jcgm106("9.5.4 global producer risk with A_U = 2"), 1e-7);

  const double band = guard_band_for_consumer_risk(ball_bearings(), 0.25, tolerance, 0.001).value();
  expect_relative(2.0 - band, jcgm106("9.5.4 A_U for consumer risk 0.001 (um)"), 1e-7);
  const Risks guarded = global_risks(ball_bearings(), 0.25, tolerance, {std::nullopt, 2.0 - band}).value();
  expect_relative(guarded.producer, jcgm106("9.5.4 producer risk at that A_U"), 1e-7);
}

struct NormalCase {
  const char* row;  ///< of the table, without "global consumer risk: "
  double tolerance, process_sd, error_sd, guard;
};

// Source: computed independently by numerical integration for the reference table (no printed counterpart, except
// "about 0.008 and 0.015 for a 4:1 ratio", which is widely quoted).
TEST(GlobalRisk, AgreesWithIndependentIntegrationForNormalProcesses) {
  const double sd_95 = 1.0 / 1.959963984540054;  // +-1 holds 95 % of the process
  for (const NormalCase& c : {NormalCase{"2 sigma process; u_m = T/8 (4:1 ratio with U = 2u)", 1.0, 0.5, 0.125, 0.0},
                              {"95 % in-tolerance process; u_m = T/8 (4:1 ratio)", 1.0, sd_95, 0.125, 0.0},
                              {"3 sigma process; u_m = T/20", 1.0, 1.0 / 3.0, 0.05, 0.0},
                              {"3 sigma process; u_m = T/20; guard band 2 u_m", 1.0, 1.0 / 3.0, 0.05, 0.1},
                              {"2 sigma process; u_m = T/10; guard band 2 u_m", 1.0, 0.5, 0.1, 0.2},
                              {"T 0.2; s0 0.12; u_m 0.04; no guard band", 0.2, 0.12, 0.04, 0.0},
                              {"T 0.2; s0 0.12; u_m 0.04; guard band 2 u_m", 0.2, 0.12, 0.04, 0.08}}) {
    SCOPED_TRACE(c.row);
    const double accept = c.tolerance - c.guard;
    const Risks risks =
        global_risks(normal_process(0.0, c.process_sd), c.error_sd, {-c.tolerance, c.tolerance}, {-accept, accept})
            .value();
    expect_relative(risks.consumer, jcgm106((std::string{"global consumer risk: "} + c.row).c_str()), 1e-7);
    expect_relative(risks.producer, jcgm106((std::string{"global producer risk: "} + c.row).c_str()), 1e-7);
    expect_within(risks.accepted, 1.0 - risks.nonconforming - risks.producer + risks.consumer, 1e-12);
  }
}

TEST(GlobalRisk, AGuardBandMeetsTheWantedRiskAndNoMore) {
  const Process process = normal_process(0.1, 0.5);
  const Limits tolerance{-1.0, 1.0};
  const double band = guard_band_for_consumer_risk(process, 0.1, tolerance, 0.001).value();
  const Risks risks = global_risks(process, 0.1, tolerance, {-1.0 + band, 1.0 - band}).value();
  expect_relative(risks.consumer, 0.001, 1e-7);
  EXPECT_EQ(guard_band_for_consumer_risk(process, 0.1, tolerance, 0.5).value(), 0.0);  // met without a band
}

TEST(GlobalRisk, RefusesWhatIsNoRisk) {
  const Process process = normal_process(0.0, 1.0);
  EXPECT_EQ(global_risks(process, 0.0, {-1.0, 1.0}, {-1.0, 1.0}).error().id, "risk_input");
  EXPECT_EQ(global_risks(process, 0.1, {}, {-1.0, 1.0}).error().id, "risk_input");
  EXPECT_EQ(global_risks(process, 0.1, {-1.0, 1.0}, {}).error().id, "risk_input");
  EXPECT_EQ(global_risks(process, 0.1, {1.0, -1.0}, {-1.0, 1.0}).error().id, "risk_input");
  EXPECT_EQ(global_risks(normal_process(0.0, std::nan("")), 0.1, {-1.0, 1.0}, {-1.0, 1.0}).error().id, "risk_input");
  EXPECT_EQ(guard_band_for_consumer_risk(process, 0.1, {-1.0, 1.0}, 0.0).error().id, "risk_input");
}

TEST(GlobalRisk, AtWorstTheBandLeavesNoWindow) {
  // A process that makes bad items only, just outside one limit, measured badly.
  const Process process = normal_process(1.2, 0.01);
  const double band = guard_band_for_consumer_risk(process, 1.0, {-1.0, 1.0}, 1e-9).value();
  expect_within(band, 1.0, 1e-8);
  EXPECT_LE(global_risks(process, 1.0, {-1.0, 1.0}, {-1.0 + band, 1.0 - band}).value().consumer, 1e-9);
}

TEST(GlobalRisk, OneSided) {
  const Process process = normal_process(0.0, 0.5);
  const double band = guard_band_for_consumer_risk(process, 0.1, {-1.0, std::nullopt}, 1e-4).value();
  const Risks risks = global_risks(process, 0.1, {-1.0, std::nullopt}, {-1.0 + band, std::nullopt}).value();
  expect_relative(risks.consumer, 1e-4, 1e-7);
  const Risks mirrored = global_risks(process, 0.1, {std::nullopt, 1.0}, {std::nullopt, 1.0 - band}).value();
  expect_relative(mirrored.consumer, risks.consumer, 1e-9);
}

}  // namespace
}  // namespace probewright::limits::statistics
