#pragma once
#include <array>
#include <cstdint>
#include <vector>

#include "drivers/emulated/deviates.h"
#include "drivers/emulated/line_shape.h"
#include "drivers/emulated/station_errors.h"

namespace probewright::emulated {

inline constexpr std::size_t pixel_count = 1024;
using PixelLight = std::array<double, pixel_count>;

/// What the certificates of the demonstration phantoms say, word for word; the optics are exactly this when the
/// station's errors are zero.
namespace spectrometer_certificate {
inline constexpr std::array<double, 4> wavelength_nm{600.0, 0.4402, -2.0e-7, -1.0e-10};  ///< sum of c_k pixel^k
/// Counts per spectral density of light, relative to 800 nm.
double response(double wavelength);
inline constexpr double slit_nm = 2.5;  ///< FWHM of the Gaussian image of the slit, at 800 nm
}  // namespace spectrometer_certificate

/// One line of light into the spectrometer.
struct SpectralLine {
  LineShape shape;
  double power = 0.0;  ///< relative: 1 is the nominal red LED of the AQ-20 in its standard drive
};

/// One exposure, as the device sends it.
struct Spectrum {
  std::array<std::uint16_t, pixel_count> counts{};
  bool full = false;  ///< any pixel of any frame at 65535
};

/// Grating spectrometer with a line sensor: 100 ke- full well, 16 bit, 15 e- read noise.
class Spectrometer {
 public:
  static constexpr double offset_counts = 1000.0;
  static constexpr double full_counts = 65535.0;
  static constexpr double full_well_e = 100e3;
  static constexpr double read_noise_e = 15.0;
  static constexpr double electrons_per_count = full_well_e / (full_counts - offset_counts);
  static constexpr double dark_e_per_s = 400.0;   ///< mean over the pixels, each with its own
  static constexpr double stray_share = 2e-4;     ///< of all light, spread evenly over the pixels
  static constexpr double nominal_peak_e = 45e3;  ///< nominal red line, 20 ms

  /// `seed` draws the pixels' own offsets and dark currents.
  Spectrometer(const StationErrors& errors, std::uint64_t seed);

  /// Mean of `frames` exposures of `exposure_s` each. `background` is light spread evenly, in e- per second and pixel
  /// (room light through an open lid). With a closed shutter pass no lines and no background.
  Spectrum expose(const std::vector<SpectralLine>& lines, double background_e_per_s, double exposure_s, int frames,
                  Deviates& noise) const;

  /// True wavelength of a pixel in nm.
  double wavelength_nm(std::size_t pixel) const { return wavelength_nm_[pixel]; }

 private:
  void add_line(const LineShape& shape, double power, PixelLight& light) const;
  PixelLight blurred(const PixelLight& light) const;

  PixelLight wavelength_nm_{};
  PixelLight pixel_gain_{};    ///< e- per second per unit of spectral density (power / nm)
  PixelLight pixel_dark_e_{};  ///< per second
  PixelLight pixel_offset_{};  ///< counts
  std::vector<double> slit_;   ///< one half of the slit's image, in pixels, sums to 1 with its mirror
};

}  // namespace probewright::emulated
