#include "drivers/emulated/true_saturation.h"

#include <algorithm>
#include <cmath>
#include <limits>

#include "drivers/emulated/colour_windows.h"

namespace probewright::emulated {
namespace {

/// Light over a stretch of wavelengths, as the detector weighs it, and what blood takes of it.
struct Absorbed {
  double light = 0.0, taken = 0.0;
  Absorbed& operator+=(const Absorbed& other) {
    light += other.light, taken += other.taken;
    return *this;
  }
  double mean() const { return taken / light; }
};

/// Simpson's rule on 256 intervals; `power` is that of the whole line.
Absorbed absorbed(const LineShape& line, double power, double low_nm, double high_nm, double part,
                  const BloodGrid& blood) {
  constexpr int intervals = 256;
  const double step = (high_nm - low_nm) / intervals, density = power / line.area_nm() * step / 3.0;
  Absorbed sum;
  for (int i = 0; i <= intervals; ++i) {
    const double weight = i == 0 || i == intervals ? 1.0 : (i % 2 == 1 ? 4.0 : 2.0);
    const double nm = low_nm + step * i;
    const BloodGrid::Point at = blood.at(nm);
    const double light = weight * density * line.at(nm) * at.responsivity;
    sum += {light, light * (part * at.oxygenated + (1.0 - part) * at.deoxygenated)};
  }
  return sum;
}

Absorbed absorbed_above(const LineShape& line, double power, Window window, double part, const BloodGrid& blood) {
  const double low = std::max(line.edge_nm(centroid_threshold, -1), window.low_nm);
  const double high = std::min(line.edge_nm(centroid_threshold, +1), window.high_nm);
  return absorbed(line, power, low, high, part, blood);
}

double mean_of_red(const Probe& probe, double part, const BloodGrid& blood) {
  const LineShape& line = probe.red.line;
  Absorbed sum = absorbed_above(line, 1.0 - probe.secondary_power, red_window, part, blood);
  const Window window = secondary_window;
  sum += absorbed(line, 1.0 - probe.secondary_power, window.low_nm, window.high_nm, part, blood);
  sum += absorbed(probe.secondary_line, probe.secondary_power, window.low_nm, window.high_nm, part, blood);
  return sum.mean();
}

}  // namespace

BloodGrid::Point BloodGrid::at(double nm) const {
  const double place = std::clamp((nm - from_nm) / step_nm, 0.0, static_cast<double>(points.size() - 1));
  const auto i = static_cast<std::size_t>(place);
  const Point &low = points[i], &high = points[std::min(i + 1, points.size() - 1)];
  const double part = place - static_cast<double>(i);
  return {std::lerp(low.oxygenated, high.oxygenated, part), std::lerp(low.deoxygenated, high.deoxygenated, part),
          std::lerp(low.responsivity, high.responsivity, part)};
}

LineShape nominal_line(double centroid_nm, double width_nm, double skew) {
  LineShape line{centroid_nm, width_nm, skew};
  constexpr double everywhere = 1e6;
  line.peak_nm += centroid_nm - centroid_above_nm(line, centroid_threshold, -everywhere, everywhere);
  return line;
}

double true_saturation_error(const Probe& probe, double saturation, const SaturationStandard& standard) {
  const bool as_driven = probe.red.colour == LedColour::red && shines(probe.red) && shines(probe.infrared);
  if (!as_driven) return std::numeric_limits<double>::quiet_NaN();
  const double part = saturation / 100.0;
  const BloodGrid& blood = standard.blood;
  constexpr Window everywhere{-1e6, 1e6};
  const double red =
      mean_of_red(probe, part, blood) / absorbed_above(standard.red, 1.0, everywhere, part, blood).mean();
  const double infrared = absorbed_above(probe.infrared.line, 1.0, infrared_window, part, blood).mean() /
                          absorbed_above(standard.infrared, 1.0, everywhere, part, blood).mean();
  return standard.displayed(standard.ratio_showing(saturation) * red / infrared) - saturation;
}

}  // namespace probewright::emulated
