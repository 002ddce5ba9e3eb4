#pragma once
#include <span>

#include "station/base/result.h"

namespace probewright::measure {

/// One set point: R by the certificate, R as measured, and the measured one's standard uncertainty from noise.
struct RatioPoint {
  double certified = 0.0, measured = 0.0, noise_u = 0.0;
};

/// The straight line measured = offset + slope * certified over the set points.
struct RatioLine {
  double slope = 0.0, slope_u = 0.0;
  double offset = 0.0, offset_u = 0.0;
  double nonlinearity = 0.0, nonlinearity_u = 0.0;  ///< largest distance of a point from the line, a magnitude
};

/// Least squares, all points alike; uncertainties are the points' noise through the fit's own gains.
/// Errors: ratio_line_points (under two points, or all at one ratio).
/// Source: straight-line regression, any text.
Result<RatioLine> fit_ratio_line(std::span<const RatioPoint> points);

}  // namespace probewright::measure
