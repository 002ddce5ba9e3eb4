#pragma once
#include <functional>

#include "limits/limits.h"
#include "station/base/result.h"

namespace probewright::limits::statistics {

/// How the true values of a product are spread: a density, smooth on the scale of a 32nd of the range, and
/// a range that holds all but a negligible part of it.
struct Process {
  std::function<double(double)> density;
  double from = 0.0, to = 0.0;
};

/// A normal process, cut at 12 standard deviations.
Process normal_process(double mean, double sd);

/// What inspection does to a process, as probabilities for one item drawn before inspection.
struct Risks {
  double nonconforming = 0.0;  ///< the true value lies outside the tolerance
  double consumer = 0.0;       ///< ... and the item is accepted (false accept)
  double producer = 0.0;       ///< the true value lies inside, and the item is rejected (false reject)
  double accepted = 0.0;       ///< yield
};

/// Global risks with a normal measuring error, by numerical integration (Gauss-Legendre on fixed pieces).
/// error_sd    standard deviation of the error, > 0, unit of the process
/// tolerance   limits for the true value; acceptance: limits for the reading; each at least one side
/// errors      risk_input (what is wrong, in words)
/// source      JCGM 106:2012 clause 9.5
Result<Risks> global_risks(const Process& process, double error_sd, const Limits& tolerance, const Limits& acceptance);

/// The narrowest guard band (>= 0, the same on each side of `tolerance`) that keeps the consumer's risk at or below
/// `wanted`; at worst one that leaves no acceptance window. Errors: as above.
Result<double> guard_band_for_consumer_risk(const Process& process, double error_sd, const Limits& tolerance,
                                            double wanted);

}  // namespace probewright::limits::statistics
