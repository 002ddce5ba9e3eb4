#include "limits/diagnosis/likelihood.h"

#include <algorithm>
#include <array>
#include <cmath>
#include <numbers>

#include "limits/statistics/normal.h"

namespace probewright::limits::diagnosis {
namespace {

using Form = Expected::Form;

constexpr double pi = std::numbers::pi;
/// Half width of `anywhere`, in tolerances: what fails usually fails by a few.
constexpr double anywhere_scale = 3.0;
/// How often a reading is missing where the cause says so, and where anything may be.
constexpr double missing_expected = 0.9, missing_possible = 0.3;
/// Where a check may move, most probes show nothing of it.
constexpr double moved_by_chance = 0.2;
/// Of a severity: neighbours lie closer than figures are known.
constexpr int steps = 41;

double anywhere(double value) {
  const double t = value / anywhere_scale;
  return 1.0 / (pi * anywhere_scale * (1.0 + t * t));
}

double normal(double value, double mean, double variance) {
  const double sd = std::sqrt(variance);
  return statistics::normal_density((value - mean) / sd) / sd;
}

/// Density of what lies beyond a bound, however far: bound / x^2 from there on, its edge as sharp as the spread.
double beyond(double value, double bound, double variance) {
  const double x = bound > 0.0 ? value : -value, from = std::abs(bound);
  const double inside = statistics::normal_below((x - from) / std::sqrt(variance));
  const double at = std::max(x, from);
  return inside * from / (at * at);
}

/// The reading, as far as it matters how far off it is: beyond, numbers would only overflow.
double value_of(const Datum& datum) {
  constexpr double far = 1e6;
  return std::clamp(*datum.seen->value, -far, far);
}

double own_variance(const Datum& datum) {
  const double spread = datum.used->spread, u = datum.seen->standard_u;
  return spread * spread + u * u;
}

/// Density of a reading under what is expected of it, strays aside.
double expected_density(const Datum& datum, const Outlook& outlook) {
  const double value = value_of(datum), own = own_variance(datum);
  const double about = normal(value, datum.used->usual + outlook.shift, own + outlook.variance);
  if (outlook.anywhere) return (1.0 - moved_by_chance) * about + moved_by_chance * anywhere(value);
  if (outlook.beyond.empty()) return about;
  const auto alternatives = static_cast<double>(outlook.beyond.size() + (outlook.by ? 1 : 0));
  double sum = outlook.by ? about : 0.0;
  for (const Expected& one : outlook.beyond)
    if (one.form != Form::no_reading) sum += beyond(value, one.figure, own);
  return sum / alternatives;
}

/// Probability that there is no reading, for this reason.
double missing_probability(const Datum& datum, const Outlook& outlook, double stray) {
  const auto told = [&](const Expected& one) {
    return one.form == Form::no_reading && (one.reason.empty() || one.reason == datum.seen->no_reading);
  };
  if (std::any_of(outlook.beyond.begin(), outlook.beyond.end(), told)) return missing_expected;
  return outlook.anywhere ? missing_possible : stray * missing_possible;
}

/// From the least to the most, evenly on a logarithmic scale; both signs where the pattern may turn.
std::vector<double> severities_of(const Cause& cause) {
  std::vector<double> all;
  const int count = cause.most > cause.least ? steps : 1;
  for (int step = 0; step < count; ++step) {
    const double part = static_cast<double>(step) / (steps - 1);
    all.push_back(cause.least * std::pow(cause.most / cause.least, part));
    if (cause.either_way) all.push_back(-all.back());
  }
  return all;
}

bool contains(const std::vector<std::string>& checks, std::string_view check) {
  return std::find(checks.begin(), checks.end(), check) != checks.end();
}

const Move* move_of(const Cause& cause, std::string_view check) {
  const auto found =
      std::find_if(cause.moves.begin(), cause.moves.end(), [check](const Move& m) { return m.check == check; });
  return found == cause.moves.end() ? nullptr : &*found;
}

void add(const Move& move, double severity, Outlook& outlook) {
  for (const Expected& one : move.expected) {
    if (one.form != Form::by) {
      outlook.beyond.push_back(one);
      continue;
    }
    const double by = severity * one.figure;
    outlook.shift += by;
    outlook.variance += one.within * by * one.within * by;
    outlook.by = true;
  }
}

/// Sum of exponentials in logarithms, without overflow.
double log_mean_exp(std::span<const double> logs) {
  const double most = *std::max_element(logs.begin(), logs.end());
  double sum = 0.0;
  for (const double one : logs) sum += std::exp(one - most);
  return most + std::log(sum / static_cast<double>(logs.size()));
}

}  // namespace

bool says_nothing(const Deviation& seen) {
  constexpr std::array consequences =
      std::to_array<std::string_view>({"not_captured", "not_separate", "not_certified"});
  if (seen.value) return false;
  return seen.no_reading.starts_with("blocked_by:") ||
         std::find(consequences.begin(), consequences.end(), seen.no_reading) != consequences.end();
}

std::vector<Datum> data_up_to(std::size_t stage, const Rules& rules, const Pattern& pattern) {
  std::vector<Datum> data;
  for (const Deviation& seen : pattern)
    if (const UsedCheck* used = rules.check(seen.check); used && used->stage <= stage && !says_nothing(seen))
      data.push_back({used, &seen});
  return data;
}

Outlook outlook(std::string_view check, std::span<const Part> parts) {
  Outlook outlook;
  for (const auto& [cause, severity] : parts) {
    if (const Move* move = move_of(*cause, check))
      add(*move, severity, outlook);
    else if (cause->everything_else_still ? contains(cause->may_move, check) : !contains(cause->still, check))
      outlook.anywhere = true;
  }
  return outlook;
}

double log_likelihood(const Datum& datum, const Outlook& outlook, double stray) {
  const double likelihood = datum.seen->value
                                ? (1.0 - stray) * expected_density(datum, outlook) + stray * anywhere(value_of(datum))
                                : missing_probability(datum, outlook, stray);
  return datum.used->weight * std::log(likelihood);
}

double stray_probability(const Datum& datum, const Outlook& outlook, double stray) {
  if (!datum.seen->value) return missing_probability(datum, outlook, stray) < missing_possible ? 1.0 : 0.0;
  const double off = stray * anywhere(value_of(datum));
  return off / (off + (1.0 - stray) * expected_density(datum, outlook));
}

double log_likelihood(std::span<const Datum> data, std::span<const Part> parts, double stray) {
  double sum = 0.0;
  for (const Datum& datum : data) sum += log_likelihood(datum, outlook(datum.used->check, parts), stray);
  return sum;
}

Fitted fit(std::span<const Datum> data, const Cause& cause, std::span<const Part> beside, double stray) {
  std::vector<Part> parts(beside.begin(), beside.end());
  parts.push_back({&cause, 1.0});
  // What the cause does not move is the same at every severity.
  std::vector<Datum> moved(data.begin(), data.end());
  const auto rest = std::stable_partition(
      moved.begin(), moved.end(), [&](const Datum& datum) { return move_of(cause, datum.used->check) != nullptr; });
  const double of_rest = log_likelihood(std::span{rest, moved.end()}, parts, stray);
  moved.erase(rest, moved.end());
  std::vector<double> logs;
  Fitted fitted;
  double best = -HUGE_VAL;
  for (const double severity : severities_of(cause)) {
    parts.back().severity = severity;
    logs.push_back(of_rest + log_likelihood(moved, parts, stray));
    if (logs.back() > best) best = logs.back(), fitted.severity = severity;
  }
  fitted.log_evidence = log_mean_exp(logs);
  return fitted;
}

bool can_show(std::span<const Datum> data, const Cause& cause) {
  return std::any_of(data.begin(), data.end(),
                     [&](const Datum& datum) { return move_of(cause, datum.used->check) != nullptr; });
}

}  // namespace probewright::limits::diagnosis
