#pragma once
#include <optional>
#include <span>
#include <string>
#include <string_view>
#include <vector>

#include "limits/diagnosis/rules.h"
#include "limits/judge.h"

namespace probewright::limits::diagnosis {

/// How far one reading lies from where it should be, in units of its tolerance, so that all checks can be compared.
/// Two limits: (x - middle) / half width. One limit: (x - typical) / (limit - typical). Watched: x / watched magnitude.
/// Recorded only: (x - typical) / tolerance by the scale that the rules give. Yes/no: yes 0, no 1.
struct Deviation {
  std::string check;
  std::optional<double> value;  ///< in tolerances
  double standard_u = 0.0;      ///< of it, in tolerances
  bool not_ok = false;          ///< judged or watched, and outside what is accepted; also: judged and no reading
  std::string no_reading;       ///< slug of the reason when there is no value
  std::string unusable;         ///< slug of the reason when there is one that may not be judged
  bool operator==(const Deviation&) const = default;
};

/// What a probe shows, in catalogue order, each check at most once.
using Pattern = std::vector<Deviation>;

/// A reading as the routine has it: judged, with its own value and expanded uncertainty (k = 2) in the check's unit.
struct JudgedValue {
  Judgement judgement;
  std::optional<double> value;
  double expanded_uncertainty = 0.0;  ///< 0 for yes/no and where there is none
};

/// The pattern of these readings. A check that the sheet only records and that the rules give no scale is left out, and
/// so is one that the sheet does not name. Of two readings of one check the first counts. A value that is not a number
/// becomes no reading ("not_a_number").
Pattern pattern_of(const Rules& rules, const Sheet& sheet, std::span<const JudgedValue> readings);

/// What counts as 0 and as one tolerance for a check, in its own unit; `tolerance` is below 0 where only a lower limit
/// stands. Nothing: the check has no scale.
std::optional<UsedCheck::Scale> scale_of(const Rules& rules, const Sheet& sheet, std::string_view check);

}  // namespace probewright::limits::diagnosis
