#pragma once
#include <string>
#include <vector>

#include "limits/sheet.h"

namespace probewright::limits {

/// Which way a change moves what a probe must fulfil.
enum class Move {
  tighter,  ///< fewer probes can pass, or a nest stops sooner
  looser,   ///< more probes can pass, or a nest stops later
  moved,    ///< neither: a window that shifted, another resistor
  neutral   ///< no probe is judged otherwise: words, typical values
};
std::string_view words(Move move);

/// One difference between two sheets.
struct Change {
  std::string subject;        ///< slug of a check, "bin B1", "retest", "stop when", "sheet"
  std::string what;           ///< "upper limit", "acceptance limit, upper", "U", ...
  std::string before, after;  ///< with units; "none" for what is not there
  Move move = Move::neutral;
};

struct SheetDifference {
  std::string before_title, after_title;  ///< "AQ-20 revision 3"
  std::vector<Change> changes;            ///< checks in catalogue order, then bins, retest, stop rule, words
};

/// What changed from one sheet to another, in words. The acceptance limits decide tighter or looser, since they judge.
SheetDifference compare(const Sheet& before, const Sheet& after);

/// The text that `limits diff` prints.
std::string to_text(const SheetDifference& difference);

}  // namespace probewright::limits
