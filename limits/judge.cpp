#include "limits/judge.h"

#include <algorithm>
#include <cmath>
#include <stdexcept>

#include "limits/sentence.h"
#include "limits/statistics/conformance.h"

namespace probewright::limits {
namespace {

struct Reading {
  double value;
  double expanded_uncertainty;
};

/// Why a reading cannot be judged, or "".
std::string_view why_unusable(const CheckRule& rule, const Reading& reading) {
  if (!std::isfinite(reading.value)) return "not_a_number";
  if (rule.use != Use::judged) return {};
  if (rule.must_be_yes) return reading.value == 0.0 || reading.value == 1.0 ? "" : "not_yes_or_no";
  // No measurement is without uncertainty; a zero is one that somebody forgot.
  if (!(reading.expanded_uncertainty > 0.0) || !std::isfinite(reading.expanded_uncertainty)) return "no_uncertainty";
  // Outside a limit a reading is not ok however uncertain it is, and the limit is what a person must hear of: the
  // uncertainty of a dark current of 500 nA is large because the current is.
  const bool too_uncertain = reading.expanded_uncertainty > rule.expanded_uncertainty;
  if (too_uncertain && rule.limits.contain(reading.value)) return "uncertainty_above_declared";
  return {};
}

Outcome judged_outcome(const CheckRule& rule, double value) {
  if (rule.must_be_yes) return value == 1.0 ? Outcome::ok : Outcome::not_ok;
  if (rule.acceptance.contain(value)) return Outcome::ok;
  return rule.limits.contain(value) ? Outcome::too_close : Outcome::not_ok;
}

Outcome outcome_of(const CheckRule& rule, double value) {
  switch (rule.use) {
    case Use::judged:
      return judged_outcome(rule, value);
    case Use::watch:
      return std::abs(value) <= *rule.watch_beyond ? Outcome::watch_ok : Outcome::watch_alert;
    case Use::record_only:
      break;
  }
  return Outcome::recorded;
}

/// Written with differences from the acceptance limits, so that the sign is exact: 0 on a limit, negative outside.
double margin_of(const CheckRule& rule, double value) {
  const Limits& accept = rule.acceptance;
  if (rule.must_be_yes) return value == 1.0 ? 1.0 : -1.0;
  if (accept.two_sided())
    return std::min(value - *accept.lower, *accept.upper - value) / (0.5 * (*accept.upper - *accept.lower));
  if (accept.upper) return (*accept.upper - value) / (*accept.upper - *rule.typical);
  return (value - *accept.lower) / (*rule.typical - *accept.lower);
}

void judge_value(const CheckRule& rule, const Reading& reading, Judgement& judgement) {
  judgement.outcome = outcome_of(rule, reading.value);
  if (rule.use != Use::judged) return;
  judgement.margin = margin_of(rule, reading.value);
  if (!rule.must_be_yes)
    judgement.conformance_probability =
        statistics::conformance_probability(reading.value, 0.5 * reading.expanded_uncertainty, rule.limits);
}

const CheckRule& rule_of(const Sheet& sheet, std::string_view check) {
  if (const CheckRule* rule = sheet.find(check)) return *rule;
  throw std::invalid_argument("the sheet does not name the check " + std::string{check});
}

Judgement blank(const CheckRule& rule) {
  Judgement judgement;
  judgement.check = rule.check;
  judgement.use = rule.use;
  judgement.limits = rule.limits;
  judgement.acceptance = rule.acceptance;
  judgement.declared_uncertainty = rule.expanded_uncertainty;
  return judgement;
}

}  // namespace

std::string_view slug(Outcome outcome) {
  switch (outcome) {
    case Outcome::ok:
      return "ok";
    case Outcome::not_ok:
      return "not_ok";
    case Outcome::too_close:
      return "too_close";
    case Outcome::unusable:
      return "unusable";
    case Outcome::no_reading:
      return "no_reading";
    case Outcome::watch_ok:
      return "watch_ok";
    case Outcome::watch_alert:
      return "watch_alert";
    case Outcome::recorded:
      return "recorded";
  }
  return "";
}

Judgement judge(const Sheet& sheet, std::string_view check, std::optional<double> value, double expanded_uncertainty,
                std::string_view no_reading_reason) {
  const CheckRule& rule = rule_of(sheet, check);
  Judgement judgement = blank(rule);
  if (!value) {
    judgement.outcome = Outcome::no_reading;
    judgement.reason = no_reading_reason;
  } else if (const auto why = why_unusable(rule, {*value, expanded_uncertainty}); !why.empty()) {
    judgement.outcome = Outcome::unusable;
    judgement.reason = why;
  } else {
    judge_value(rule, {*value, expanded_uncertainty}, judgement);
  }
  judgement.words = sentence(rule, judgement, value, expanded_uncertainty);
  return judgement;
}

Verdict overall(std::span<const Judgement> judgements, std::span<const std::string> expected) {
  Verdict verdict;
  bool any_judged = false;
  for (const Judgement& judgement : judgements) {
    if (!judgement.judged()) continue;
    any_judged = true;
    if (judgement.lets_pass()) continue;
    (judgement.outcome == Outcome::no_reading ? verdict.no_reading : verdict.not_ok).push_back(judgement.check);
  }
  for (const std::string& check : expected) {
    const auto same = [&](const Judgement& j) { return j.judged() && j.check == check; };
    if (std::none_of(judgements.begin(), judgements.end(), same)) verdict.no_reading.push_back(check);
  }
  verdict.pass = any_judged && verdict.not_ok.empty() && verdict.no_reading.empty();
  return verdict;
}

}  // namespace probewright::limits
