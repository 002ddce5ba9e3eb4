#pragma once
#include <optional>
#include <span>
#include <string>
#include <string_view>
#include <vector>

#include "limits/limits.h"
#include "station/base/digest.h"
#include "station/base/result.h"

namespace probewright::limits {

/// What the sheet does with a check: judged (counts in the verdict), watched (alerts, no verdict) or recorded only.
enum class Use { judged, watch, record_only };

/// A window written as a nominal value and a tolerance on both sides.
struct Nominal {
  double value = 0.0;
  double tolerance = 0.0;   ///< in % of the nominal value, or in the unit of the check
  bool in_percent = false;  ///< which of the two
  bool operator==(const Nominal&) const = default;
};

/// How far the limits are moved inwards: not at all, a factor times U (ISO 14253-1), or as far as a risk of accepting
/// a nonconforming value at the acceptance limit asks for (JCGM 106).
struct Guard {
  enum class Kind { none, factor, risk };
  Kind kind = Kind::none;
  double amount = 0.0;  ///< the factor, or the risk as a probability (0.05 for 5 %)
  bool operator==(const Guard&) const = default;
};

/// What the sheet says of one check. All values are in the unit of the catalogue ("nm", "mA", "%" ...).
struct CheckRule {
  std::string check;  ///< slug of the catalogue
  Use use = Use::record_only;
  bool must_be_yes = false;           ///< a judged yes/no check; then there are no limits and no uncertainty
  Limits limits;                      ///< as written, or from nominal and tolerance
  std::optional<Nominal> nominal;     ///< when the window was written so
  double expanded_uncertainty = 0.0;  ///< declared U (k = 2); a reading with a larger one is unusable
  Guard guard;
  Limits acceptance;                   ///< limits moved inwards by the guard band; computed once, never by a run
  std::optional<double> typical;       ///< one-sided checks: where the margin is 1
  std::optional<double> at_degC;       ///< temperature that the limits hold for
  std::optional<double> watch_beyond;  ///< watched checks: an alert when the magnitude is larger
  bool operator==(const CheckRule&) const = default;
};

/// One bin of a model: LEDs whose `by` check lies from lower to upper carry this resistor.
struct Bin {
  std::string name;                                ///< "B1"
  double lower = 0.0, upper = 0.0, nominal = 0.0;  ///< unit of the check that sorts
  double resistor_ohm = 0.0;
  bool operator==(const Bin&) const = default;
};

/// Bins in rising order, without gap or overlap.
struct Bins {
  std::string by;  ///< slug of the check that sorts
  std::vector<Bin> bins;
  bool operator==(const Bins&) const = default;
};

/// How often a failed probe may be tried again, and after which rest.
struct Retest {
  int tries = 0;
  double after_s = 0.0;
  bool operator==(const Retest&) const = default;
};

/// When a nest stops by itself.
struct StopWhen {
  std::optional<int> fails_in_a_row;
  std::optional<double> yield_below_percent;  ///< together with the next one
  int of_last = 0;
  bool operator==(const StopWhen&) const = default;
};

/// A limit sheet: limits for one model, in one numbered revision. Plain values; any thread may read it.
struct Sheet {
  std::string name;  ///< the model it is for: "AQ-20"
  int revision = 0;
  std::string reason;               ///< why this revision was made
  std::string decision;             ///< the decision rule in words
  std::optional<Digest> for_model;  ///< digest of the model file it was written for; a draft may lack it
  std::vector<CheckRule> checks;    ///< in catalogue order
  std::optional<Bins> bins;
  Retest retest;
  StopWhen stop_when;
  std::string file;   ///< where it was read from, for messages
  Problems warnings;  ///< what a reader should know and may accept

  /// The rule of a check, or nullptr when the sheet does not name it.
  const CheckRule* find(std::string_view check) const;
};

/// Reads a sheet strictly. `file` names the text in faults.
/// Errors, all of them at once, each with file:line:column, the offending text and the nearest valid word: what the
/// strict YAML reader finds, and the problems `sheet_...` of the table (units, order of limits, missing U, guard band,
/// bins, resistors, retest, stop rule).
ResultOrFaults<Sheet> read_sheet(std::string_view text, std::string_view file);

/// One problem (sheet_lacks_check) for each check of a routine that the sheet does not name. A sheet may name more.
Problems faults_against_routine(const Sheet& sheet, std::span<const std::string> routine);

/// A bin as the model's file tells it.
struct ModelBin {
  std::string name;
  double nominal = 0.0;  ///< unit of the sorting check
  double resistor_ohm = 0.0;
};
/// One problem for each bin that sheet and model tell differently (sheet_bin_differs, sheet_bin_only_here,
/// sheet_bin_only_in_model).
Problems faults_against_bins(const Sheet& sheet, std::span<const ModelBin> model_bins);

/// The checks of `routine` that `sheet` judges, in the order of the routine.
std::vector<std::string> judged_checks(const Sheet& sheet, std::span<const std::string> routine);

}  // namespace probewright::limits
