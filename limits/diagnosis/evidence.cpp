#include "limits/diagnosis/evidence.h"

#include <algorithm>
#include <cmath>

#include "limits/words.h"
#include "station/base/catalogue.h"
#include "station/base/numbers.h"

namespace probewright::limits::diagnosis {
namespace {

using Form = Expected::Form;

constexpr std::size_t most_items = 4;
/// A figure below this, and a third of the largest, is not worth a reader's time.
constexpr double small = 0.3, small_part = 0.33;

std::string_view shown_as(std::string_view check) {
  const Check* known = find_check(check);
  return known ? known->shown_as : check;
}

/// "4.7", "-0.5", "1200": two digits that count, no more.
std::string figure(double value) {
  const double size = std::abs(value);
  if (size >= 99.5) return fixed(value, 0);
  const std::string text = fixed(value, size >= 9.95 ? 0 : 1);
  return text == "-0.0" ? "0.0" : text;
}

double size_of(const Evidence& evidence) {
  constexpr double missing = 1e9;  // a reading that is missing stands before all that is there
  return evidence.measured ? std::abs(*evidence.measured) : missing;
}

void most_striking_first(std::vector<Evidence>& evidence) {
  std::stable_sort(evidence.begin(), evidence.end(),
                   [](const Evidence& a, const Evidence& b) { return size_of(a) > size_of(b); });
  if (evidence.size() > most_items) evidence.resize(most_items);
}

std::string expected_words(const Outlook& outlook, double usual) {
  if (outlook.by) return figure(usual + outlook.shift);
  std::string words;
  for (const Expected& one : outlook.beyond) {
    if (one.form == Form::no_reading) continue;
    words += (words.empty() ? "" : " or ") + std::string{one.form == Form::above ? "above " : "below "};
    words += figure(one.figure);
  }
  return words.empty() ? "no reading" : words;
}

bool is_stray(const Datum& datum, const Outlook& expected, double stray) {
  constexpr double rather = 0.5;
  return stray_probability(datum, expected, stray) >= rather;
}

Evidence evidence_of(const Datum& datum, const Outlook& outlook, bool tells_expected) {
  Evidence evidence{datum.seen->check, datum.seen->value, {}, true, words(*datum.seen)};
  if (!datum.seen->value) return evidence;
  if (outlook.by) evidence.expected = datum.used->usual + outlook.shift;
  if (tells_expected) evidence.words += " (expected " + expected_words(outlook, datum.used->usual) + ")";
  return evidence;
}

bool is_moved_by(const Cause& cause, std::string_view check) {
  return std::any_of(cause.moves.begin(), cause.moves.end(), [check](const Move& m) { return m.check == check; });
}

/// Figures that nobody would see among the large ones go.
void drop_small(std::vector<Evidence>& evidence) {
  double most = 0.0;
  for (const Evidence& one : evidence)
    if (one.expected) most = std::max(most, std::abs(*one.expected));
  std::erase_if(evidence, [most](const Evidence& one) {
    if (!one.measured || !one.expected) return false;
    const double size = std::max(std::abs(*one.measured), std::abs(*one.expected));
    return size < small && size < small_part * most;
  });
}

}  // namespace

std::string words(const Deviation& seen) {
  const std::string name{shown_as(seen.check)};
  if (!seen.value) return name + " has no reading (" + reason_words(seen.no_reading) + ")";
  const std::string size = name + " " + figure(*seen.value) + " times its tolerance";
  return seen.unusable.empty() ? size : size + " but not usable (" + reason_words(seen.unusable) + ")";
}

std::vector<Evidence> evidence_for(const Part& part, std::span<const Datum> data, std::span<const Part> explanation,
                                   double stray) {
  // The severity was fitted to the only figure: to say that it was expected would say nothing.
  const bool tells_expected = part.cause->moves.size() > 1;
  std::vector<Evidence> evidence;
  for (const Datum& datum : data) {
    const Outlook expected = outlook(datum.used->check, explanation);
    if (!is_moved_by(*part.cause, datum.used->check) || is_stray(datum, expected, stray)) continue;
    evidence.push_back(evidence_of(datum, expected, tells_expected));
  }
  drop_small(evidence);
  most_striking_first(evidence);
  return evidence;
}

std::vector<Evidence> unexplained(std::span<const Datum> data, std::span<const Part> explanation, double stray) {
  std::vector<Evidence> evidence;
  for (const Datum& datum : data) {
    const Outlook expected = outlook(datum.used->check, explanation);
    if (!is_stray(datum, expected, stray)) continue;
    Evidence one{datum.seen->check, datum.seen->value, {}, false, words(*datum.seen)};
    if (one.measured) one.expected = datum.used->usual + expected.shift;
    evidence.push_back(std::move(one));
  }
  most_striking_first(evidence);
  return evidence;
}

std::vector<Evidence> not_ok(const Pattern& pattern) {
  std::vector<Evidence> evidence;
  for (const Deviation& seen : pattern)
    if (seen.not_ok) evidence.push_back({seen.check, seen.value, {}, false, words(seen)});
  most_striking_first(evidence);
  return evidence;
}

std::string joined(std::span<const Evidence> evidence) {
  std::string text;
  for (const Evidence& one : evidence) text += (text.empty() ? "" : "; ") + one.words;
  return text;
}

}  // namespace probewright::limits::diagnosis
