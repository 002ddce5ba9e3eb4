#include "station/measure/spectrum.h"

#include <algorithm>
#include <cmath>

#include "station/base/numbers.h"
#include "station/measure/least_squares.h"

namespace probewright::measure {
namespace {

Problem problem(std::string_view id, std::initializer_list<std::pair<std::string, std::string>> arguments = {}) {
  return {id, "", arguments};
}

/// The samples of one window, as indices [first, last] into the spectrum.
struct Part {
  const Spectrum& all;
  std::size_t first = 0, last = 0;
  std::size_t size() const { return last - first + 1; }
  double nm(std::size_t i) const { return all.wavelength_nm[i]; }
  double power(std::size_t i) const { return all.power[i]; }
  double variance(std::size_t i) const { return all.variance[i]; }
};

std::optional<Problem> not_a_spectrum(const Spectrum& s) {
  const std::size_t n = s.wavelength_nm.size();
  if (s.power.size() != n || s.variance.size() != n) return problem("spectrum_axis", {{"reason", "lengths differ"}});
  for (std::size_t i = 0; i < n; ++i) {
    if (!std::isfinite(s.wavelength_nm[i]) || !std::isfinite(s.power[i]) || !std::isfinite(s.variance[i]))
      return problem("spectrum_axis", {{"reason", "a value is not finite"}});
    if (i > 0 && !(s.wavelength_nm[i] > s.wavelength_nm[i - 1]))
      return problem("spectrum_axis", {{"reason", "the wavelength does not rise at row " + std::to_string(i + 1)}});
  }
  return std::nullopt;
}

std::optional<Part> part_within(const Spectrum& s, Window window) {
  const auto& axis = s.wavelength_nm;
  const auto from = std::lower_bound(axis.begin(), axis.end(), window.from_nm);
  const auto to = std::upper_bound(axis.begin(), axis.end(), window.to_nm);
  if (to - from < 2) return std::nullopt;
  return Part{s, static_cast<std::size_t>(from - axis.begin()), static_cast<std::size_t>(to - axis.begin()) - 1};
}

/// Mean over 5, 3 or 1 samples, the most that span at most 2.5 nm: a smooth must not be wider than the line's detail.
std::vector<double> smooth_of(const Part& part) {
  constexpr double widest_nm = 2.5;
  const double step = (part.nm(part.last) - part.nm(part.first)) / static_cast<double>(part.size() - 1);
  const std::size_t reach = 4 * step <= widest_nm ? 2 : (2 * step <= widest_nm ? 1 : 0);
  std::vector<double> smooth;
  smooth.reserve(part.size());
  for (std::size_t i = part.first; i <= part.last; ++i) {
    const std::size_t near = std::min({reach, i - part.first, part.last - i});
    double sum = 0.0;
    for (std::size_t k = i - near; k <= i + near; ++k) sum += part.power(k);
    smooth.push_back(sum / static_cast<double>(2 * near + 1));
  }
  return smooth;
}

/// One end of the run: the outermost sample inside, and where the smooth crosses the threshold beyond it.
struct End {
  std::size_t sample = 0;
  double crossing_nm = 0.0;  ///< at the sample itself when the axis ends first
  bool ended_by_axis = false;
};

/// Walks from the peak outwards while the smooth stays at or above `level`.
End end_of_run(const Part& part, std::span<const double> smooth, std::size_t peak, double level, int direction) {
  std::size_t i = peak;
  const std::size_t stop = direction < 0 ? part.first : part.last;
  while (i != stop) {
    const std::size_t next = direction < 0 ? i - 1 : i + 1;
    const double here = smooth[i - part.first], there = smooth[next - part.first];
    if (there < level) {
      const double step = (here - level) / (here - there);
      return {i, part.nm(i) + step * (part.nm(next) - part.nm(i)), false};
    }
    i = next;
  }
  return {i, part.nm(i), true};
}

/// Weight of each sample of a run in the integral over it: trapezoids, and at each end the part of a trapezoid up to
/// the crossing. Sum of weight * power is the integral; weights reach one sample beyond the run where it ends between
/// two.
struct Weights {
  std::size_t first = 0;
  std::vector<double> of;
};

Weights integral_weights(const Part& part, const End& left, const End& right) {
  const std::size_t first = left.ended_by_axis ? left.sample : left.sample - 1;
  const std::size_t last = right.ended_by_axis ? right.sample : right.sample + 1;
  Weights weights{first, std::vector<double>(last - first + 1, 0.0)};
  const auto add = [&](std::size_t i, double w) { weights.of[i - first] += w; };
  for (std::size_t i = left.sample; i < right.sample; ++i) {
    const double half = 0.5 * (part.nm(i + 1) - part.nm(i));
    add(i, half), add(i + 1, half);
  }
  const auto add_end = [&](std::size_t inside, std::size_t outside, double crossing_nm) {
    const double gap = std::abs(part.nm(outside) - part.nm(inside)), piece = std::abs(crossing_nm - part.nm(inside));
    add(inside, piece * (1.0 - 0.5 * piece / gap)), add(outside, 0.5 * piece * piece / gap);
  };
  if (!left.ended_by_axis) add_end(left.sample, first, left.crossing_nm);
  if (!right.ended_by_axis) add_end(right.sample, last, right.crossing_nm);
  return weights;
}

struct Integral {
  double area = 0.0, area_variance = 0.0, mean_nm = 0.0, mean_variance = 0.0;
};

Integral integrate(const Part& part, const Weights& weights) {
  Integral out;
  double moment = 0.0;
  for (std::size_t k = 0; k < weights.of.size(); ++k) {
    const std::size_t i = weights.first + k;
    out.area += weights.of[k] * part.power(i);
    moment += weights.of[k] * part.nm(i) * part.power(i);
    out.area_variance += weights.of[k] * weights.of[k] * part.variance(i);
  }
  out.mean_nm = moment / out.area;
  for (std::size_t k = 0; k < weights.of.size(); ++k) {
    const std::size_t i = weights.first + k;
    const double gain = weights.of[k] * (part.nm(i) - out.mean_nm) / out.area;
    out.mean_variance += gain * gain * part.variance(i);
  }
  return out;
}

struct Peak {
  double nm = 0.0, nm_u = 0.0, power = 0.0, power_u = 0.0;
};

/// Three samples around the highest: the parabola through them, for axes too coarse for a cubic.
Peak parabola_peak(const Part& part, std::size_t top) {
  const double x0 = part.nm(top - 1), x1 = part.nm(top), x2 = part.nm(top + 1);
  const double y0 = part.power(top - 1), y1 = part.power(top), y2 = part.power(top + 1);
  const double rise = (y1 - y0) / (x1 - x0), fall = (y2 - y1) / (x2 - x1), bend = (fall - rise) / (x2 - x0);
  const double noise = std::sqrt(part.variance(top));
  if (!(bend < 0.0)) return {x1, 0.5 * (x2 - x0), y1, noise};
  const double nm = std::clamp(0.5 * (x0 + x1) - 0.5 * rise / bend, x0, x2);
  const double power = y0 + rise * (nm - x0) + bend * (nm - x0) * (nm - x1);
  return {nm, noise / (std::abs(bend) * (x2 - x0)), power, noise};
}

/// Value at `x` of a quartic over the same samples as the peak's cubic, and its standard uncertainty for samples of
/// this variance. The cubic is right in place but too low by 0.3 %: it cannot follow how the top of a line rounds off.
struct Height {
  double value = 0.0, u = 0.0;
};
std::optional<Height> quartic_height(std::span<const double> positions, std::span<const double> values, double variance,
                                     double x) {
  constexpr std::size_t p = 5;
  if (positions.size() < p) return std::nullopt;
  std::vector<double> design;
  for (const double at : positions)
    for (std::size_t k = 0; k < p; ++k) design.push_back(std::pow(at, static_cast<double>(k)));
  const auto fit = fit_linear(design, p, values);
  if (!fit) return std::nullopt;
  Height out;
  double spread = 0.0;
  for (std::size_t i = 0; i < p; ++i) {
    out.value += fit->coefficients[i] * std::pow(x, static_cast<double>(i));
    for (std::size_t j = 0; j < p; ++j) spread += std::pow(x, static_cast<double>(i + j)) * fit->covariance_of(i, j);
  }
  // Five samples fit without residuals; the height is then as uncertain as one of them.
  const double scale = fit->noise_sd > 0.0 ? variance / (fit->noise_sd * fit->noise_sd) : 0.0;
  out.u = fit->noise_sd > 0.0 ? std::sqrt(std::max(0.0, scale * spread)) : std::sqrt(variance);
  return out;
}

/// Cubic over the contiguous samples whose smooth is at least 80 % of the smooth's maximum.
/// A parabola there is 0.2 nm off for the skewed line of an LED.
Peak cubic_peak(const Part& part, std::span<const double> smooth, std::size_t top) {
  const double level = 0.8 * smooth[top - part.first];
  const std::size_t first = end_of_run(part, smooth, top, level, -1).sample;
  const std::size_t last = end_of_run(part, smooth, top, level, 1).sample;
  if (last - first + 1 < 5) return parabola_peak(part, top);
  const double middle = 0.5 * (part.nm(first) + part.nm(last)), half = 0.5 * (part.nm(last) - part.nm(first));
  std::vector<double> design, positions, values;
  double variance = 0.0;
  for (std::size_t i = first; i <= last; ++i) {
    const double x = (part.nm(i) - middle) / half;
    positions.push_back(x);
    for (const double term : {1.0, x, x * x, x * x * x}) design.push_back(term);
    values.push_back(part.power(i));
    variance += part.variance(i) / static_cast<double>(last - first + 1);
  }
  const auto fit = fit_linear(design, 4, values);
  if (!fit) return parabola_peak(part, top);
  const auto& c = fit->coefficients;
  // Zero of c1 + 2 c2 x + 3 c3 x^2 where the second derivative is negative.
  const double root = c[2] * c[2] - 3.0 * c[1] * c[3];
  if (!(root > 0.0) || !(c[2] < 0.0)) return parabola_peak(part, top);
  const double x = c[1] / (-c[2] + std::sqrt(root));  // the form without cancellation; c3 may be 0
  if (!(std::abs(x) <= 1.0)) return parabola_peak(part, top);
  const double bend = std::abs(2.0 * c[2] + 6.0 * c[3] * x);
  // The fit's covariance belongs to its residuals, which hold misfit as well as noise: scaled to the noise of the
  // samples unless the residuals are larger.
  const double scale = fit->noise_sd > 0.0 ? std::max(1.0, variance / (fit->noise_sd * fit->noise_sd)) : 0.0;
  const double slope_terms[4] = {0.0, 1.0, 2.0 * x, 3.0 * x * x};
  double slope_variance = 0.0;
  for (std::size_t i = 0; i < 4; ++i)
    for (std::size_t j = 0; j < 4; ++j) slope_variance += slope_terms[i] * slope_terms[j] * fit->covariance_of(i, j);
  const Height height = quartic_height(positions, values, variance, x)
                            .value_or(Height{c[0] + x * (c[1] + x * (c[2] + x * c[3])), std::sqrt(variance)});
  return {middle + half * x, half * std::sqrt(scale * slope_variance) / bend, height.value, height.u};
}

struct HalfPower {
  double nm = 0.0, nm_u = 0.0;
  double nm_per_level = 0.0;  ///< slope of the flank, for the error of the peak's level
};

/// Samples of one flank with levels within `reach` of half the peak.
struct Flank {
  std::vector<double> levels, wavelengths_nm;  ///< levels less 0.5
  double variance = 0.0;                       ///< mean, of the levels

