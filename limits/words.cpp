#include "limits/words.h"

#include <algorithm>
#include <cmath>

#include "station/base/numbers.h"

namespace probewright::limits {
namespace {

constexpr int most_decimals = 12;

std::string joined(const std::string& number, const std::string& unit) {
  return unit.empty() ? number : number + " " + unit;
}

}  // namespace

std::string unit_words(const Check& check) {
  if (check.unit == "1" || check.unit == "yes/no") return {};
  if (check.unit == "%SpO2") return "points";
  if (check.of.empty()) return std::string{check.unit};
  return std::string{check.unit} + " of " + std::string{check.of};
}

std::string short_unit(const Check& check) { return check.of.empty() ? unit_words(check) : std::string{check.unit}; }

std::string with_unit(double value, int decimals, const Check& check) {
  return joined(fixed(value, decimals), unit_words(check));
}

std::string with_short_unit(double value, int decimals, const Check& check) {
  return joined(fixed(value, decimals), short_unit(check));
}

std::string window_words(const Limits& limits, int decimals, const Check& check) {
  if (limits.two_sided())
    return "inside " + fixed(*limits.lower, decimals) + " to " + with_short_unit(*limits.upper, decimals, check);
  if (limits.upper) return "accepted up to " + with_short_unit(*limits.upper, decimals, check);
  return "accepted from " + with_short_unit(limits.lower.value_or(0.0), decimals, check) + " up";
}

int decimals_for(double uncertainty, double value) {
  const bool from_uncertainty = uncertainty > 0.0 && std::isfinite(uncertainty);
  const double size = from_uncertainty ? uncertainty : std::abs(value);
  if (!(size > 0.0) || !std::isfinite(size)) return 1;
  const int significant = from_uncertainty ? 2 : 4;
  const int leading = static_cast<int>(std::floor(std::log10(size)));
  return std::clamp(significant - 1 - leading, 0, most_decimals);
}

int decimals_of(double value) {
  for (int decimals = 0; decimals < most_decimals; ++decimals)
    if (parse_double(fixed(value, decimals)) == value) return decimals;
  return most_decimals;
}

int decimals_apart(double value, double limit, int at_least) {
  constexpr int enough_for_any_double = 350;
  int decimals = at_least;
  if (value == limit || !std::isfinite(value) || !std::isfinite(limit)) return decimals;
  while (decimals < enough_for_any_double && fixed(value, decimals) == fixed(limit, decimals)) ++decimals;
  return decimals;
}

std::string reason_words(std::string_view reason) {
  std::string words{reason};
  constexpr std::string_view blocked = "blocked_by:";
  if (reason.starts_with(blocked)) {
    const std::string_view by = reason.substr(blocked.size());
    const Check* check = find_check(by);
    return "blocked by " + std::string{check ? check->shown_as : by};
  }
  std::replace(words.begin(), words.end(), '_', ' ');
  return words;
}

}  // namespace probewright::limits
