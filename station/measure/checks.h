#pragma once
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "station/measure/captures.h"
#include "station/measure/certificate.h"
#include "station/measure/model.h"
#include "station/measure/pulses.h"
#include "station/measure/reading.h"
#include "station/measure/saturation.h"
#include "station/measure/spectrum.h"

// What the checks of one run are computed from, and the shape of their answers. Inside this folder only; evaluate() is
// the way in.
namespace probewright::measure::checks {

constexpr double reference_C = 25.0;

/// One pulse capture after the fit of both bands.
struct FittedPulses {
  const PulseCapture* capture = nullptr;
  std::string reason;  ///< why there is no fit; empty: there is one
  PerBand<PulseFit> fits;
};

/// Both bands' spectra as they weigh on the extinctions, beside those of the coded bin.
struct WeighedSpectra {
  std::string reason;  ///< why there are none; empty: there are
  PerBand<Absorption> nominal;
  PerBand<Absorption> measured;       ///< referred to 25 C
  PerBand<Absorption> lower, higher;  ///< the same with every wavelength `weighed_step_nm` lower and higher
};
constexpr double weighed_step_nm = 0.25;

/// What all checks of one run share. Each line, fit and weighing is made once.
struct Run {
  const Model& model;
  const Certificates& certificates;
  const Captures& captures;
  PerBand<Result<Spectrum>> spectra;  ///< that of infrared without the red LED's own light, where that was captured
  PerBand<Result<Line>> lines;
  std::vector<FittedPulses> pulses;
  WeighedSpectra weighed{};  ///< only for a model that wants a saturation error

  double above_reference_K(double told_C) const {
    return certificates.phantom.true_temperature_C(told_C) - reference_C;
  }
  /// The fitted capture of a set point, or nullptr when it was not captured.
  const FittedPulses* pulse(double ratio) const;
};

/// A value before it is finished: with what only the captures can tell of its uncertainty.
struct Found {
  double value = 0.0;
  std::vector<Component> components;
};

/// A found value, or the slug of the reason why there is none.
struct Outcome {
  std::optional<Found> found;
  std::string reason;
};
Outcome none(std::string reason);
Outcome found(double value, std::vector<Component> components = {});
Outcome not_captured();
/// The reason slug of a reading for a problem of the methods.
std::string reason_of(const Problem& problem);
Component noise(double u);
/// Adds the model's budget for the check.
void add_budget(const Model& model, std::string_view check, Found& found);
/// Root of the sum of squares of the components.
double combined(const std::vector<Component>& components);
/// Value at 25 C for a quantity that moves by `per_K`, with what that adds to its uncertainty.
Found at_reference(const Run& run, Found as_found, double told_C, double per_K, double per_K_u);

std::vector<FittedPulses> fit_all(const Model& model, const Certificates& certificates, const Captures& captures);

// --- what means nothing any more (hard_fault.cpp)
/// The check that shows the first hard fault in the order of diagnosis: no probe, an LED that cannot shine, a detector
/// that is full in the dark, or one that tells of no light. Empty: none is known from these captures.
std::string hard_fault(const Run& run);
/// Whether a reading of `check` says nothing of the probe once `fault` is known: it becomes "blocked_by:<fault>".
bool means_nothing(const Run& run, std::string_view fault, std::string_view check);

// --- contact and LEDs (evaluate.cpp)
Outcome id_resistance(const Run& run);
/// The bin that this resistance stands for: the nearest by ratio, since tolerances are relative. nullptr: no bins.
const Bin* coded_bin(const Model& model, double ohm);
Outcome centroid_of(const Run& run, Band band);

// --- from spectra (spectrum_checks.cpp)
/// A band's spectrum. In the infrared one's the red LED shines too, with its secondary line in the window: its own
/// spectrum, brought to the red line's light in this frame, is taken out again.
Result<Spectrum> band_spectrum(const Certificates& certificates, const Captures& captures, Band band);
Outcome secondary_emission(const Run& run);
Outcome bin_mismatch(const Run& run);
WeighedSpectra weigh(const Run& run);
Outcome saturation_error(const Run& run, double saturation);

// --- from slot samples (pulse_checks.cpp)
/// Levels of both slots with one LED lit alone; nothing without such a capture or from one that is full.
std::optional<PerBand<Level>> alone_levels(const Run& run, Band lit);
Outcome cable_noise(const Run& run);
Outcome transfer(const Run& run, Band band);
Outcome closed_path_light(const Run& run);
Outcome slot_crosstalk(const Run& run);
Outcome ambient_uptake(const Run& run);
Outcome modulation_deviation(const Run& run, Band band);
Outcome ratio_deviation(const Run& run, double nominal);
enum class RatioLineValue { slope, offset, nonlinearity };
Outcome ratio_line(const Run& run, RatioLineValue value);

}  // namespace probewright::measure::checks
