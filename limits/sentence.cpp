#include "limits/sentence.h"

#include <algorithm>

#include "limits/words.h"
#include "station/base/numbers.h"

namespace probewright::limits {
namespace {

/// Decimals for a value beside all the limits that the sentence compares it with.
int decimals_beside(const CheckRule& rule, double value, bool beside_acceptance) {
  int decimals = decimals_for(rule.expanded_uncertainty, value);
  for (const auto& limit : {rule.limits.lower, rule.limits.upper})
    if (limit) decimals = decimals_apart(value, *limit, std::max(decimals, decimals_of(*limit)));
  if (beside_acceptance)
    for (const auto& limit : {rule.acceptance.lower, rule.acceptance.upper})
      if (limit) decimals = decimals_apart(value, *limit, decimals);
  return decimals;
}

std::string within(const Check& check, const CheckRule& rule, double value) {
  const bool guarded = rule.acceptance != rule.limits;
  const int decimals = decimals_beside(rule, value, guarded);
  const Limits& shown = guarded ? rule.acceptance : rule.limits;
  return with_unit(value, decimals, check) + ", " + window_words(shown, decimals, check);
}

std::string beyond(const Check& check, const CheckRule& rule, double value) {
  const int decimals = decimals_beside(rule, value, false);
  const bool below = rule.limits.lower && value < *rule.limits.lower;
  const double limit = below ? *rule.limits.lower : *rule.limits.upper;
  return with_unit(value, decimals, check) + ", " + (below ? "below" : "above") + " the limit of " +
         with_short_unit(limit, decimals, check);
}

std::string too_close(const Check& check, const CheckRule& rule, double value) {
  const int decimals = decimals_beside(rule, value, true);
  const bool below = rule.acceptance.lower && value < *rule.acceptance.lower;
  const double limit = below ? *rule.limits.lower : *rule.limits.upper;
  const double accept = below ? *rule.acceptance.lower : *rule.acceptance.upper;
  return with_unit(value, decimals, check) + ", inside the limit of " + with_short_unit(limit, decimals, check) +
         ", too close for our uncertainty (accepted " + (below ? "from " : "up to ") +
         with_short_unit(accept, decimals, check) + ")";
}

std::string watched(const Check& check, const CheckRule& rule, double value, bool alert) {
  const double beyond_what = *rule.watch_beyond;
  const int decimals = decimals_apart(value < 0.0 ? -value : value, beyond_what, decimals_of(beyond_what));
  return with_unit(value, decimals, check) + (alert ? ", further from 0 than the watched " : ", within the watched ") +
         with_short_unit(beyond_what, decimals, check);
}

std::string recorded(const Check& check, double value, double expanded_uncertainty) {
  if (check.dimension == Dimension::yes_no) return value == 0.0 ? "no" : "yes";
  return with_unit(value, decimals_for(expanded_uncertainty, value), check);
}

std::string unusable(const Check& check, const CheckRule& rule, const Judgement& judgement, double own) {
  if (judgement.reason == "not_a_number") return "not usable, the reading is not a number";
  if (judgement.reason == "not_yes_or_no") return "not usable, the reading is neither yes nor no";
  if (judgement.reason == "no_uncertainty") return "not usable, the reading came without an uncertainty";
  const int decimals = decimals_apart(own, rule.expanded_uncertainty, decimals_for(rule.expanded_uncertainty, own));
  return "not usable, the uncertainty of this reading is " + with_unit(own, decimals, check) + ", the sheet allows " +
         with_short_unit(rule.expanded_uncertainty, decimals, check);
}

std::string no_reading(const Judgement& judgement) {
  return judgement.reason.empty() ? "no reading" : "no reading, " + reason_words(judgement.reason);
}

std::string predicate(const Check& check, const CheckRule& rule, const Judgement& judgement, double value, double own) {
  if (rule.must_be_yes && judgement.outcome == Outcome::ok) return "yes";
  if (rule.must_be_yes && judgement.outcome == Outcome::not_ok) return "no, and it must be yes";
  switch (judgement.outcome) {
    case Outcome::ok:
      return within(check, rule, value);
    case Outcome::not_ok:
      return beyond(check, rule, value);
    case Outcome::too_close:
      return too_close(check, rule, value);
    case Outcome::unusable:
      return unusable(check, rule, judgement, own);
    case Outcome::no_reading:
      return no_reading(judgement);
    case Outcome::watch_ok:
      return watched(check, rule, value, false);
    case Outcome::watch_alert:
      return watched(check, rule, value, true);
    case Outcome::recorded:
      return recorded(check, value, own);
  }
  return {};
}

}  // namespace

std::string sentence(const CheckRule& rule, const Judgement& judgement, std::optional<double> value,
                     double expanded_uncertainty) {
  const Check& check = *find_check(rule.check);  // a sheet names checks of the catalogue only
  return std::string{check.shown_as} + ": " +
         predicate(check, rule, judgement, value.value_or(0.0), expanded_uncertainty);
}

}  // namespace probewright::limits
