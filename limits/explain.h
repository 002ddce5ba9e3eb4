#pragma once
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "limits/sheet.h"

namespace probewright::limits {

/// What a sheet does with one check, ready to be printed or drawn. Numbers in the unit of the catalogue.
struct CheckLine {
  std::string check, shown_as, unit;  ///< slug; words; unit as people read it
  Use use = Use::record_only;
  Limits limits, acceptance;
  double expanded_uncertainty = 0.0;  ///< declared U
  double guard_band = 0.0;            ///< width on each side
  /// Probability that a probe conforms whose reading stands on the worse acceptance limit; judged numbers only.
  std::optional<double> conformance_at_acceptance;
  std::string words;  ///< one sentence
};

/// The answer to "is this sheet usable, and what does it say?".
struct SheetReport {
  std::string file;
  std::optional<Sheet> sheet;  ///< nothing when there are faults
  Problems faults, warnings;
  std::vector<CheckLine> lines;    ///< in catalogue order
  std::vector<std::string> notes;  ///< bins, retest, stop rule: a sentence each
  bool usable() const { return faults.empty(); }
};

/// Reads and explains a sheet; `file` names the text in faults.
SheetReport explain(std::string_view text, std::string_view file);

/// The line of one rule.
CheckLine explain(const CheckRule& rule);

/// The text that `limits check` prints: the faults, or a line for each check.
std::string to_text(const SheetReport& report);

}  // namespace probewright::limits
