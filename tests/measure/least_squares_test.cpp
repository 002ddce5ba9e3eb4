#include "station/measure/least_squares.h"

#include <gtest/gtest.h>

#include <cmath>
#include <limits>

#include "tests/support/expect.h"
#include "tests/support/reference.h"

using namespace probewright;
using namespace probewright::measure;

// Source: NIST Statistical Reference Datasets, linear least squares, "Norris" (certified values).
TEST(LinearFit, AgreesWithNistNorris) {
  const auto table = reference::load("nist_strd/Norris.csv");
  const auto x = table.numbers("x"), y = table.numbers("y");
  ASSERT_EQ(x.size(), 36u);
  std::vector<double> design;
  for (const double v : x) design.push_back(1.0), design.push_back(v);
  const LinearFit fit = fit_linear(design, 2, y).value();
  expect_relative(fit.coefficients[0], -0.262323073774029, 1e-10);
  expect_relative(fit.coefficients[1], 1.00211681802045, 1e-12);
  expect_relative(std::sqrt(fit.variance(0)), 0.232818234301152, 1e-9);
  expect_relative(std::sqrt(fit.variance(1)), 0.429796848199937e-3, 1e-9);
  expect_relative(fit.noise_sd, 0.884796396144373, 1e-10);
}

// Source: the same collection, "Pontius" (quadratic; columns of very different size).
TEST(LinearFit, AgreesWithNistPontius) {
  const auto table = reference::load("nist_strd/Pontius.csv");
  const auto x = table.numbers("x"), y = table.numbers("y");
  std::vector<double> design;
  for (const double v : x) design.insert(design.end(), {1.0, v, v * v});
  const LinearFit fit = fit_linear(design, 3, y).value();
  expect_relative(fit.coefficients[0], reference::number_in(table.notes.at("certified_B0")), 1e-7);
  expect_relative(fit.coefficients[1], reference::number_in(table.notes.at("certified_B1")), 1e-9);
  expect_relative(fit.coefficients[2], reference::number_in(table.notes.at("certified_B2")), 1e-7);
}

// Weights 0 and 1 are the fit without the values of weight 0, covariance included.
TEST(LinearFit, WeightZeroLeavesAValueOut) {
  const std::vector<double> x{0, 1, 2, 3, 4, 5}, y{1, 3.1, 4.9, 99, 9.2, 10.8}, w{1, 1, 1, 0, 1, 1};
  std::vector<double> all, some, y_some;
  for (std::size_t i = 0; i < x.size(); ++i) {
    all.insert(all.end(), {1.0, x[i]});
    if (w[i] > 0.0) some.insert(some.end(), {1.0, x[i]}), y_some.push_back(y[i]);
  }
  const LinearFit weighted = fit_linear(all, 2, y, w).value(), plain = fit_linear(some, 2, y_some).value();
  for (std::size_t i = 0; i < 2; ++i) {
    expect_relative(weighted.coefficients[i], plain.coefficients[i], 1e-12);
    expect_relative(weighted.variance(i), plain.variance(i), 1e-10);
  }
  expect_relative(weighted.noise_sd, plain.noise_sd, 1e-10);
}

TEST(LinearFit, ImpossibleFitsAreRefused) {
  const std::vector<double> alike{1, 2, 1, 2, 1, 2}, y{1, 2, 3}, good{1, 0, 1, 1, 1, 2};
  const auto id = [](const Result<LinearFit>& fit) { return fit ? std::string{"fitted"} : fit.error().id; };
  EXPECT_EQ(id(fit_linear(good, 2, y)), "fitted");
  EXPECT_EQ(id(fit_linear(alike, 2, y)), "fit_impossible");
  EXPECT_EQ(id(fit_linear(good, 3, y)), "fit_impossible");
  EXPECT_EQ(id(fit_linear(good, 2, std::vector<double>{1, 2})), "fit_impossible");
  EXPECT_EQ(id(fit_linear(good, 2, y, std::vector<double>{1, 2, -1})), "fit_impossible");
  EXPECT_EQ(id(fit_linear(good, 2, std::vector<double>{1, std::numeric_limits<double>::infinity(), 1})),
            "fit_impossible");
  EXPECT_EQ(id(fit_linear({}, 1, {})), "fit_impossible");
}
