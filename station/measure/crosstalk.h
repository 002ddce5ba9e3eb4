#pragma once
#include <span>

#include "station/base/result.h"
#include "station/measure/bands.h"

namespace probewright::measure {

/// AC/DC of both bands at one set point, beside the certificate's.
struct ModulationPoint {
  PerBand<double> certified, measured, noise_u;  ///< amplitude over mean; standard uncertainties of `measured`
};

/// A share with its standard uncertainty.
struct Share {
  double value = 0.0, u = 0.0;
};

struct Crosstalk {
  double share = 0.0;        ///< of the other LED's light that appears in an LED's slot
  double noise_u = 0.0;      ///< from the modulations' noise
  double secondary_u = 0.0;  ///< from the uncertainty of `secondary`
};

/// Slot cross-talk from the pattern of both bands' modulations over the set points.
///
/// Let x be the share, q the infrared photocurrent over the red one, s the part of the red LED's photocurrent that its
/// secondary emission makes (modulated as infrared is), a and b the certified modulations of red and infrared at a set
/// point, R = a/b. Slots then carry
///   red       I_r ((1-s) a + s b) + x I_i b   over   I_r + x I_i
///   infrared  I_i b + x I_r a                 over   I_i + x I_r       (a small term s x left out)
/// Relative to the certificate, red is proportional to (1-s) + (s + x q)/R and infrared to 1 + (x/q) R: straight lines
/// in 1/R and in R, whose slope over intercept does not change with what dilutes both alike (light around the phantom,
/// a common error of the modulator). Each line gives x; the two are averaged by their uncertainties. Red tells nearly
/// all, but cannot tell secondary emission from cross-talk, which is why that must be known; infrared can.
/// q is the ratio of the slots' levels with x taken out again.
///
/// points             three or more, at least two different ratios
/// infrared_over_red  quotient of the slots' DC levels, above 0
/// Errors: crosstalk_points, crosstalk_levels (quotient not above 0, or the pattern turned over: x q of order 1).
Result<Crosstalk> crosstalk_of(std::span<const ModulationPoint> points, double infrared_over_red, Share secondary);

}  // namespace probewright::measure
