#include "limits/diagnosis/pattern.h"

#include <algorithm>
#include <cmath>

#include "station/base/catalogue.h"

namespace probewright::limits::diagnosis {
namespace {

using Scale = UsedCheck::Scale;

/// By the limits, not the acceptance limits: a guard band says something of us, not of the probe.
std::optional<Scale> judged_scale(const CheckRule& rule) {
  if (rule.must_be_yes) return Scale{1.0, -1.0};
  const Limits& limits = rule.limits;
  if (limits.two_sided()) return Scale{0.5 * (*limits.lower + *limits.upper), 0.5 * (*limits.upper - *limits.lower)};
  if (!limits.any() || !rule.typical) return {};
  return Scale{*rule.typical, limits.upper.value_or(limits.lower.value_or(0.0)) - *rule.typical};
}

std::optional<Scale> recorded_scale(const Rules& rules, std::string_view check) {
  const UsedCheck* used = rules.check(check);
  return used ? used->scale : std::nullopt;
}

bool is_not_ok(const Judgement& judgement) {
  switch (judgement.outcome) {
    case Outcome::not_ok:
    case Outcome::too_close:
    case Outcome::unusable:
    case Outcome::watch_alert:
      return true;
    case Outcome::no_reading:
      return judgement.judged();
    case Outcome::ok:
    case Outcome::watch_ok:
    case Outcome::recorded:
      break;
  }
  return false;
}

Deviation deviation_of(const JudgedValue& reading, const Scale& scale) {
  Deviation deviation;
  deviation.check = reading.judgement.check;
  deviation.not_ok = is_not_ok(reading.judgement);
  if (reading.judgement.outcome == Outcome::unusable) deviation.unusable = reading.judgement.reason;
  if (!reading.value) {
    deviation.no_reading = reading.judgement.reason.empty() ? "no_reading" : reading.judgement.reason;
  } else if (!std::isfinite(*reading.value)) {
    deviation.no_reading = "not_a_number";
  } else {
    deviation.value = (*reading.value - scale.typical) / scale.tolerance;
    const double u = 0.5 * reading.expanded_uncertainty / std::abs(scale.tolerance);
    deviation.standard_u = std::isfinite(u) && u > 0.0 ? u : 0.0;
  }
  return deviation;
}

}  // namespace

std::optional<Scale> scale_of(const Rules& rules, const Sheet& sheet, std::string_view check) {
  const CheckRule* rule = sheet.find(check);
  if (!rule) return {};
  std::optional<Scale> scale;
  if (rule->use == Use::judged) scale = judged_scale(*rule);
  if (rule->use == Use::watch && rule->watch_beyond) scale = Scale{0.0, *rule->watch_beyond};
  if (rule->use == Use::record_only) scale = recorded_scale(rules, check);
  if (!scale || scale->tolerance == 0.0) return {};
  return scale;
}

Pattern pattern_of(const Rules& rules, const Sheet& sheet, std::span<const JudgedValue> readings) {
  Pattern pattern;
  for (const JudgedValue& reading : readings) {
    const std::string& check = reading.judgement.check;
    const auto scale = scale_of(rules, sheet, check);
    const auto same = [&](const Deviation& d) { return d.check == check; };
    if (scale && std::none_of(pattern.begin(), pattern.end(), same)) pattern.push_back(deviation_of(reading, *scale));
  }
  std::stable_sort(pattern.begin(), pattern.end(),
                   [](const Deviation& a, const Deviation& b) { return check_index(a.check) < check_index(b.check); });
  return pattern;
}

}  // namespace probewright::limits::diagnosis
