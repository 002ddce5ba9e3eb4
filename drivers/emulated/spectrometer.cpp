#include "drivers/emulated/spectrometer.h"

#include <algorithm>
#include <cmath>
#include <numeric>

namespace probewright::emulated {

namespace spectrometer_certificate {
double response(double wavelength) {
  const double x = wavelength - 800.0;
  return 1.0 - 1.0e-3 * x - 1.0e-6 * x * x;
}
}  // namespace spectrometer_certificate

namespace {

namespace certificate = spectrometer_certificate;

double certificate_nm(double pixel) {
  const auto& c = certificate::wavelength_nm;
  return c[0] + pixel * (c[1] + pixel * (c[2] + pixel * c[3]));
}

double certificate_nm_per_pixel(double pixel) {
  const auto& c = certificate::wavelength_nm;
  return c[1] + pixel * (2.0 * c[2] + pixel * 3.0 * c[3]);
}

/// Gaussian image of the slit, cut at four sigma. Half of it: the middle first.
std::vector<double> slit_image(double fwhm_pixels) {
  const double sigma = fwhm_pixels / std::sqrt(8.0 * std::log(2.0));
  std::vector<double> half(static_cast<std::size_t>(std::ceil(4.0 * sigma)) + 1);
  for (std::size_t i = 0; i < half.size(); ++i) {
    const double x = static_cast<double>(i) / sigma;
    half[i] = std::exp(-0.5 * x * x);
  }
  const double sum = 2.0 * std::accumulate(half.begin(), half.end(), 0.0) - half[0];
  for (double& weight : half) weight /= sum;
  return half;
}

/// Electrons per second and unit of spectral density that put the nominal red line's peak where it belongs.
double sensitivity_e_per_s() {
  constexpr LineShape nominal{661.5, 19.0, -0.15};
  const double density = 1.0 / nominal.area_nm();
  const double at_peak = certificate_nm_per_pixel(140.0) * certificate::response(nominal.peak_nm);
  return Spectrometer::nominal_peak_e / 0.020 / (density * at_peak);
}

/// A narrower line falls between the pixels if it is taken there before the slit blurs it; it takes the slit's own
/// shape.
constexpr double narrow_nm = 1.5;

double clipped(double counts) { return std::clamp(counts, 0.0, Spectrometer::full_counts); }

}  // namespace

Spectrometer::Spectrometer(const StationErrors& errors, std::uint64_t seed)
    : slit_(slit_image(certificate::slit_nm / certificate_nm_per_pixel(455.0))) {
  Deviates deviates(seed);
  const double sensitivity = sensitivity_e_per_s();
  for (std::size_t i = 0; i < pixel_count; ++i) {
    const double pixel = static_cast<double>(i);
    const double told_nm = certificate_nm(pixel);
    wavelength_nm_[i] = told_nm + errors.wavelength_offset_nm + errors.wavelength_stretch * (told_nm - 800.0);
    const double slope = 1.0 + errors.response_slope_per_nm * (told_nm - 800.0);
    pixel_gain_[i] = sensitivity * certificate_nm_per_pixel(pixel) * certificate::response(told_nm) * slope;
    pixel_dark_e_[i] = deviates.log_normal(dark_e_per_s, 0.2);
    pixel_offset_[i] = deviates.normal(offset_counts, 4.0);
  }
}

void Spectrometer::add_line(const LineShape& shape, double power, PixelLight& light) const {
  if (!(power > 0.0)) return;
  constexpr double nothing = 1e-9;  // of the peak: far below one electron
  const double low = shape.edge_nm(nothing, -1), high = shape.edge_nm(nothing, +1);
  const double density = power / shape.area_nm();
  const auto first = std::lower_bound(wavelength_nm_.begin(), wavelength_nm_.end(), low) - wavelength_nm_.begin();
  for (auto i = static_cast<std::size_t>(first); i < pixel_count && wavelength_nm_[i] < high; ++i) {
    light[i] += density * shape.at(wavelength_nm_[i]);
  }
}

PixelLight Spectrometer::blurred(const PixelLight& light) const {
  // Margins of zeros spare the inner loop its bounds.
  const std::size_t reach = slit_.size() - 1;
  std::vector<double> wide(pixel_count + 2 * reach, 0.0);
  std::copy(light.begin(), light.end(), wide.begin() + static_cast<std::ptrdiff_t>(reach));
  PixelLight out{};
  for (std::size_t k = 0; k <= reach; ++k) {
    const double weight = k == 0 ? 0.5 * slit_[0] : slit_[k];
    const double* below = wide.data() + (reach - k);
    const double* above = wide.data() + (reach + k);
    for (std::size_t i = 0; i < pixel_count; ++i) out[i] += weight * (below[i] + above[i]);
  }
  return out;
}

Spectrum Spectrometer::expose(const std::vector<SpectralLine>& lines, double background_e_per_s, double exposure_s,
                              int frames, Deviates& noise) const {
  PixelLight wide{}, narrow{};
  for (const SpectralLine& line : lines) {
    const double fwhm_nm = line.shape.fwhm_nm();
    if (fwhm_nm > narrow_nm) {
      add_line(line.shape, line.power, wide);
    } else {
      add_line(line_of(line.shape.centroid_nm(), std::hypot(fwhm_nm, certificate::slit_nm), 0.0), line.power, narrow);
    }
  }
  PixelLight light = blurred(wide);
  for (std::size_t i = 0; i < pixel_count; ++i) light[i] += narrow[i];
  double total_e = 0.0;
  for (std::size_t i = 0; i < pixel_count; ++i) {
    light[i] = light[i] * pixel_gain_[i] * exposure_s;
    total_e += light[i];
  }
  const double even_e = stray_share * total_e / pixel_count + background_e_per_s * exposure_s;
  Spectrum spectrum;
  const double mean_of = 1.0 / std::sqrt(static_cast<double>(frames));
  for (std::size_t i = 0; i < pixel_count; ++i) {
    const double electrons = light[i] + even_e + pixel_dark_e_[i] * exposure_s;
    const double mean = pixel_offset_[i] + electrons / electrons_per_count;
    const double sd = std::sqrt(electrons + read_noise_e * read_noise_e) / electrons_per_count;
    double counts = 0.0;
    if (mean + 6.0 * sd < full_counts) {
      counts = clipped(mean + sd * mean_of * noise.normal());  // no frame can clip: one draw stands for their mean
    } else {
      for (int frame = 0; frame < frames; ++frame) {
        const double one = clipped(std::floor(mean + sd * noise.normal() + 0.5));
        spectrum.full |= one >= full_counts;
        counts += one / frames;
      }
    }
    spectrum.counts[i] = static_cast<std::uint16_t>(std::floor(counts + 0.5));
  }
  return spectrum;
}

}  // namespace probewright::emulated
