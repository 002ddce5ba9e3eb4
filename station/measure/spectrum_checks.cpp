#include <algorithm>
#include <cmath>
#include <string>

#include "station/measure/checks.h"

namespace probewright::measure::checks {
namespace {

/// The coded bin of the probe, or the reason why it is not known.
struct Coded {
  const Bin* bin = nullptr;
  std::string reason;
};
Coded coded_bin_of(const Run& run) {
  const Outcome resistance = id_resistance(run);
  if (!resistance.found) return {nullptr, resistance.reason};
  const double ohm = resistance.found->value;
  if (run.model.bins.empty()) return {nullptr, "not_certified"};
  return {ohm > 0.0 ? coded_bin(run.model, ohm) : &run.model.bins.front(), {}};
}

/// Wavelength by which the nest's temperature has moved a line from where it is at 25 C.
double shift_nm(const Run& run, Band band) {
  return run.model.temperature.centroid_nm_per_K.of(band) *
         run.above_reference_K(run.captures.spectrum(band)->temperature_C);
}

struct Piece {
  Spectrum spectrum;
  double from_nm = 0.0, to_nm = 0.0;
};

Absorption weighed(const Piece& piece, double shift_nm, const SaturationModel& model) {
  return absorption_of(piece.spectrum, piece.from_nm, piece.to_nm, shift_nm, model);
}

/// What the red LED sends out from 800 to 1000 nm, per area of its own line: both from the frame in which it is alone.
struct Secondary {
  std::string reason;
  Piece piece;
  double per_line_area = 0.0;
};
Secondary secondary_of(const Run& run) {
  Secondary out;
  const auto& alone = run.captures.red_alone;
  if (!alone) return out.reason = not_captured().reason, out;
  const auto spectrum = spectrum_of(alone->spectrum, run.certificates.phantom);
  if (!spectrum) return out.reason = reason_of(spectrum.error()), out;
  const auto line = line_of_capture(alone->spectrum, run.certificates.phantom);
  if (!line) return out.reason = reason_of(line.error()), out;
  out.piece = {*spectrum, secondary_window.from_nm, secondary_window.to_nm};
  const Absorption own = absorption_of(*spectrum, line->run_from_nm, line->run_to_nm, 0.0, *run.model.saturation);
  out.per_line_area = 1.0 / own.area();
  return out;
}

PerBand<Absorption> nominal_of(const Run& run, const Bin& bin) {
  const SaturationModel& model = *run.model.saturation;
  PerBand<Absorption> out;
  for (const Band band : {Band::red, Band::infrared})
    out.of(band) = nominal_absorption(model.shape.of(band), bin.nominal_nm.of(band), run.certificates.phantom.slit_nm,
                                      standard_threshold, model);
  return out;
}

}  // namespace

Result<Spectrum> band_spectrum(const Certificates& certificates, const Captures& captures, Band band) {
  const auto& capture = captures.spectrum(band);
  if (!capture) return Problem{"not_captured", ""};
  auto spectrum = spectrum_of(*capture, certificates.phantom);
  if (!spectrum || band == Band::red || !captures.red_alone) return spectrum;
  const auto alone = spectrum_of(captures.red_alone->spectrum, certificates.phantom);
  const double line = line_counts(captures.red_alone->spectrum, certificates.phantom);
  // Without a red line of its own there is nothing to go by: clipped, dark or the wrong LED, as its own checks say.
  if (!alone || line < too_dark_below * certificates.phantom.saturation_counts) return spectrum;
  const Window red = line_window(Band::red);
  const double own = power_in(*alone, red), here = power_in(*spectrum, red);
  if (!(own > 0.0)) return spectrum;
  return without(*std::move(spectrum), *alone, std::max(0.0, here) / own, line_window(Band::infrared));
}

Outcome secondary_emission(const Run& run) {
  const auto& alone = run.captures.red_alone;
  if (!alone) return not_captured();
  const auto spectrum = spectrum_of(alone->spectrum, run.certificates.phantom);
  if (!spectrum) return none(reason_of(spectrum.error()));
  const auto fraction = secondary_fraction(*spectrum);
  if (!fraction) return none("no_peak");
  return found(100.0 * fraction->value, {noise(100.0 * fraction->noise_u)});
}

Outcome bin_mismatch(const Run& run) {
  const Coded coded = coded_bin_of(run);
  if (coded.bin == nullptr) return none(coded.reason);
  Outcome outcome = centroid_of(run, Band::red);
  if (!outcome.found) return outcome;
  outcome.found->value -= coded.bin->nominal_nm.red;
  return outcome;
}

WeighedSpectra weigh(const Run& run) {
  WeighedSpectra out;
  if (!run.model.saturation || !run.model.saturation->haemoglobin) return out.reason = "no_haemoglobin_table", out;
  const Coded coded = coded_bin_of(run);
  if (coded.bin == nullptr) return out.reason = coded.reason, out;
  const SaturationModel& model = *run.model.saturation;
  const Secondary secondary = secondary_of(run);
  PerBand<Piece> lines;
  for (const Band band : {Band::red, Band::infrared}) {
    const auto& capture = run.captures.spectrum(band);
    if (!capture) return out.reason = not_captured().reason, out;
    const auto& line = run.lines.of(band);
    if (!line) return out.reason = reason_of(line.error()), out;
    lines.of(band) = {run.spectra.of(band).value(), line->run_from_nm, line->run_to_nm};
  }
  if (!secondary.reason.empty()) return out.reason = secondary.reason, out;
  out.nominal = nominal_of(run, *coded.bin);
  const auto at = [&](Band band, double moved_nm) {
    const double shift = shift_nm(run, band) - moved_nm;
    Absorption sum = weighed(lines.of(band), shift, model);
    if (band == Band::red) sum.add(weighed(secondary.piece, shift, model), sum.area() * secondary.per_line_area);
    return sum;
  };
  for (const Band band : {Band::red, Band::infrared}) {
    out.measured.of(band) = at(band, 0.0);
    out.lower.of(band) = at(band, -weighed_step_nm), out.higher.of(band) = at(band, weighed_step_nm);
  }
  return out;
}

Outcome saturation_error(const Run& run, double saturation) {
  const WeighedSpectra& spectra = run.weighed;
  if (!spectra.reason.empty()) return none(spectra.reason);
  const SaturationModel& model = *run.model.saturation;
  const auto error = saturation_error_of(spectra.measured, spectra.nominal, saturation, model);
  const auto noise_points = saturation_error_noise(spectra.measured, spectra.nominal, saturation, model);
  if (!error || !noise_points) return none("beyond_curve");
  Found out{*error, {noise(*noise_points)}};
  // What is uncertain of each centroid, but for noise, moves the whole line: points per nm by a small step.
  for (const Band band : {Band::red, Band::infrared}) {
    PerBand<Absorption> low = spectra.measured, high = spectra.measured;
    low.of(band) = spectra.lower.of(band), high.of(band) = spectra.higher.of(band);
    const auto below = saturation_error_of(low, spectra.nominal, saturation, model);
    const auto above = saturation_error_of(high, spectra.nominal, saturation, model);
    if (!below || !above) return none("beyond_curve");
    const double points_per_nm = (*above - *below) / (2.0 * weighed_step_nm);
    Found centroid = *centroid_of(run, band).found;
    const std::string check = std::string{slug(band)} + "_centroid";
    add_budget(run.model, check, centroid);
    for (const Component& c : centroid.components)
      if (c.name != "noise")
        out.components.push_back({check + "_" + c.name, std::abs(points_per_nm) * c.standard_u, c.scope});
  }
  return {out, {}};
}

}  // namespace probewright::measure::checks
