#include "station/measure/ratio_line.h"

#include <cmath>
#include <string>
#include <vector>

namespace probewright::measure {

Result<RatioLine> fit_ratio_line(std::span<const RatioPoint> points) {
  const auto n = static_cast<double>(points.size());
  double mean = 0.0, spread = 0.0;
  for (const RatioPoint& p : points) mean += p.certified / n;
  for (const RatioPoint& p : points) spread += (p.certified - mean) * (p.certified - mean);
  if (points.size() < 2 || !(spread > 1e-12))
    return Problem{"ratio_line_points", "", {{"count", std::to_string(points.size())}}};
  RatioLine line;
  const auto slope_gain = [&](const RatioPoint& p) { return (p.certified - mean) / spread; };
  const auto offset_gain = [&](const RatioPoint& p) { return 1.0 / n - mean * slope_gain(p); };
  for (const RatioPoint& p : points) {
    line.slope += slope_gain(p) * p.measured, line.offset += offset_gain(p) * p.measured;
    line.slope_u = std::hypot(line.slope_u, slope_gain(p) * p.noise_u);
    line.offset_u = std::hypot(line.offset_u, offset_gain(p) * p.noise_u);
  }
  for (const RatioPoint& p : points) {
    const double distance = std::abs(p.measured - line.offset - line.slope * p.certified);
    if (distance < line.nonlinearity) continue;
    line.nonlinearity = distance, line.nonlinearity_u = 0.0;
    for (const RatioPoint& other : points) {
      const double hat = offset_gain(other) + slope_gain(other) * p.certified;
      const double gain = (&other == &p ? 1.0 : 0.0) - hat;
      line.nonlinearity_u = std::hypot(line.nonlinearity_u, gain * other.noise_u);
    }
  }
  return line;
}

}  // namespace probewright::measure
