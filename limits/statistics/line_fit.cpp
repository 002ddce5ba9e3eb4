#include "limits/statistics/line_fit.h"

#include <algorithm>
#include <cmath>
#include <optional>

#include "station/base/numbers.h"

namespace probewright::limits::statistics {
namespace {

struct Centred {
  double mean_x = 0.0, mean_y = 0.0;
  double xx = 0.0, xy = 0.0, yy = 0.0;  ///< sums of products of the distances from the means
};

bool all_finite(std::span<const double> values) {
  return std::all_of(values.begin(), values.end(), [](double v) { return std::isfinite(v); });
}

std::optional<Problem> not_a_line(std::span<const double> x, std::span<const double> y) {
  if (x.size() != y.size() || x.size() < 3)
    return Problem{"line_fit_sizes", "", {{"x", std::to_string(x.size())}, {"y", std::to_string(y.size())}}};
  if (!all_finite(x) || !all_finite(y)) return Problem{"line_fit_not_finite", ""};
  if (std::all_of(x.begin(), x.end(), [&](double v) { return v == x.front(); }))
    return Problem{"line_fit_no_spread", "", {{"x", shortest(x.front())}}};
  return {};
}

double mean(std::span<const double> values) {
  double sum = 0.0;
  for (const double v : values) sum += v;
  const double first = sum / static_cast<double>(values.size());
  double rest = 0.0;  // a second pass takes out what the first sum lost
  for (const double v : values) rest += v - first;
  return first + rest / static_cast<double>(values.size());
}

Centred centre(std::span<const double> x, std::span<const double> y) {
  Centred c{.mean_x = mean(x), .mean_y = mean(y)};
  for (std::size_t i = 0; i < x.size(); ++i) {
    const double dx = x[i] - c.mean_x, dy = y[i] - c.mean_y;
    c.xx += dx * dx;
    c.xy += dx * dy;
    c.yy += dy * dy;
  }
  return c;
}

double squares_left(std::span<const double> x, std::span<const double> y, const Centred& c, double slope) {
  double left = 0.0;
  for (std::size_t i = 0; i < x.size(); ++i) {
    const double residual = (y[i] - c.mean_y) - slope * (x[i] - c.mean_x);
    left += residual * residual;
  }
  return left;
}

}  // namespace

Result<LineFit> fit_line(std::span<const double> x, std::span<const double> y) {
  if (auto problem = not_a_line(x, y)) return *std::move(problem);
  const Centred c = centre(x, y);
  const double n = static_cast<double>(x.size());
  LineFit fit;
  fit.slope = c.xy / c.xx;
  fit.intercept = c.mean_y - fit.slope * c.mean_x;
  fit.degrees_of_freedom = n - 2.0;
  const double left = squares_left(x, y, c, fit.slope);
  fit.residual_sd = std::sqrt(left / fit.degrees_of_freedom);
  fit.slope_error = fit.residual_sd / std::sqrt(c.xx);
  fit.intercept_error = fit.residual_sd * std::sqrt(1.0 / n + c.mean_x * c.mean_x / c.xx);
  fit.r_squared = c.yy > 0.0 ? 1.0 - left / c.yy : 1.0;
  return fit;
}

}  // namespace probewright::limits::statistics
