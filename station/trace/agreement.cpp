#include "station/trace/agreement.h"

#include <algorithm>
#include <bit>
#include <cmath>

namespace probewright::trace {
namespace {

using Number = std::optional<double>;

bool same_bits(const Number& a, const Number& b) {
  if (a.has_value() != b.has_value()) return false;
  // The ledger stores minus zero as zero.
  return !a || std::bit_cast<std::uint64_t>(*a + 0.0) == std::bit_cast<std::uint64_t>(*b + 0.0);
}

/// Within 1e-12 of the larger of the two; of `scale` where both are small beside it.
bool close_to(const Number& a, const Number& b, double scale) {
  if (a.has_value() != b.has_value()) return false;
  return !a || std::abs(*a - *b) <= 1e-12 * std::max({std::abs(*a), std::abs(*b), scale});
}

struct Numbers {
  Number value, expanded_uncertainty, margin, probability;
};

Numbers numbers_of(const db::ReadingRow& row) {
  return {row.value, row.expanded_uncertainty, row.margin, row.conformance_probability};
}

Numbers numbers_of(const DerivedReading& derived) {
  const auto& judgement = derived.judgement;
  return {derived.reading.value, derived.reading.expanded_uncertainty, judgement ? judgement->margin : std::nullopt,
          judgement ? judgement->conformance_probability : std::nullopt};
}

bool all_same_bits(const Numbers& a, const Numbers& b) {
  return same_bits(a.value, b.value) && same_bits(a.expanded_uncertainty, b.expanded_uncertainty) &&
         same_bits(a.margin, b.margin) && same_bits(a.probability, b.probability);
}

bool all_close(const Numbers& a, const Numbers& b) {
  const double u = a.expanded_uncertainty.value_or(0.0);
  return close_to(a.value, b.value, u) && close_to(a.expanded_uncertainty, b.expanded_uncertainty, 0.0) &&
         close_to(a.margin, b.margin, 1.0) && close_to(a.probability, b.probability, 1.0);
}

Agreement agreement_of(const db::ReadingRow& stored, const DerivedReading& derived) {
  const Numbers then = numbers_of(stored), now = numbers_of(derived);
  if (stored.value.has_value() != derived.reading.value.has_value() ||
      stored.none_reason != derived.reading.none_reason)
    return Agreement::one_sided;
  if (stored.ok != derived.word()) return Agreement::other_outcome;
  if (all_same_bits(then, now)) return Agreement::bitwise;
  return all_close(then, now) ? Agreement::close : Agreement::differs;
}

ReadingDifference only_one(const std::string& check, const std::string& unit) {
  ReadingDifference difference;
  difference.check = check;
  difference.unit = unit;
  difference.agreement = Agreement::one_sided;
  return difference;
}

}  // namespace

std::optional<ReadingDifference> difference_of(const db::ReadingRow& stored, const DerivedReading& derived) {
  const Agreement agreement = agreement_of(stored, derived);
  if (agreement == Agreement::bitwise) return std::nullopt;
  ReadingDifference difference = only_one(stored.check, stored.unit);
  difference.agreement = agreement;
  difference.stored = stored.value;
  difference.derived = derived.reading.value;
  difference.stored_ok = stored.ok;
  difference.derived_ok = derived.word();
  difference.stored_none = stored.none_reason;
  difference.derived_none = derived.reading.none_reason;
  difference.other_method = stored.definition != derived.reading.definition;
  if (stored.value && derived.reading.value && stored.expanded_uncertainty && *stored.expanded_uncertainty > 0.0)
    difference.in_U = std::abs(*derived.reading.value - *stored.value) / *stored.expanded_uncertainty;
  return difference;
}

RunAgreement agreement_of(
    const db::RunRecord& stored, const DerivedRun& derived,
    const std::function<void(const std::string&, const std::string&, const ReadingDifference*)>& each) {
  RunAgreement agreement;
  agreement.run = stored.run;
  agreement.serial = stored.opened.serial;
  agreement.lot = stored.opened.lot;
  agreement.commit = stored.opened.software_commit;
  agreement.stored_verdict = stored.closing ? stored.closing->verdict : "";
  agreement.derived_verdict = derived.verdict;
  const auto tell = [&](const std::string& check, const std::string& unit,
                        std::optional<ReadingDifference> difference) {
    each(check, unit, difference ? &*difference : nullptr);
    if (difference) agreement.differences.push_back(*std::move(difference));
  };
  for (const db::ReadingRow& row : stored.readings) {
    const auto now = std::find_if(derived.readings.begin(), derived.readings.end(),
                                  [&](const DerivedReading& d) { return d.reading.check == row.check; });
    if (now != derived.readings.end()) {
      tell(row.check, row.unit, difference_of(row, *now));
      continue;
    }
    ReadingDifference gone = only_one(row.check, row.unit);
    gone.stored = row.value, gone.stored_ok = row.ok, gone.stored_none = row.none_reason;
    tell(row.check, row.unit, std::move(gone));
  }
  for (const DerivedReading& now : derived.readings) {
    if (std::any_of(stored.readings.begin(), stored.readings.end(),
                    [&](const db::ReadingRow& row) { return row.check == now.reading.check; }))
      continue;
    ReadingDifference fresh = only_one(now.reading.check, now.reading.unit);
    fresh.derived = now.reading.value, fresh.derived_ok = now.word(), fresh.derived_none = now.reading.none_reason;
    tell(now.reading.check, now.reading.unit, std::move(fresh));
  }
  return agreement;
}

std::string_view slug(Agreement agreement) {
  switch (agreement) {
    case Agreement::bitwise:
      return "bitwise";
    case Agreement::close:
      return "close";
    case Agreement::differs:
      return "differs";
    case Agreement::one_sided:
      return "one_sided";
    case Agreement::other_outcome:
      break;
  }
  return "other_outcome";
}

}  // namespace probewright::trace
