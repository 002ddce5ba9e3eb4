#include <algorithm>
#include <cmath>

#include "station/base/numbers.h"
#include "station/measure/lab.h"

namespace probewright::measure {
namespace {

constexpr double coverage_factor = 2.0;

const std::vector<double>* column_of(const CsvTable& table, std::string_view name) {
  const int index = table.column(name);
  return index < 0 ? nullptr : &table.columns[static_cast<std::size_t>(index)];
}

/// Smallest step between two different values: what the instrument rounds to, or tiny for values that are not rounded.
double rounding_of(std::vector<double> values) {
  std::sort(values.begin(), values.end());
  double least = values.back() - values.front();
  for (std::size_t i = 1; i < values.size(); ++i)
    if (values[i] > values[i - 1]) least = std::min(least, values[i] - values[i - 1]);
  return least;
}

/// Three or more equal samples in a row at the maximum, over a stretch in which a line of this width would have fallen
/// by more than two roundings: the top of a real line is never that flat, a converter's end is.
std::optional<Problem> flat_top(const std::vector<double>& nm, const std::vector<double>& signal) {
  if (nm.size() < 8) return std::nullopt;
  const auto top = std::max_element(signal.begin(), signal.end());
  const auto end = std::find_if(top, signal.end(), [&](double v) { return v != *top; });
  const auto first = static_cast<std::size_t>(top - signal.begin()), count = static_cast<std::size_t>(end - top);
  if (count < 3 || count == signal.size()) return std::nullopt;
  double area = 0.0;
  for (std::size_t i = 1; i < nm.size(); ++i) area += 0.5 * (nm[i] - nm[i - 1]) * (signal[i] + signal[i - 1]);
  const double sigma_nm = area / *top / 2.5066282746310002;  // a Gaussian's area is sqrt(2 pi) sigma times its top
  const double half_nm = 0.5 * (nm[first + count - 1] - nm[first]);
  const double fall = 0.5 * *top * half_nm * half_nm / (sigma_nm * sigma_nm);
  if (!(fall > 2.0 * rounding_of(signal))) return std::nullopt;
  return Problem{"spectrum_flat_top", "", {{"count", std::to_string(count)}, {"nm", shortest(nm[first])}}};
}

/// Noise of a sample from third differences, which a smooth line hardly has: for white noise their variance is 20 times
/// that of a sample (1 + 9 + 9 + 1). The median is not moved by the few places where the line bends.
double noise_variance(const std::vector<double>& values) {
  if (values.size() < 8) return 0.0;
  std::vector<double> sizes;
  for (std::size_t i = 3; i < values.size(); ++i)
    sizes.push_back(std::abs(values[i] - 3.0 * values[i - 1] + 3.0 * values[i - 2] - values[i - 3]));
  const auto middle = sizes.begin() + static_cast<std::ptrdiff_t>(sizes.size() / 2);
  std::nth_element(sizes.begin(), middle, sizes.end());
  const double sd = *middle / 0.6744897501960817;  // median of |x| of a normal deviate
  return sd * sd / 20.0;
}

Result<Spectrum> spectrum_of(const CsvTable& table) {
  const auto &nm = *column_of(table, "wavelength_nm"), &signal = *column_of(table, "signal");
  const auto *dark = column_of(table, "dark"), *response = column_of(table, "response");
  Spectrum out;
  out.wavelength_nm = nm;
  std::vector<double> raw(signal);
  for (std::size_t i = 0; i < raw.size(); ++i)
    if (dark != nullptr) raw[i] -= (*dark)[i];
  const double variance = noise_variance(raw);
  for (std::size_t i = 0; i < raw.size(); ++i) {
    const double gain = response == nullptr ? 1.0 : (*response)[i];
    if (!(gain > 0.0)) return Problem{"spectrum_response", "", {{"nm", shortest(nm[i])}}};
    out.power.push_back(raw[i] / gain);
    out.variance.push_back(variance / (gain * gain));
  }
  return out;
}

Band band_of(const Spectrum& spectrum) {
  const auto top = std::max_element(spectrum.power.begin(), spectrum.power.end()) - spectrum.power.begin();
  const double between = 0.5 * (line_window(Band::red).to_nm + line_window(Band::infrared).from_nm);
  return spectrum.wavelength_nm[static_cast<std::size_t>(top)] < between ? Band::red : Band::infrared;
}

/// Every other sample, from the first or the second on.
Spectrum every_other(const Spectrum& all, std::size_t from) {
  Spectrum half;
  for (std::size_t i = from; i < all.power.size(); i += 2) {
    half.wavelength_nm.push_back(all.wavelength_nm[i]);
    half.power.push_back(all.power[i]);
    half.variance.push_back(all.variance[i]);
  }
  return half;
}

/// Standard uncertainty from the grid: half the larger distance of the two half-dense results, taken as the half-width
/// of an even distribution. The error of a sum over a smooth line falls faster than with the square of the step, so the
/// result from all samples is at least four times nearer than that of half of them.
struct GridError {
  std::vector<Line> halves;
  double of(double Line::*member, const Line& line) const {
    double most = 0.0;
    for (const Line& half : halves) most = std::max(most, std::abs(half.*member - line.*member));
    return 0.25 * most / std::sqrt(3.0);
  }
};

GridError grid_error(const Spectrum& spectrum, const LineRules& rules) {
  GridError grid;
  for (const std::size_t from : {std::size_t{0}, std::size_t{1}})
    if (const auto line = find_line(every_other(spectrum, from), rules)) grid.halves.push_back(*line);
  return grid;
}

/// What is lost beyond an end of the axis at level `edge_level` of the peak: a tail that falls with a fifth of the
/// width as its length, at one width from the middle. All of it is taken as the half-width of an even distribution.
double cut_off_u(const Line& line) {
  const double lost = line.edge_level * 0.2 * line.width_nm, area = 1.06 * line.width_nm;
  return lost / area * line.width_nm / std::sqrt(3.0);
}

bool spans(const Spectrum& spectrum, Window window) {
  return spectrum.wavelength_nm.front() <= window.from_nm && spectrum.wavelength_nm.back() >= window.to_nm;
}

double step_u(const Spectrum& spectrum, double nm) {
  const auto& axis = spectrum.wavelength_nm;
  const auto above = std::lower_bound(axis.begin() + 1, axis.end() - 1, nm);
  return (*above - *(above - 1)) / std::sqrt(12.0);
}

}  // namespace

CsvRules lab_spectrum_columns() {
  CsvRules rules;
  rules.needed = {"wavelength_nm", "signal"};
  rules.optional = {"dark", "response"};
  return rules;
}

Result<LabSpectrum> measure_spectrum(const CsvTable& table, const LabSpectrumOptions& options) {
  if (!(options.threshold >= 0.0 && options.threshold <= 0.5))
    return Problem{"spectrum_threshold", "", {{"value", shortest(options.threshold)}}};
  if (auto flat = flat_top(*column_of(table, "wavelength_nm"), *column_of(table, "signal"))) return *flat;
  const auto spectrum = spectrum_of(table);
  if (!spectrum) return spectrum.error();

  LabSpectrum out;
  out.band = options.band.value_or(band_of(*spectrum));
  const LineRules rules{out.band, options.threshold, options.slit_nm};
  const auto line = find_line(*spectrum, rules);
  if (!line) return line.error();

  const double above_K = options.temperature_C ? *options.temperature_C - 25.0 : 0.0;
  const double shift_nm = options.centroid_nm_per_K.of(out.band) * above_K;
  const double growth_nm = options.width_nm_per_K.of(out.band) * above_K;
  const GridError grid = grid_error(*spectrum, rules);
  // With threshold 0 the window's ends belong to the definition; those of the axis do not.
  const bool defined_by_window = options.threshold <= 0.0 && spans(*spectrum, line_window(out.band));
  const double cut_nm = defined_by_window ? 0.0 : cut_off_u(*line);
  const auto figure = [&](double Line::*value, double Line::*u, double shift, double cut) {
    double grid_u = grid.of(value, *line);
    if (grid.halves.empty()) grid_u = step_u(*spectrum, line->centroid_nm);  // too few samples to tell: the step itself
    return Figure{(*line).*value - shift, coverage_factor * std::hypot((*line).*u, grid_u, cut), "nm"};
  };
  out.peak_nm = figure(&Line::peak_nm, &Line::peak_u, shift_nm, 0.0);
  out.centroid_nm = figure(&Line::centroid_nm, &Line::centroid_u, shift_nm, cut_nm);
  out.half_power_centre_nm = figure(&Line::half_power_centre_nm, &Line::half_power_centre_u, shift_nm, 0.0);
  out.fwhm_nm = figure(&Line::width_nm, &Line::width_u, growth_nm, 0.0);
  if (out.band == Band::red)
    if (const auto fraction = secondary_fraction(*spectrum))
      out.secondary_fraction = Figure{fraction->value, coverage_factor * fraction->noise_u, "1"};
  return out;
}

}  // namespace probewright::measure
