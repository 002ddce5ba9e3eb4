#pragma once
#include <optional>
#include <string>
#include <vector>

#include "station/base/csv.h"
#include "station/base/result.h"
#include "station/measure/pulses.h"
#include "station/measure/spectrum.h"

// Spectra and pulse trains that a laboratory took with its own instruments, from CSV tables. The methods are the very
// same that evaluate() uses; only the noise must be found from the data themselves.
namespace probewright::measure {

/// A figure with its expanded uncertainty (k = 2).
struct Figure {
  double value = 0.0;
  double expanded_uncertainty = 0.0;
  std::string unit;
};

struct LabSpectrumOptions {
  std::optional<Band> band;               ///< none: by the window that holds the brightest sample
  double threshold = standard_threshold;  ///< 0: the whole line window
  double slit_nm = 0.0;
  std::optional<double> temperature_C;  ///< of the probe; given: wavelengths and width are referred to 25 C
  /// Used with temperature_C; the demonstration model's figures unless the caller knows better.
  PerBand<double> centroid_nm_per_K{0.14, 0.28}, width_nm_per_K{0.05, 0.10};
};

struct LabSpectrum {
  Band band = Band::red;
  Figure peak_nm, centroid_nm, half_power_centre_nm, fwhm_nm;
  std::optional<Figure> secondary_fraction;  ///< red only, and only when the axis spans 800 to 1000 nm
};

/// What a CSV for measure_spectrum may hold: wavelength_nm and signal, dark and response if there.
CsvRules lab_spectrum_columns();
/// Metrics of one LED's spectrum.
/// Uncertainty: the samples' noise (from third differences outside steep parts), the grid (half the difference between
/// results from every other sample), and what the axis cuts off. Not in it: the instrument's own calibration.
/// Errors: those of find_line; spectrum_flat_top (three or more equal samples at the maximum: clipped);
/// spectrum_response (a response that is not above 0); spectrum_threshold.
Result<LabSpectrum> measure_spectrum(const CsvTable& table, const LabSpectrumOptions& options);

struct LabPulseOptions {
  std::optional<double> rate_Hz;
  bool free_rate = false;
  std::optional<double> cycle_s;  ///< needed with slot columns
};

struct LabBand {
  Figure dc_nA, ac_nA, modulation, phase_rad;
  std::optional<Figure> rate_Hz;  ///< when it was fitted
  double residual_relative = 0.0;
};

struct LabPulses {
  PerBand<LabBand> band;
  Figure ratio;
};

/// What a CSV for measure_pulses may hold: t_s, red, infrared, and both or neither of dark_a and dark_b.
CsvRules lab_pulse_columns();
/// Slot currents in nA: t_s, red, dark_a, infrared, dark_b with t_s the start of the cycle, slots in that order; or
/// t_s, red, infrared already dark-corrected, both at t_s. Errors: those of fit_pulses and ratio_of;
/// pulses_cycle_needed; pulses_one_dark (only one of the two dark columns).
Result<LabPulses> measure_pulses(const CsvTable& table, const LabPulseOptions& options);

}  // namespace probewright::measure
