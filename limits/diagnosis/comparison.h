#pragma once
#include <span>
#include <vector>

#include "limits/diagnosis/likelihood.h"

// Everything that may explain a pattern, side by side.
namespace probewright::limits::diagnosis {

/// Some causes together, at the severities that fit best; none: a healthy probe.
struct Explanation {
  std::vector<Part> parts;
  double log_posterior = 0.0;
};

/// All that was compared for data up to one stage.
struct Comparison {
  std::vector<Explanation> singles;  ///< one cause of the probe each, best first
  Explanation best;                  ///< of the singles and what was added to the best of them; may have several parts
  double log_healthy = 0.0;          ///< nothing wrong
  double log_unknown = 0.0;          ///< something that the rules do not know
  std::vector<Explanation> station;  ///< one cause of the station each, best first

  /// Whether known causes of a probe explain it better than nothing or something unknown does.
  bool known_is_best() const { return !best.parts.empty() && best.log_posterior > std::max(log_healthy, log_unknown); }
  /// Logarithm of the sum over all but the station's.
  double log_all() const;
};
Comparison compare(const Rules& rules, std::span<const Datum> data);

}  // namespace probewright::limits::diagnosis
