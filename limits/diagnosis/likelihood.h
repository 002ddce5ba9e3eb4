#pragma once
#include <span>
#include <vector>

#include "limits/diagnosis/pattern.h"

// How well causes explain a pattern. Each check is one factor:
//
//   likelihood = (1 - stray) x expected + stray x anywhere
//
// `expected` is a normal density about usual + severity x figure. Its variance adds the spread of healthy probes, the
// reading's own uncertainty, and what the figure is not known to. `anywhere` is a Cauchy density, wide enough that a
// reading which is off for a reason of its own costs a cause something but does not rule it out. The factors are raised
// to the checks' weights where several say the same (composite likelihood: Varin, Reid, Firth 2011). Severities vary
// from probe to probe, so a cause's likelihood is the mean over severities, evenly on a logarithmic scale (evidence in
// the sense of Bayesian comparison: Kass and Raftery 1995); a cause that fits many patterns pays for it.
namespace probewright::limits::diagnosis {

/// A reading that counts, with what the rules say of its check.
struct Datum {
  const UsedCheck* used;
  const Deviation* seen;
};

/// What there is to explain up to a stage. Holds pointers into the rules and the pattern, which must outlive it.
/// Readings that are missing for a reason that is not the probe's (blocked by another check, not captured, not
/// separate, not certified, no table) say nothing and are left out.
std::vector<Datum> data_up_to(std::size_t stage, const Rules& rules, const Pattern& pattern);
bool says_nothing(const Deviation& seen);

/// One cause at one severity (below 0: the pattern with its other sign).
struct Part {
  const Cause* cause;
  double severity;
};

/// What a set of causes says of one check: its moves at their severities, or still, or anything.
struct Outlook {
  double shift = 0.0;            ///< sum of what moves it by a figure, in tolerances
  double variance = 0.0;         ///< of that
  std::vector<Expected> beyond;  ///< alternatives that are not by a figure
  bool by = false;               ///< whether anything moves it by a figure
  bool anywhere = false;         ///< not still, and nothing known
};
Outlook outlook(std::string_view check, std::span<const Part> parts);

/// Logarithm of the likelihood of one reading; `stray` as above.
double log_likelihood(const Datum& datum, const Outlook& outlook, double stray);
/// Probability that the reading is a stray one, given the causes.
double stray_probability(const Datum& datum, const Outlook& outlook, double stray);

/// Sum over all data.
double log_likelihood(std::span<const Datum> data, std::span<const Part> parts, double stray);

/// A cause's evidence beside others whose severity is fixed, and its own best severity.
struct Fitted {
  double log_evidence = 0.0;
  double severity = 1.0;
};
Fitted fit(std::span<const Datum> data, const Cause& cause, std::span<const Part> beside, double stray);

/// Whether a cause moves at least one check of the data: else nothing can speak for it.
bool can_show(std::span<const Datum> data, const Cause& cause);

}  // namespace probewright::limits::diagnosis
