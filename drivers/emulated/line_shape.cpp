#include "drivers/emulated/line_shape.h"

#include <algorithm>
#include <cmath>
#include <numbers>

namespace probewright::emulated {
namespace {

constexpr double ln2 = std::numbers::ln2;
constexpr double straight = 1e-7;  ///< a skew below this is a Gaussian to double precision

bool is_straight(double skew) { return std::abs(skew) < straight; }

/// Centroid minus peak, in units of the width.
double centroid_shift(double skew) {
  return is_straight(skew) ? 0.0 : std::expm1(3.0 * skew * skew / (4.0 * ln2)) / (2.0 * skew);
}

}  // namespace

double LineShape::at(double wavelength_nm) const {
  const double x = (wavelength_nm - peak_nm) / width_nm;
  if (is_straight(skew)) return std::exp(-4.0 * ln2 * x * x);
  const double argument = 1.0 + 2.0 * skew * x;
  if (argument <= 0.0) return 0.0;
  const double y = std::log(argument) / skew;
  return std::exp(-ln2 * y * y);
}

double LineShape::centroid_nm() const { return peak_nm + width_nm * centroid_shift(skew); }

double LineShape::edge_nm(double level, int side) const {
  const double y = side * std::sqrt(-std::log(level) / ln2);
  const double x = is_straight(skew) ? 0.5 * y : std::expm1(skew * y) / (2.0 * skew);
  return peak_nm + width_nm * x;
}

double LineShape::half_low_nm() const { return edge_nm(0.5, -1); }
double LineShape::half_high_nm() const { return edge_nm(0.5, +1); }
double LineShape::fwhm_nm() const { return is_straight(skew) ? width_nm : width_nm * std::sinh(skew) / skew; }

double LineShape::area_nm() const {
  return 0.5 * width_nm * std::sqrt(std::numbers::pi / ln2) * std::exp(skew * skew / (4.0 * ln2));
}

LineShape line_of(double centroid_nm, double fwhm_nm, double skew) {
  LineShape line{0.0, is_straight(skew) ? fwhm_nm : fwhm_nm * skew / std::sinh(skew), skew};
  line.peak_nm = centroid_nm - line.centroid_nm();
  return line;
}

double centroid_above_nm(const LineShape& line, double threshold, double window_low_nm, double window_high_nm) {
  const double low = std::max(line.edge_nm(threshold, -1), window_low_nm);
  const double high = std::min(line.edge_nm(threshold, +1), window_high_nm);
  constexpr int intervals = 1024;
  const double step = (high - low) / intervals;
  double area = 0.0, moment = 0.0;
  for (int i = 0; i <= intervals; ++i) {
    const double wavelength = low + step * i;
    const double weight = i == 0 || i == intervals ? 1.0 : (i % 2 == 1 ? 4.0 : 2.0);
    const double light = weight * line.at(wavelength);
    area += light;
    moment += light * (wavelength - line.peak_nm);
  }
  return line.peak_nm + moment / area;
}

}  // namespace probewright::emulated
