#pragma once
#include <cmath>
#include <functional>
#include <numbers>
#include <string>
#include <vector>

#include "station/base/entropy.h"
#include "station/measure/captures.h"
#include "station/measure/certificate.h"
#include "station/measure/model.h"
#include "station/measure/spectrum.h"

// Signals with known answers. Nothing here comes from the emulated bench: a mistake there must not hide one here.
namespace synthetic {

using namespace probewright;
using namespace probewright::measure;

/// Log-normal line S = exp(-ln2 (ln(1 + 2b(l - lp)/D)/b)^2) and its closed forms, by substitution u = ln(...)/b.
struct LogNormal {
  double peak_nm, D_nm, b;

  double operator()(double nm) const {
    const double argument = 1.0 + 2.0 * b * (nm - peak_nm) / D_nm;
    if (!(argument > 0.0)) return 0.0;
    const double u = std::log(argument) / b;
    return std::exp(-std::numbers::ln2 * u * u);
  }
  double centroid_nm() const {
    return peak_nm + D_nm / (2.0 * b) * (std::exp(3.0 * b * b / (4.0 * std::numbers::ln2)) - 1.0);
  }
  double half_nm(int side) const { return peak_nm + D_nm * (std::exp(side * b) - 1.0) / (2.0 * b); }
  double half_centre_nm() const { return 0.5 * (half_nm(-1) + half_nm(1)); }
  double fwhm_nm() const { return D_nm * std::sinh(b) / b; }
};
inline constexpr LogNormal nominal_red{661.5, 19.0, -0.15};
inline constexpr LogNormal nominal_infrared{942.8, 46.0, -0.10};
inline const LogNormal& nominal(Band band) { return band == Band::red ? nominal_red : nominal_infrared; }

using Shape = std::function<double(double)>;

/// The shape on an even axis, without noise.
inline Spectrum sampled(const Shape& shape, double from_nm, double to_nm, double step_nm) {
  Spectrum s;
  for (double nm = from_nm; nm <= to_nm + 1e-9; nm += step_nm) {
    s.wavelength_nm.push_back(nm);
    s.power.push_back(shape(nm));
    s.variance.push_back(0.0);
  }
  return s;
}
/// An axis like the spectrometer's, 1024 pixels over 600 to 1050 nm.
inline Spectrum sampled(const Shape& shape) { return sampled(shape, 600.0, 1050.0, 450.0 / 1023.0); }

inline std::string source_path(const std::string& name) { return std::string{PW_SOURCE_DIR} + "/" + name; }
std::string text_of(const std::string& path);
/// The demonstration's own documents.
Model aq_20();
Certificates certificates();

/// A frame pair of this line by the certificate: wavelength axis, response, noise of a 100 ke-, 15 e- sensor. Peak at
/// `level` of full scale. seed 0: no noise, no rounding beyond whole counts.
SpectrumCapture spectrum_capture(const Shape& shape, Band band, double level, int frames, std::uint64_t seed);

/// What one train of slots is made of.
struct PulseSignal {
  PerBand<double> dc_nA{2000.0, 3000.0};
  PerBand<double> depth{0.01, 0.01};
  double rate_Hz = 5.0;
  double cycle_s = 4 * 439e-6;
  int cycles = 352;
  double phase_rad = 0.7;
  double drift = 0.0;            ///< relative change of the light over the whole capture
  double warming = 0.0;          ///< relative light at its beginning that is lost by and by ...
  double warming_s = 1.0;        ///< ... with this time constant
  double second_harmonic = 0.0;  ///< of the fundamental
  double crosstalk = 0.0;        ///< share of the other LED's light in each slot
  double secondary = 0.0;        ///< share of the red light that is modulated as infrared
  double around = 0.0;           ///< share of the light that nothing modulates
  double noise_nA = 0.0;         ///< per slot
  std::function<double(double)> ambient = [](double) { return 0.0; };  ///< nA at a moment, in every slot
  std::uint64_t seed = 1;
};
PulseCapture pulse_capture(const PulseSignal& signal, double nA_per_code, double set_point_ratio = 1.0);

/// A model that makes every check of the catalogue, its haemoglobin table attached.
std::string all_checks_text();
Model all_checks();
/// The curve's and nominal lines' part of it with another table: the text of a CSV file.
SaturationModel saturation_model(const std::string& table_text);

/// Captures with the blade in: `share` of the signal's light. With the lamp on and off: dark slots with `lamp_nA` at
/// its level, flickering by `flicker` of it.
/// Slots of that signal with one LED lit alone: cross-talk puts some of its light into the other one's slot.
AloneSlotsCapture alone_slots_capture(const PulseSignal& signal, Band lit, double nA_per_code);
ClosedPathCapture closed_path_capture(const PulseSignal& signal, double share, double nA_per_code);
AmbientCapture ambient_capture(double lamp_nA, double level, double flicker_Hz, double flicker, double noise_nA,
                               double nA_per_code);
/// The same as healthy(), and all that the other checks need: three set points, red alone, each LED's slots alone,
/// closed path, ambient. `signal`: what the light of the pulse captures is made of; its depths are those of each set
/// point.
Captures complete(double temperature_C, std::uint64_t seed, PulseSignal signal = {});

/// Captures of a healthy nominal probe at this temperature of the nest.
Captures healthy(double temperature_C, std::uint64_t seed);

}  // namespace synthetic
