#include "station/sequence/tries_rule.h"

#include <algorithm>
#include <cmath>

namespace probewright::sequence {
namespace {

constexpr const char* tries_place = "scan";
constexpr int voids_without_engineer = 2;

std::ptrdiff_t with_verdict(std::span<const db::Try> runs, std::string_view verdict) {
  return std::count_if(runs.begin(), runs.end(), [&](const db::Try& run) { return run.verdict == verdict; });
}

/// Seconds that are left of the rest after the newest run.
double rest_left_s(const db::Try& last, const limits::Retest& retest, const TryAsked& asked) {
  const double passed_s = static_cast<double>(asked.now.microseconds - last.closed_at->microseconds) * 1e-6;
  return retest.after_s / asked.speed - passed_s;
}

}  // namespace

std::optional<Problem> not_another_try(std::span<const db::Try> runs, const limits::Retest& retest,
                                       const TryAsked& asked) {
  if (runs.empty()) return std::nullopt;
  const db::Try& last = runs.back();
  if (with_verdict(runs, "pass") > 0)
    return Problem{"serial_passed", tries_place, {{"serial", asked.serial}, {"run", std::to_string(last.run.value)}}};
  if (!last.closed_at) return Problem{"serial_in_nest", tries_place, {{"serial", asked.serial}}};
  const auto voids = with_verdict(runs, "void");
  // Voids beyond the tries need an engineer, who may look for the device's fault with them; fails never come back so.
  if (voids >= voids_without_engineer && !asked.by_engineer)
    return Problem{"serial_voided_twice", tries_place, {{"serial", asked.serial}}};
  const auto used = static_cast<int>(runs.size()) - (asked.by_engineer ? static_cast<int>(voids) : 0);
  if (used > retest.tries)
    return Problem{
        "serial_tries_used", tries_place, {{"serial", asked.serial}, {"tries", std::to_string(retest.tries + 1)}}};
  if (const double left_s = rest_left_s(last, retest, asked); left_s > 0.0)
    return Problem{"serial_rests",
                   tries_place,
                   {{"serial", asked.serial}, {"seconds", std::to_string(static_cast<int>(std::ceil(left_s)))}}};
  return std::nullopt;
}

}  // namespace probewright::sequence
