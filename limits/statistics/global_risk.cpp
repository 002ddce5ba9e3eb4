#include "limits/statistics/global_risk.h"

#include <algorithm>
#include <boost/math/quadrature/gauss.hpp>
#include <cmath>
#include <optional>
#include <vector>

#include "limits/statistics/normal.h"
#include "station/base/numbers.h"

namespace probewright::limits::statistics {
namespace {

using Function = std::function<double(double)>;

// Where the integral is cut: acceptance falls from 1 to 0 within a few error_sd of an acceptance limit, the step at a
// tolerance limit must not lie inside a piece, and a piece of 1/32 of the process is smooth. Twenty Gauss points on
// such pieces leave nothing to adapt, and always cost the same.
std::vector<double> cuts(const Process& process, double error_sd, const Limits& tolerance, const Limits& acceptance) {
  constexpr int parts = 32, reach = 9;
  std::vector<double> at;
  for (int i = 0; i <= parts; ++i) at.push_back(std::lerp(process.from, process.to, double{1} * i / parts));
  for (const auto& limit : {tolerance.lower, tolerance.upper})
    if (limit) at.push_back(*limit);
  for (const auto& limit : {acceptance.lower, acceptance.upper})
    for (int by = -reach; limit && by <= reach; ++by) at.push_back(*limit + by * error_sd);
  std::erase_if(at, [&](double x) { return x < process.from || x > process.to; });
  std::sort(at.begin(), at.end());
  at.erase(std::unique(at.begin(), at.end()), at.end());
  return at;
}

double integral(const Function& function, double from, double to) {
  return boost::math::quadrature::gauss<double, 20>::integrate(function, from, to);
}

double chance_of_acceptance(double true_value, double error_sd, const Limits& acceptance) {
  if (acceptance.two_sided() && *acceptance.lower >= *acceptance.upper) return 0.0;
  const double below = acceptance.lower ? normal_below((*acceptance.lower - true_value) / error_sd) : 0.0;
  const double above = acceptance.upper ? normal_above((*acceptance.upper - true_value) / error_sd) : 0.0;
  if (below + above < 0.5) return 1.0 - below - above;
  // Far outside both terms hide the small rest: take the difference of the tails on the nearer side.
  if (!acceptance.two_sided())
    return acceptance.lower ? normal_above((*acceptance.lower - true_value) / error_sd)
                            : normal_below((*acceptance.upper - true_value) / error_sd);
  const double to_lower = (*acceptance.lower - true_value) / error_sd;
  const double to_upper = (*acceptance.upper - true_value) / error_sd;
  return to_lower > 0.0 ? normal_above(to_lower) - normal_above(to_upper)
                        : normal_below(to_upper) - normal_below(to_lower);
}

Problem wrong(std::string what) { return Problem{"risk_input", "", {{"what", std::move(what)}}}; }

std::optional<Problem> not_limits(const Limits& limits, std::string_view name) {
  const std::string who{name};
  if (!limits.any()) return wrong(who + " has neither a lower nor an upper limit");
  for (const auto& limit : {limits.lower, limits.upper})
    if (limit && !std::isfinite(*limit)) return wrong(who + " has a limit that is not a number");
  return {};
}

std::optional<Problem> not_a_risk(const Process& process, double error_sd, const Limits& tolerance) {
  if (!process.density || !(process.from < process.to) || !std::isfinite(process.to - process.from))
    return wrong("the process has no spread");
  if (!(error_sd > 0.0) || !std::isfinite(error_sd))
    return wrong("the standard uncertainty is " + shortest(error_sd) + ", it must be above 0");
  if (auto problem = not_limits(tolerance, "the tolerance")) return problem;
  if (tolerance.two_sided() && *tolerance.lower >= *tolerance.upper)
    return wrong("the lower limit is not below the upper one");
  return {};
}

Risks integrate_risks(const Process& process, double error_sd, const Limits& tolerance, const Limits& acceptance) {
  Risks risks;
  const auto at = cuts(process, error_sd, tolerance, acceptance);
  for (std::size_t i = 1; i < at.size(); ++i) {
    const double from = at[i - 1], to = at[i];
    const double all = integral(process.density, from, to);
    const double accepted = integral(
        [&](double x) { return process.density(x) * chance_of_acceptance(x, error_sd, acceptance); }, from, to);
    const double rejected = integral(
        [&](double x) { return process.density(x) * (1.0 - chance_of_acceptance(x, error_sd, acceptance)); }, from, to);
    risks.accepted += accepted;
    const bool conforms = tolerance.contain(0.5 * (from + to));  // pieces end at the limits, so all of it or none
    if (conforms)
      risks.producer += rejected;
    else
      risks.nonconforming += all, risks.consumer += accepted;
  }
  return risks;
}

Limits moved_inwards(const Limits& limits, double by) {
  Limits moved = limits;
  if (moved.lower) *moved.lower += by;
  if (moved.upper) *moved.upper -= by;
  return moved;
}

// A guard band with which nothing of the process is accepted, so that any wanted risk is met.
double widest_band(const Process& process, double error_sd, const Limits& tolerance) {
  if (tolerance.two_sided()) return 0.5 * (*tolerance.upper - *tolerance.lower);
  const double far = tolerance.upper ? *tolerance.upper - process.from : process.to - *tolerance.lower;
  return std::max(0.0, far) + 40.0 * error_sd;
}

}  // namespace

Process normal_process(double mean, double sd) {
  return {[mean, sd](double x) { return normal_density((x - mean) / sd) / sd; }, mean - 12.0 * sd, mean + 12.0 * sd};
}

Result<Risks> global_risks(const Process& process, double error_sd, const Limits& tolerance, const Limits& acceptance) {
  if (auto problem = not_a_risk(process, error_sd, tolerance)) return *std::move(problem);
  if (auto problem = not_limits(acceptance, "the acceptance")) return *std::move(problem);
  return integrate_risks(process, error_sd, tolerance, acceptance);
}

Result<double> guard_band_for_consumer_risk(const Process& process, double error_sd, const Limits& tolerance,
                                            double wanted) {
  if (auto problem = not_a_risk(process, error_sd, tolerance)) return *std::move(problem);
  if (!(wanted > 0.0 && wanted < 1.0)) return wrong("the wanted risk must lie between 0 and 1");
  const auto risk_with = [&](double band) {
    return integrate_risks(process, error_sd, tolerance, moved_inwards(tolerance, band)).consumer;
  };
  double narrow = 0.0, wide = widest_band(process, error_sd, tolerance);
  if (risk_with(narrow) <= wanted) return 0.0;
  while (wide - narrow > 1e-10 * error_sd) {  // the risk falls steadily as the band widens
    const double middle = 0.5 * (narrow + wide);
    if (middle == narrow || middle == wide) break;
    (risk_with(middle) <= wanted ? wide : narrow) = middle;
  }
  return wide;
}

}  // namespace probewright::limits::statistics
