#pragma once
#include <functional>
#include <vector>

#include "drivers/emulated/line_shape.h"
#include "drivers/emulated/probe.h"

namespace probewright::emulated {

/// What blood and detector do with a wavelength, on an even grid, linear in between and steady beyond its ends.
struct BloodGrid {
  struct Point {
    double oxygenated = 0.0, deoxygenated = 0.0;  ///< extinctions, in one unit
    double responsivity = 1.0;                    ///< of the detector, relative
  };
  double from_nm = 0.0, step_nm = 1.0;
  std::vector<Point> points;  ///< at least one

  Point at(double nm) const;
};

/// By what a probe's saturation error is modelled: the same documents that the station computes with.
struct SaturationStandard {
  BloodGrid blood;
  std::function<double(double ratio)> displayed;           ///< percent that a monitor shows at R
  std::function<double(double saturation)> ratio_showing;  ///< R at which it shows so many percent
  LineShape red, infrared;                                 ///< nominal lines of the probe's coded bin, at 25 C
};

/// The nominal line of this width and skew whose centroid above 1 % of its peak stands at `centroid_nm`.
LineShape nominal_line(double centroid_nm, double width_nm, double skew);

/// True modelled saturation error of a probe in points, at `saturation` percent: the nest at 25 C, standard drive, both
/// lines above 1 % of their peaks inside the windows of the colours, and the red LED's secondary line from 800 to
/// 1000 nm. Not a number where a colour does not shine or what is driven as red is not red.
double true_saturation_error(const Probe& probe, double saturation, const SaturationStandard& standard);

}  // namespace probewright::emulated
