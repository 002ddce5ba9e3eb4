#pragma once
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "station/base/result.h"

// The rules by which a failed probe's likely faults are told: one document that engineers read and extend. All figures
// are in units of a check's tolerance (pattern.h), so that volts and nanometres stand beside each other.
namespace probewright::limits::diagnosis {

/// One thing that a check may do when a cause is there.
struct Expected {
  enum class Form {
    by,         ///< lies `figure` from where it usually is, times the severity
    above,      ///< lies above `figure`, however far
    below,      ///< lies below `figure`, however far
    no_reading  ///< has no reading; `reason` says why, if that is known
  };
  Form form = Form::by;
  double figure = 0.0;
  double within = 0.0;  ///< by: how well the figure is known, 1 sigma, relative to it
  std::string reason;
  bool operator==(const Expected&) const = default;
};

/// What a check does when a cause is there; several are alternatives.
struct Move {
  std::string check;
  std::vector<Expected> expected;
  bool operator==(const Move&) const = default;
};

enum class CauseKind {
  probe,   ///< a fault of the probe
  station  ///< a fault of the nest; a probe alone never convicts it, only a reference check does
};

/// One cause. What is neither in `moves` nor still may lie anywhere.
struct Cause {
  std::string slug, words;
  CauseKind kind = CauseKind::probe;
  /// Index of the stage at which a hard fault is decided; what comes after it is not looked at. None: not a hard fault.
  std::optional<std::size_t> hard_at;
  std::vector<Move> moves;
  bool everything_else_still = false;
  std::vector<std::string> still;       ///< where not everything else is
  std::vector<std::string> may_move;    ///< where everything else is still, but these
  double least = 1.0, most = 1.0;       ///< severities
  bool either_way = false;              ///< the whole pattern may have the other sign as well
  double how_often = 1.0;               ///< against other causes
  std::vector<std::string> looks_like;  ///< slugs of causes that no reading tells from this one
  std::string rework;                   ///< the instruction: "RW-03 resolder LED leads"
  bool operator==(const Cause&) const = default;
};

/// A check that is looked at.
struct UsedCheck {
  std::string check;
  std::size_t stage = 0;
  double usual = 0.0;   ///< where healthy probes lie on average
  double spread = 0.0;  ///< standard deviation of healthy probes about it
  double weight = 1.0;  ///< below 1 for checks that say the same as others
  /// Where it is 0 and what counts as one tolerance, in the unit of the catalogue; for checks that a sheet only
  /// records.
  struct Scale {
    double typical = 0.0, tolerance = 0.0;
    bool operator==(const Scale&) const = default;
  };
  std::optional<Scale> scale;
  bool operator==(const UsedCheck&) const = default;
};

/// How likely what the causes do not say is. All are shares of 1.
struct Method {
  double stray_reading = 0.0;  ///< a reading lies off for a reason of its own, though the cause is right
  double second_fault = 0.0;   ///< a faulty probe has another fault
  double unknown_fault = 0.0;  ///< a faulty probe has none of the causes
  double unknown_moves = 0.0;  ///< ... each of whose readings then lies anywhere
  bool operator==(const Method&) const = default;
};

/// The whole document. Plain values; any thread may read it.
struct Rules {
  std::string name;  ///< "probes"
  int revision = 0;
  std::string reason;
  Method method;
  std::vector<std::string> stages;  ///< in the order in which faults are sought
  std::vector<UsedCheck> checks;    ///< in the order of the document
  std::vector<Cause> causes;
  std::string file;  ///< where it was read from, for messages

  const Cause* find(std::string_view slug) const;
  const UsedCheck* check(std::string_view slug) const;
};

/// Reads a document strictly. `file` names the text in faults.
/// Errors, all of them at once, each with file:line:column and the nearest valid word where there is one: what the
/// strict YAML reader finds, and the problems `rules_...` of the table.
ResultOrFaults<Rules> read_rules(std::string_view text, std::string_view file);

}  // namespace probewright::limits::diagnosis
