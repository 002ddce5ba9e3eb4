#include "station/measure/crosstalk.h"

#include <cmath>
#include <optional>
#include <string>

namespace probewright::measure {
namespace {

/// Slope over intercept of a weighted straight line, with its standard uncertainty.
class PatternLine {
 public:
  void add(double at, double relative, double u) {
    constexpr double least_u = 1e-9;  // noise-free signals still have weights
    const double w = 1.0 / (u * u + least_u * least_u);
    w_ += w, wt_ += w * at, wtt_ += w * at * at, wy_ += w * relative, wty_ += w * at * relative;
  }
  std::optional<Share> slope_over_intercept() const {
    const double determinant = w_ * wtt_ - wt_ * wt_;
    if (!(determinant > 1e-9 * w_ * wtt_)) return std::nullopt;
    const double intercept = (wtt_ * wy_ - wt_ * wty_) / determinant, slope = (w_ * wty_ - wt_ * wy_) / determinant;
    if (!(intercept > 0.0)) return std::nullopt;
    const double part = slope / intercept;
    // Variances wtt/det and w/det, covariance -wt/det.
    const double variance = (w_ + part * part * wtt_ + 2.0 * part * wt_) / determinant;
    return Share{part, std::sqrt(variance) / intercept};
  }

 private:
  double w_ = 0.0, wt_ = 0.0, wtt_ = 0.0, wy_ = 0.0, wty_ = 0.0;
};

}  // namespace

Result<Crosstalk> crosstalk_of(std::span<const ModulationPoint> points, double infrared_over_red, Share secondary) {
  PatternLine red, infrared;
  for (const ModulationPoint& p : points) {
    const double ratio = p.certified.red / p.certified.infrared;
    red.add(1.0 / ratio, p.measured.red / p.certified.red, p.noise_u.red / p.certified.red);
    infrared.add(ratio, p.measured.infrared / p.certified.infrared, p.noise_u.infrared / p.certified.infrared);
  }
  if (points.size() < 3) return Problem{"crosstalk_points", "", {{"count", std::to_string(points.size())}}};
  const auto of_red = red.slope_over_intercept(), of_infrared = infrared.slope_over_intercept();
  if (!of_red || !of_infrared || !(infrared_over_red > 0.0)) return Problem{"crosstalk_levels", ""};

  // Red: slope over intercept is (s + x q)/(1 - s).
  const double s = secondary.value, mixed = of_red->value * (1.0 - s) - s;
  Crosstalk out;
  double q = infrared_over_red;
  for (int round = 0; round < 8; ++round) {
    const double red_noise = of_red->u * (1.0 - s) / q, red_secondary = secondary.u * (1.0 + of_red->value) / q;
    const double infrared_noise = of_infrared->u * q;
    const double red_weight = 1.0 / (red_noise * red_noise + red_secondary * red_secondary);
    const double infrared_weight = 1.0 / (infrared_noise * infrared_noise);
    const double part = red_weight / (red_weight + infrared_weight);
    out.share = part * mixed / q + (1.0 - part) * of_infrared->value * q;
    out.noise_u = std::hypot(part * red_noise, (1.0 - part) * infrared_noise);
    out.secondary_u = part * red_secondary;
    q = (infrared_over_red - out.share) / (1.0 - out.share * infrared_over_red);
    if (!(q > 0.0)) return Problem{"crosstalk_levels", ""};
  }
  return out;
}

}  // namespace probewright::measure
