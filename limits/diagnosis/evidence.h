#pragma once
#include <span>
#include <string>
#include <vector>

#include "limits/diagnosis/comparison.h"
#include "limits/diagnosis/diagnose.h"

namespace probewright::limits::diagnosis {

/// What speaks for `part` within an explanation: the moves that are as expected, most striking first, at most four.
std::vector<Evidence> evidence_for(const Part& part, std::span<const Datum> data, std::span<const Part> explanation,
                                   double stray);

/// What the explanation leaves unexplained: readings that are rather strays, and readings that are missing for a reason
/// of their own; most striking first, at most four.
std::vector<Evidence> unexplained(std::span<const Datum> data, std::span<const Part> explanation, double stray);

/// What is out of its limits, whether the rules look at it or not, most striking first.
std::vector<Evidence> not_ok(const Pattern& pattern);

/// "dark current 4.7 times its tolerance", "cable noise has no reading (too dark)".
std::string words(const Deviation& seen);

/// "a; b; c"
std::string joined(std::span<const Evidence> evidence);

}  // namespace probewright::limits::diagnosis