  bool crosses() const {
    if (levels.size() < 3) return false;
    const auto [least, most] = std::minmax_element(levels.begin(), levels.end());
    return *least <= 0.0 && *most >= 0.0;
  }
};

Flank flank_of(const Part& part, std::size_t from, std::size_t to, double peak_power, double reach) {
  Flank flank;
  for (std::size_t i = from; i <= to; ++i) {
    const double level = part.power(i) / peak_power - 0.5;
    if (std::abs(level) > reach) continue;
    flank.levels.push_back(level), flank.wavelengths_nm.push_back(part.nm(i));
    flank.variance += part.variance(i) / (peak_power * peak_power);
  }
  if (!flank.levels.empty()) flank.variance /= static_cast<double>(flank.levels.size());
  return flank;
}

/// Wavelength as a quadratic of the level, at half the peak. A straight line would be 0.02 nm off on each side.
std::optional<HalfPower> fit_flank(const Flank& flank) {
  const std::size_t n = flank.levels.size();
  const double middle_nm = flank.wavelengths_nm[n / 2];
  std::vector<double> design, wavelengths;
  for (std::size_t i = 0; i < n; ++i) {
    for (const double term : {1.0, flank.levels[i], flank.levels[i] * flank.levels[i]}) design.push_back(term);
    wavelengths.push_back(flank.wavelengths_nm[i] - middle_nm);
  }
  const auto fit = fit_linear(design, 3, wavelengths);
  if (!fit) return std::nullopt;
  // The noise is one of levels, which the slope turns into one of wavelengths; of the fit only its gain is used.
  const double gain = fit->noise_sd > 0.0 ? std::sqrt(fit->variance(0)) / fit->noise_sd : 1.0;
  const double slope = fit->coefficients[1];
  return HalfPower{middle_nm + fit->coefficients[0], gain * std::abs(slope) * std::sqrt(flank.variance), slope};
}

/// The straight line between the two samples around the crossing, for axes that hold no more.
std::optional<HalfPower> between_samples(const Part& part, std::size_t top, std::size_t outside, double peak_power) {
  for (std::size_t i = top; i != outside;) {
    const std::size_t next = outside < top ? i - 1 : i + 1;
    const double here = part.power(i) / peak_power, there = part.power(next) / peak_power;
    if (here >= 0.5 && there < 0.5) {
      const double slope = (part.nm(next) - part.nm(i)) / (there - here);
      const double noise = std::sqrt(part.variance(i)) / peak_power;
      return HalfPower{part.nm(i) + slope * (0.5 - here), std::abs(slope) * noise, slope};
    }
    i = next;
  }
  return std::nullopt;
}

/// Where a flank crosses half of the peak: wavelength fitted against level from 38 to 62 %, wider only where the axis
/// is too coarse to put three samples there. Nothing when the axis ends before the flank does.
std::optional<HalfPower> half_power(const Part& part, std::span<const double> smooth, std::size_t top,
                                    double peak_power, int direction) {
  const End low = end_of_run(part, smooth, top, 0.2 * peak_power, direction);
  const std::size_t outside = low.ended_by_axis ? low.sample : (direction < 0 ? low.sample - 1 : low.sample + 1);
  for (const double reach : {0.12, 0.18, 0.25, 0.32}) {
    const Flank flank = flank_of(part, std::min(top, outside), std::max(top, outside), peak_power, reach);
    if (flank.crosses()) return fit_flank(flank);
  }
  return between_samples(part, top, outside, peak_power);
}

double mean_noise(const Part& part) {
  double sum = 0.0;
  for (std::size_t i = part.first; i <= part.last; ++i) sum += part.variance(i);
  return std::sqrt(sum / static_cast<double>(part.size()));
}

/// What noise of the smooth does to the centroid by moving one end of the run: the end moves by noise / slope, and
/// carries the light of the threshold's level with it. Slope at that level as that of a Gaussian of the line's width.
double end_noise(const Part& part, const End& end, const Line& line, const Integral& integral, double threshold) {
  if (end.ended_by_axis) return 0.0;
  const double sigma_nm = line.width_nm / 2.3548200450309493, noise = std::sqrt(part.variance(end.sample) / 3.0);
  const double light_per_noise = sigma_nm / std::sqrt(-2.0 * std::log(threshold));
  return std::abs(end.crossing_nm - integral.mean_nm) * light_per_noise * noise / integral.area;
}

double response_at(const std::vector<ResponsePoint>& table, double nm) {
  const auto above = std::lower_bound(table.begin(), table.end(), nm,
                                      [](const ResponsePoint& p, double x) { return p.wavelength_nm < x; });
  if (above == table.begin()) return table.front().relative;
  if (above == table.end()) return table.back().relative;
  const auto below = above - 1;
  const double part = (nm - below->wavelength_nm) / (above->wavelength_nm - below->wavelength_nm);
  return below->relative + part * (above->relative - below->relative);
}

double polynomial(const std::vector<double>& c, double x) {
  double sum = 0.0;
  for (auto k = c.rbegin(); k != c.rend(); ++k) sum = sum * x + *k;
  return sum;
}

}  // namespace

Result<Line> find_line(const Spectrum& spectrum, const LineRules& rules) {
  if (auto wrong = not_a_spectrum(spectrum)) return *wrong;
  const auto part = part_within(spectrum, line_window(rules.band));
  if (!part || part->size() < 8) return problem("spectrum_axis", {{"reason", "under 8 samples in the line's window"}});
  const auto smooth = smooth_of(*part);
  const auto highest = std::max_element(smooth.begin(), smooth.end());
  const std::size_t top = part->first + static_cast<std::size_t>(highest - smooth.begin());
  // A thousandth of what shines elsewhere is the foot of another line, not a line.
  const double brightest = *std::max_element(spectrum.power.begin(), spectrum.power.end());
  if (!(*highest > 5.0 * mean_noise(*part)) || !(*highest > 1e-3 * brightest) || !(*highest > 0.0))
    return problem("spectrum_no_peak");
  if (top == part->first || top == part->last) return problem("spectrum_cut_off");

  const Peak peak = cubic_peak(*part, smooth, top);
  const auto left = half_power(*part, smooth, top, peak.power, -1);
  const auto right = half_power(*part, smooth, top, peak.power, 1);
  if (!left || !right) return problem("spectrum_cut_off");

  Line line;
  line.peak_nm = peak.nm, line.peak_u = peak.nm_u, line.peak_power = peak.power;
  line.half_power_centre_nm = 0.5 * (left->nm + right->nm);
  const double level_u = 0.5 * peak.power_u / peak.power;  // an error of the peak moves the half level
  line.half_power_centre_u = std::hypot(0.5 * left->nm_u, 0.5 * right->nm_u,
                                        0.5 * level_u * std::abs(left->nm_per_level + right->nm_per_level));
  const double whole = right->nm - left->nm;
  if (!(whole > rules.slit_nm)) return problem("spectrum_no_peak");
  line.width_nm = std::sqrt(whole * whole - rules.slit_nm * rules.slit_nm);
  const double whole_u =
      std::hypot(left->nm_u, right->nm_u, level_u * std::abs(right->nm_per_level - left->nm_per_level));
  line.width_u = whole_u * whole / line.width_nm;

  const double level = rules.threshold * *highest;
  const bool all = rules.threshold <= 0.0;
  const End first = all ? End{part->first, part->nm(part->first), true} : end_of_run(*part, smooth, top, level, -1);
  const End last = all ? End{part->last, part->nm(part->last), true} : end_of_run(*part, smooth, top, level, 1);
  for (const End* end : {&first, &last})
    if (end->ended_by_axis) line.edge_level = std::max(line.edge_level, smooth[end->sample - part->first] / *highest);
  // A level like this at the end of the axis is either the line itself or a dark level that was not subtracted.
  constexpr double most_at_edge = 0.10;
  if (!all && line.edge_level > most_at_edge) return problem("spectrum_cut_off");
  const Integral integral = integrate(*part, integral_weights(*part, first, last));
  if (!(integral.area > 0.0)) return problem("spectrum_no_peak");
  line.centroid_nm = integral.mean_nm;
  line.run_from_nm = first.crossing_nm, line.run_to_nm = last.crossing_nm;
  const double end_u = all ? 0.0
                           : std::hypot(end_noise(*part, first, line, integral, rules.threshold),
                                        end_noise(*part, last, line, integral, rules.threshold));
  line.centroid_u = std::sqrt(integral.mean_variance + end_u * end_u);
  return line;
}

std::optional<Fraction> secondary_fraction(const Spectrum& spectrum) {
  if (not_a_spectrum(spectrum)) return std::nullopt;
  const auto& axis = spectrum.wavelength_nm;
  if (axis.empty() || axis.front() > secondary_window.from_nm || axis.back() < secondary_window.to_nm)
    return std::nullopt;
  const auto main = part_within(spectrum, line_window(Band::red)), band = part_within(spectrum, secondary_window);
  if (!main || !band) return std::nullopt;
  const auto whole = [](const Part& p) {
    return integrate(p, integral_weights(p, {p.first, p.nm(p.first), true}, {p.last, p.nm(p.last), true}));
  };
  const Integral line = whole(*main), hump = whole(*band);
  const double sum = line.area + hump.area;
  if (!(sum > 0.0) || !(line.area > 0.0)) return std::nullopt;
  const double from_hump = line.area / (sum * sum), from_line = hump.area / (sum * sum);
  return Fraction{hump.area / sum,
                  std::hypot(from_hump * std::sqrt(hump.area_variance), from_line * std::sqrt(line.area_variance))};
}

Result<Spectrum> spectrum_of(const SpectrumCapture& capture, const PhantomCertificate& certificate) {
  const double full = certificate.saturation_counts;
  const auto brightest = *std::max_element(capture.light.begin(), capture.light.end());
  const auto darkest_frame = *std::max_element(capture.dark.begin(), capture.dark.end());
  const double most = std::max(brightest, darkest_frame);
  if (capture.pixel_was_full || most >= clipped_from * full)
    return problem("spectrum_clipped", {{"percent", fixed(100.0 * most / full, 1)}});

  Spectrum out;
  double signal = 0.0;
  for (std::size_t i = 0; i < spectrometer_pixels; ++i) {
    const double nm = polynomial(certificate.wavelength_nm, static_cast<double>(i));
    const double counts = static_cast<double>(capture.light[i]) - static_cast<double>(capture.dark[i]);
    const double response = response_at(certificate.response, nm);
    // Shot noise of the light, read noise of both frames, rounding of both to whole counts.
    const double one_frame = std::max(0.0, counts) * certificate.counts_per_electron +
                             2.0 * certificate.read_noise_counts * certificate.read_noise_counts;
    const double variance = one_frame / std::max(1, capture.frames) + 2.0 / 12.0;
    signal = std::max(signal, counts);
    out.wavelength_nm.push_back(nm);
    out.power.push_back(counts / response);
    out.variance.push_back(variance / (response * response));
  }
  if (signal < too_dark_below * full)
    return problem("spectrum_too_dark", {{"percent", fixed(100.0 * signal / full, 1)}});
  return out;
}

double line_counts(const SpectrumCapture& capture, const PhantomCertificate& certificate) {
  const Window window = line_window(capture.band);
  double most = 0.0;
  for (std::size_t i = 0; i < spectrometer_pixels; ++i) {
    const double nm = polynomial(certificate.wavelength_nm, static_cast<double>(i));
    if (nm < window.from_nm || nm > window.to_nm) continue;
    most = std::max(most, static_cast<double>(capture.light[i]) - static_cast<double>(capture.dark[i]));
  }
  return most;
}

Spectrum without(Spectrum spectrum, const Spectrum& other, double times, Window window) {
  for (std::size_t i = 0; i < spectrum.power.size(); ++i) {
    const double nm = spectrum.wavelength_nm[i];
    if (nm < window.from_nm || nm > window.to_nm) continue;
    spectrum.power[i] -= times * other.power[i];
    spectrum.variance[i] += times * times * other.variance[i];
  }
  return spectrum;
}

double power_in(const Spectrum& spectrum, Window window) {
  const auto part = part_within(spectrum, window);
  if (!part) return 0.0;
  return integrate(*part, integral_weights(*part, {part->first, part->nm(part->first), true},
                                           {part->last, part->nm(part->last), true}))
      .area;
}

Result<Line> line_in(const Spectrum& spectrum, const SpectrumCapture& capture, const PhantomCertificate& certificate) {
  auto line = find_line(spectrum, {capture.band, standard_threshold, certificate.slit_nm});
  if (!line) return line.error();
  const double part = line_counts(capture, certificate) / certificate.saturation_counts;
  if (part < too_dark_below) return problem("spectrum_too_dark", {{"percent", fixed(100.0 * part, 1)}});
  return line;
}

Result<Line> line_of_capture(const SpectrumCapture& capture, const PhantomCertificate& certificate) {
  const auto spectrum = spectrum_of(capture, certificate);
  if (!spectrum) return spectrum.error();
  return line_in(*spectrum, capture, certificate);
}

}  // namespace probewright::measure
