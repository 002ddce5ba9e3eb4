#pragma once
#include "limits/limits.h"

namespace probewright::limits::statistics {

/// Probability that the true value lies within `tolerance`, given a reading and its standard uncertainty, normal.
/// An open side counts as fulfilled. standard_uncertainty >= 0; with 0 the answer is 1 or 0.
/// Source: JCGM 106:2012 clause 7.
double conformance_probability(double value, double standard_uncertainty, const Limits& tolerance);

}  // namespace probewright::limits::statistics
