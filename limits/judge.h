#pragma once
#include <optional>
#include <span>
#include <string>
#include <string_view>
#include <vector>

#include "limits/sheet.h"

namespace probewright::limits {

/// What became of one reading.
enum class Outcome {
  ok,           ///< inside the acceptance limits, or on one of them
  not_ok,       ///< outside a limit, however uncertain
  too_close,    ///< inside the limit, too close for our uncertainty; not a proof of nonconformity, counts as not ok
  unusable,     ///< not a number, or without an uncertainty, or inside the limits with one larger than declared
  no_reading,   ///< could not be had; counts as not ok
  watch_ok,     ///< watched, inside
  watch_alert,  ///< watched, outside: alerts, no verdict
  recorded      ///< record only
};
/// The slug of an outcome in files: "ok", "not_ok", "too_close", "unusable", "no_reading", "watch_ok", "watch_alert",
/// "recorded".
std::string_view slug(Outcome outcome);

/// A reading held against the sheet, with all that is kept with the run.
struct Judgement {
  std::string check;
  Use use = Use::record_only;
  Outcome outcome = Outcome::no_reading;
  /// Why a reading is unusable or missing: "not_a_number", "no_uncertainty", "uncertainty_above_declared",
  /// "not_yes_or_no", or the reason that was handed in ("blocked_by:dark_current", "no_peak"); else empty.
  std::string reason;
  /// How far inside the acceptance limits. Two-sided: 1 in the middle, 0 at an acceptance limit, negative outside.
  /// One-sided: (limit - x) / (limit - typical). Yes/no: 1 or -1. Judged and usable readings only.
  std::optional<double> margin;
  /// Probability that the true value lies within the limits (not the acceptance limits), from the reading and its own
  /// uncertainty (JCGM 106:2012 clause 7, normal). Judged, usable, not yes/no.
  std::optional<double> conformance_probability;
  Limits limits;                      ///< as applied, unit of the check
  Limits acceptance;                  ///< as applied
  double declared_uncertainty = 0.0;  ///< U on the sheet
  std::string words;                  ///< one sentence for people

  bool judged() const { return use == Use::judged; }
  /// Judged and ok. Nothing else lets a probe pass.
  bool lets_pass() const { return judged() && outcome == Outcome::ok; }
};

/// Holds one reading against the sheet, on unrounded values.
/// value                 in the unit of the catalogue; nothing when there is no reading; yes/no: 1 or 0
/// expanded_uncertainty  the reading's own U (k = 2), same unit; not looked at for yes/no, watched and recorded checks
/// no_reading_reason     slug of why there is no value
/// Throws std::invalid_argument when the sheet does not name the check: see faults_against_routine.
Judgement judge(const Sheet& sheet, std::string_view check, std::optional<double> value, double expanded_uncertainty,
                std::string_view no_reading_reason = {});

/// Pass or fail of a run that was completed; whether it is void is not decided here.
struct Verdict {
  bool pass = false;
  std::vector<std::string> not_ok;      ///< judged checks with a reading that is not ok, in order
  std::vector<std::string> no_reading;  ///< judged checks without a reading, in order
};

/// Pass only if there is at least one judged check and each judged check, and each of `expected`, has a reading that is
/// ok. `expected` is judged_checks(sheet, routine): a check that was never brought here fails the run too.
Verdict overall(std::span<const Judgement> judgements, std::span<const std::string> expected = {});

}  // namespace probewright::limits
