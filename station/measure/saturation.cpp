#include "station/measure/saturation.h"

#include <algorithm>
#include <cmath>
#include <numbers>

namespace probewright::measure {
namespace {

double polynomial(const std::vector<double>& c, double x) {
  double sum = 0.0;
  for (auto k = c.rbegin(); k != c.rend(); ++k) sum = sum * x + *k;
  return sum;
}

double between(const std::vector<Curve::Point>& points, double ratio) {
  std::size_t i = 1;
  while (i + 1 < points.size() && points[i].ratio < ratio) ++i;
  const Curve::Point &low = points[i - 1], &high = points[i];
  return low.saturation + (ratio - low.ratio) / (high.ratio - low.ratio) * (high.saturation - low.saturation);
}

double relative_at(const std::vector<ResponsePoint>& table, double nm) {
  if (table.empty()) return 1.0;
  if (nm <= table.front().wavelength_nm) return table.front().relative;
  if (nm >= table.back().wavelength_nm) return table.back().relative;
  std::size_t i = 1;
  while (table[i].wavelength_nm < nm) ++i;
  const ResponsePoint &low = table[i - 1], &high = table[i];
  const double part = (nm - low.wavelength_nm) / (high.wavelength_nm - low.wavelength_nm);
  return low.relative + part * (high.relative - low.relative);
}

double line_at(const LineShape& shape, double from_peak_nm) {
  const double x = 2.0 * from_peak_nm / shape.width_nm;
  double u = x;
  if (std::abs(shape.skew) > 1e-9) {
    const double argument = 1.0 + shape.skew * x;
    if (!(argument > 0.0)) return 0.0;
    u = std::log(argument) / shape.skew;
  }
  return std::exp(-std::numbers::ln2 * u * u);
}

/// Part of the sample's own interval, and of a cut one at either end, that counts to it: weights of the trapezoid rule
/// on [from, to] with straight lines between samples.
std::vector<double> trapezoid_weights(const std::vector<double>& axis, double from_nm, double to_nm) {
  std::vector<double> weights(axis.size(), 0.0);
  for (std::size_t i = 1; i < axis.size(); ++i) {
    const double left = axis[i - 1], right = axis[i], gap = right - left;
    const double from = std::max(left, from_nm), to = std::min(right, to_nm);
    if (!(to > from)) continue;
    const double middle = (0.5 * (from + to) - left) / gap;
    weights[i - 1] += (to - from) * (1.0 - middle), weights[i] += (to - from) * middle;
  }
  return weights;
}

/// How far R may be wrong, relatively, before the curve says something else: d(error)/d(ln R) by a small step.
std::optional<double> points_per_log_ratio(const Curve& curve, double ratio) {
  constexpr double step = 1e-4;
  const auto high = curve.saturation_at(ratio * (1.0 + step)), low = curve.saturation_at(ratio * (1.0 - step));
  if (!high || !low) return std::nullopt;
  return (*high - *low) / (2.0 * step);
}

std::optional<double> ratio_of_probe(const PerBand<Absorption>& measured, const PerBand<Absorption>& nominal,
                                     double saturation, const SaturationModel& model) {
  const auto at_nominal = model.curve.ratio_at(saturation);
  if (!at_nominal) return std::nullopt;
  const double s = saturation / 100.0;
  const double red = measured.red.mean(s) / nominal.red.mean(s);
  const double infrared = measured.infrared.mean(s) / nominal.infrared.mean(s);
  return *at_nominal * red / infrared;
}

}  // namespace

std::optional<double> Curve::saturation_at(double ratio) const {
  if (!(ratio >= from_ratio && ratio <= to_ratio)) return std::nullopt;
  return coefficients.empty() ? between(points, ratio) : polynomial(coefficients, ratio);
}

std::optional<double> Curve::ratio_at(double saturation) const {
  double low = from_ratio, high = to_ratio;
  const auto most = saturation_at(low), least = saturation_at(high);
  if (!most || !least || saturation > *most || saturation < *least) return std::nullopt;
  for (int halving = 0; halving < 60; ++halving) {
    const double middle = 0.5 * (low + high);
    (*saturation_at(middle) > saturation ? low : high) = middle;
  }
  return 0.5 * (low + high);
}

bool Curve::falls() const {
  constexpr int places = 1000;
  const auto at = [this](int i) { return saturation_at(from_ratio + (to_ratio - from_ratio) * i / places); };
  auto before = at(0);
  for (int i = 1; i < places; ++i) {
    const auto here = at(i);
    if (!before || !here || !(*here < *before)) return false;
    before = here;
  }
  return true;
}

double Absorption::area() const {
  double sum = 0.0;
  for (const Sample& s : samples) sum += s.weight;
  return sum;
}

double Absorption::mean(double part) const {
  double sum = 0.0;
  for (const Sample& s : samples)
    sum += s.weight * (part * s.extinction.oxygenated + (1.0 - part) * s.extinction.deoxygenated);
  return sum / area();
}

double Absorption::mean_u(double part) const {
  const double middle = mean(part), whole = area();
  double variance = 0.0;
  for (const Sample& s : samples) {
    const double gain = (part * s.extinction.oxygenated + (1.0 - part) * s.extinction.deoxygenated - middle) / whole;
    variance += gain * gain * s.variance;
  }
  return std::sqrt(variance);
}

void Absorption::add(const Absorption& other, double times) {
  for (const Sample& s : other.samples) samples.push_back({times * s.weight, times * times * s.variance, s.extinction});
}

Absorption absorption_of(const Spectrum& spectrum, double from_nm, double to_nm, double shift_nm,
                         const SaturationModel& model) {
  const ExtinctionTable& table = *model.haemoglobin;
  const double from = std::max(from_nm, table.from_nm() + shift_nm), to = std::min(to_nm, table.to_nm() + shift_nm);
  const auto weights = trapezoid_weights(spectrum.wavelength_nm, from, to);
  Absorption out;
  for (std::size_t i = 0; i < weights.size(); ++i) {
    if (weights[i] == 0.0) continue;
    // A sample just beyond the end weighs in by the line to its neighbour; the table's last row stands for it.
    const double nm = std::clamp(spectrum.wavelength_nm[i] - shift_nm, table.from_nm(), table.to_nm());
    const double w = weights[i] * relative_at(model.responsivity, nm);
    out.samples.push_back({w * spectrum.power[i], w * w * spectrum.variance[i], table.at(nm).value()});
  }
  return out;
}

Absorption nominal_absorption(const LineShape& shape, double centroid_nm, double slit_nm, double threshold,
                              const SaturationModel& model) {
  constexpr double step_nm = 0.2;
  // A slit adds to the width in quadrature; the half-power width of the shape is D sinh(b)/b.
  const double b = shape.skew, half_power = shape.width_nm * (std::abs(b) > 1e-9 ? std::sinh(b) / b : 1.0);
  const LineShape seen{shape.width_nm * std::sqrt(1.0 + slit_nm * slit_nm / (half_power * half_power)), b};
  const int reach = static_cast<int>(4.0 * seen.width_nm / step_nm);
  Spectrum line;
  double area = 0.0, moment = 0.0;
  for (int i = -reach; i <= reach; ++i) {
    const double nm = step_nm * i, power = line_at(seen, nm);
    if (power < threshold) continue;
    line.wavelength_nm.push_back(nm), line.power.push_back(power), line.variance.push_back(0.0);
    area += power, moment += power * nm;
  }
  for (double& nm : line.wavelength_nm) nm += centroid_nm - moment / area;
  return absorption_of(line, line.wavelength_nm.front(), line.wavelength_nm.back(), 0.0, model);
}

std::optional<double> saturation_error_of(const PerBand<Absorption>& measured, const PerBand<Absorption>& nominal,
                                          double saturation, const SaturationModel& model) {
  const auto ratio = ratio_of_probe(measured, nominal, saturation, model);
  const auto displayed = ratio ? model.curve.saturation_at(*ratio) : std::nullopt;
  if (!displayed) return std::nullopt;
  return *displayed - saturation;
}

std::optional<double> saturation_error_noise(const PerBand<Absorption>& measured, const PerBand<Absorption>& nominal,
                                             double saturation, const SaturationModel& model) {
  const auto ratio = ratio_of_probe(measured, nominal, saturation, model);
  const auto steepness = ratio ? points_per_log_ratio(model.curve, *ratio) : std::nullopt;
  if (!steepness) return std::nullopt;
  const double s = saturation / 100.0;
  return std::abs(*steepness) * std::hypot(measured.red.mean_u(s) / measured.red.mean(s),
                                           measured.infrared.mean_u(s) / measured.infrared.mean(s));
}

}  // namespace probewright::measure
