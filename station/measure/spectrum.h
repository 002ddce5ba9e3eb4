#pragma once
#include <optional>
#include <span>
#include <vector>

#include "station/base/result.h"
#include "station/measure/bands.h"
#include "station/measure/captures.h"
#include "station/measure/certificate.h"

namespace probewright::measure {

/// Spectral power on a rising wavelength axis, dark level subtracted, response removed.
struct Spectrum {
  std::vector<double> wavelength_nm;  ///< strictly rising, spacing free
  std::vector<double> power;          ///< relative; noise may make some negative
  std::vector<double> variance;       ///< of the noise of each power
};

/// Where one LED's line is looked for, ends included.
struct Window {
  double from_nm = 0.0, to_nm = 0.0;
  bool operator==(const Window&) const = default;
};
constexpr Window line_window(Band band) { return band == Band::red ? Window{605.0, 785.0} : Window{800.0, 1045.0}; }
constexpr Window secondary_window = {800.0, 1000.0};
/// The part of the peak at which the centroid's run of samples ends; part of the definition of a centroid.
constexpr double standard_threshold = 0.01;

struct LineRules {
  Band band = Band::red;
  double threshold = standard_threshold;  ///< 0: the whole window
  double slit_nm = 0.0;                   ///< removed from the width in quadrature
};

/// One line's wavelengths, in nm, with the standard uncertainty that the samples' noise gives each.
struct Line {
  double peak_nm = 0.0, peak_u = 0.0;                            ///< of a cubic over the top 20 %
  double centroid_nm = 0.0, centroid_u = 0.0;                    ///< over the run above the threshold
  double half_power_centre_nm = 0.0, half_power_centre_u = 0.0;  ///< middle of the half-power points
  double width_nm = 0.0, width_u = 0.0;                          ///< between the half-power points (FWHM), slit removed
  double run_from_nm = 0.0, run_to_nm = 0.0;                     ///< ends of the centroid's run
  double peak_power = 0.0;
  double edge_level = 0.0;  ///< the larger level (of the peak) at which the axis, not the threshold, ended the run
};

/// Finds the line of a band.
/// The run of samples is decided on a smooth over five samples (fewer where five span more than 2.5 nm), so that noise
/// does not end it; its values are the raw ones, the threshold is not subtracted, and the run ends where the smooth
/// crosses the threshold, between samples. Half-power points: a local fit of wavelength against level from 38 to 62 %.
/// Errors: spectrum_no_peak (nothing above the noise), spectrum_cut_off (the axis or the window ends
/// inside the line), spectrum_axis (lengths differ, axis not rising, under 8 samples in the window).
/// Source: definitions of peak, centroid and half-intensity centre as in CIE 127:2007 (from memory); trapezoid rule.
Result<Line> find_line(const Spectrum& spectrum, const LineRules& rules);

struct Fraction {
  double value = 0.0, noise_u = 0.0;
};
/// The part of a red LED's power that lies from 800 to 1000 nm, over the sum of the line's window and that.
/// Nothing when the axis does not reach over 1000 nm (or from below 800), or when there is no light at all.
std::optional<Fraction> secondary_fraction(const Spectrum& spectrum);

/// The spectrum of a capture by the phantom's certificate.
/// Errors: spectrum_clipped (a pixel at 95 % of full scale or more, or full in any frame), spectrum_too_dark (the
/// brightest pixel under 10 % of full scale over the dark frame).
Result<Spectrum> spectrum_of(const SpectrumCapture& capture, const PhantomCertificate& certificate);

/// Takes the light of another LED out of a spectrum: `times` x `other` where both lie in `window`, with its noise. Both
/// must be by the same certificate.
Spectrum without(Spectrum spectrum, const Spectrum& other, double times, Window window);
/// Power in a window, by trapezoids: relative, as the spectrum is.
double power_in(const Spectrum& spectrum, Window window);

/// Counts over the dark frame of the brightest pixel in the window of the capture's band.
double line_counts(const SpectrumCapture& capture, const PhantomCertificate& certificate);
/// The same from a spectrum made of that capture by spectrum_of, perhaps with other light taken out of it.
Result<Line> line_in(const Spectrum& spectrum, const SpectrumCapture& capture, const PhantomCertificate& certificate);
/// The line of the capture's band, slit removed from its width by the certificate. Both LEDs may be driven: each line
/// has its own window. Errors: those of spectrum_of and find_line; spectrum_too_dark when there is a line, but its
/// brightest pixel is under 10 % of full scale.
Result<Line> line_of_capture(const SpectrumCapture& capture, const PhantomCertificate& certificate);

constexpr double clipped_from = 0.95;    ///< of full scale
constexpr double too_dark_below = 0.10;  ///< of full scale, dark level subtracted

}  // namespace probewright::measure
