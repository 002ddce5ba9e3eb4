#include <algorithm>
#include <array>
#include <cmath>

#include "station/base/catalogue.h"
#include "station/measure/checks.h"
#include "station/measure/ratio_line.h"

namespace probewright::measure::checks {
namespace {

/// A converter code at either end of its 24 bits means that the amplifier was full.
bool is_clipped(std::initializer_list<const std::vector<std::int32_t>*> trains) {
  constexpr std::int32_t most = (1 << 23) - 1;
  const auto full = [](std::int32_t code) { return code >= most || code <= -most; };
  return std::any_of(trains.begin(), trains.end(),
                     [&](const auto* train) { return std::any_of(train->begin(), train->end(), full); });
}

/// Four trains of slots, as a pulse or a closed-path capture holds them.
template <class Capture>
bool is_clipped_capture(const Capture& c) {
  return is_clipped({&c.red, &c.dark_a, &c.infrared, &c.dark_b});
}

template <class Capture>
Result<PerBand<Train>> trains_of(const Capture& capture, double nA_per_code) {
  const auto in_nA = [nA_per_code](const std::vector<std::int32_t>& codes) {
    std::vector<double> out(codes.size());
    std::transform(codes.begin(), codes.end(), out.begin(), [&](std::int32_t code) { return nA_per_code * code; });
    return out;
  };
  std::vector<double> start_s(capture.red.size());
  for (std::size_t i = 0; i < start_s.size(); ++i)
    start_s[i] = capture.cycle_s * (static_cast<double>(capture.first_cycle) + static_cast<double>(i));
  return subtract_dark(in_nA(capture.red), in_nA(capture.dark_a), in_nA(capture.infrared), in_nA(capture.dark_b),
                       start_s, capture.cycle_s);
}

FittedPulses fitted(const PulseCapture& capture, double nA_per_code) {
  FittedPulses out{&capture, {}, {}};
  if (is_clipped_capture(capture)) return out.reason = "clipped", out;
  const auto trains = trains_of(capture, nA_per_code);
  if (!trains) return out.reason = reason_of(trains.error()), out;
  const PulseRules rules{capture.modulator_Hz, false, true};  // LEDs may still warm up
  for (const Band band : {Band::red, Band::infrared}) {
    auto fit = fit_pulses(trains->of(band), rules);
    if (!fit) return out.reason = reason_of(fit.error()), out;
    out.fits.of(band) = std::move(*fit);
  }
  return out;
}

/// The captures of all of these set points, fitted, or why one of them cannot be used.
struct FittedSet {
  std::string reason;
  std::vector<const FittedPulses*> all;
};
FittedSet fitted_set(const Run& run, const std::vector<SetPoint>& set_points) {
  FittedSet out;
  for (const SetPoint& point : set_points) {
    const FittedPulses* pulse = run.pulse(point.ratio);
    if (pulse == nullptr) return out.reason = not_captured().reason, out;
    if (!pulse->reason.empty()) return out.reason = pulse->reason, out;
    out.all.push_back(pulse);
  }
  if (out.all.empty()) out.reason = not_captured().reason;
  return out;
}

/// The capture that stands for the light's level.
FittedSet level_capture(const Run& run) {
  const SetPoint* point = run.model.level_set_point();
  return fitted_set(run, point == nullptr ? std::vector<SetPoint>{} : std::vector<SetPoint>{*point});
}

const CalibratedSetPoint* calibration_of(const Run& run, const FittedPulses& pulse) {
  return run.certificates.phantom.set_point(pulse.capture->set_point_ratio);
}

/// Both dark slots of each cycle, in the order of time.
Result<Level> dark_level(const std::vector<std::int32_t>& first, const std::vector<std::int32_t>& second,
                         double cycle_s, double nA_per_code, double flicker_Hz) {
  Train train;
  if (first.size() != second.size()) return Problem{"pulses_lengths_differ", ""};
  for (std::size_t i = 0; i < first.size(); ++i) {
    const double start_s = cycle_s * static_cast<double>(i);
    train.t_s.push_back(start_s + slot_moments[1] * cycle_s), train.level.push_back(nA_per_code * first[i]);
    train.t_s.push_back(start_s + slot_moments[3] * cycle_s), train.level.push_back(nA_per_code * second[i]);
  }
  return fit_level(train, flicker_Hz);
}

}  // namespace

std::vector<FittedPulses> fit_all(const Model& model, const Certificates& certificates, const Captures& captures) {
  std::vector<FittedPulses> out;
  if ((model.needs() & needs_pulses) == 0) return out;
  for (const PulseCapture& capture : captures.pulses) out.push_back(fitted(capture, certificates.adapter.nA_per_code));
  return out;
}

const FittedPulses* Run::pulse(double ratio) const {
  const PulseCapture* capture = captures.pulse(ratio);
  for (const FittedPulses& pulse : pulses)
    if (pulse.capture == capture) return &pulse;
  return nullptr;
}

/// The noisiest band of the noisiest capture: a cable that fails now and then fails in one of them.
Outcome cable_noise(const Run& run) {
  // As the sampling folds them: both lie below half of the cycle rate, and so do their second harmonics.
  constexpr std::array lines_Hz = {100.0, 120.0, 200.0, 240.0};
  const FittedSet set = fitted_set(run, run.model.needed_set_points());
  if (!set.reason.empty()) return none(set.reason);
  double most = 0.0, most_u = 0.0;
  for (const FittedPulses* pulse : set.all) {
    const auto trains = trains_of(*pulse->capture, run.certificates.adapter.nA_per_code);
    for (const Band band : {Band::red, Band::infrared}) {
      const PulseFit& fit = pulse->fits.of(band);
      if (!(fit.dc > 10.0 * fit.dc_u)) return none("too_dark");
      const auto residual = residual_without_lines(trains->of(band), fit, lines_Hz);
      if (!residual) return none(reason_of(residual.error()));
      if (*residual < most) continue;
      most = *residual;
      most_u = most / std::sqrt(2.0 * static_cast<double>(fit.residuals.size()));  // of an sd from n values
    }
  }
  return found(most, {noise(most_u)});
}

/// Photocurrent per delivered current, by the light's own temperature coefficient at 25 C. A detector that gives
/// nothing reads 0: that is a reading.
Outcome transfer(const Run& run, Band band) {
  const auto& electrical = run.captures.electrical;
  if (!electrical || !electrical->led.of(band).at_drive) return not_captured();
  const FittedSet set = level_capture(run);
  if (!set.reason.empty()) return none(set.reason);
  const double drive_mA = electrical->led.of(band).at_drive->delivered_mA * run.certificates.adapter.drive_scale;
  if (!(drive_mA > 0.0)) return none("no_current");
  const FittedPulses& pulse = *set.all.front();
  const PulseFit& fit = pulse.fits.of(band);
  const TemperatureModel& t = run.model.temperature;
  const double above_K = run.above_reference_K(pulse.capture->temperature_C);
  const double factor = 1.0 / (1.0 + 0.01 * t.light_percent_per_K.of(band) * above_K);
  const double value = factor * fit.dc / drive_mA, relative = 0.01 * factor * std::abs(value);
  return found(
      value,
      {noise(factor * fit.dc_u / drive_mA),
       {"temperature", relative * std::abs(t.light_percent_per_K.of(band)) * t.temperature_u_K, Scope::common},
       {"temperature_coefficient", relative * t.light_percent_per_K_u.of(band) * std::abs(above_K), Scope::per_probe}});
}

/// The band with more of it counts: light that gets around the blade in one band gets around the phantom.
Outcome closed_path_light(const Run& run) {
  const auto& closed = run.captures.closed_path;
  if (!closed) return not_captured();
  const FittedSet open = level_capture(run);
  if (!open.reason.empty()) return none(open.reason);
  if (is_clipped_capture(*closed)) return none("clipped");
  const auto trains = trains_of(*closed, run.certificates.adapter.nA_per_code);
  if (!trains) return none(reason_of(trains.error()));
  Outcome out;
  for (const Band band : {Band::red, Band::infrared}) {
    const PulseFit& through = open.all.front()->fits.of(band);
    if (!(through.dc > 10.0 * through.dc_u)) return none("too_dark");
    const auto around = fit_level(trains->of(band), 0.0);
    if (!around) return none(reason_of(around.error()));
    const double percent = 100.0 * around->value / through.dc;
    if (out.found && percent <= out.found->value) continue;
    out = found(percent, {noise(std::hypot(100.0 * around->noise_u, percent * through.dc_u) / through.dc)});
  }
  return out;
}

std::optional<PerBand<Level>> alone_levels(const Run& run, Band lit) {
  const auto& alone = run.captures.alone_slots.of(lit);
  if (!alone || is_clipped_capture(*alone)) return std::nullopt;
  const auto trains = trains_of(*alone, run.certificates.adapter.nA_per_code);
  if (!trains) return std::nullopt;
  PerBand<Level> levels;
  for (const Band slot : {Band::red, Band::infrared}) {
    const auto level = fit_level(trains->of(slot), 0.0);
    if (!level) return std::nullopt;
    levels.of(slot) = *level;
  }
  return levels;
}

/// What the one LED that is lit leaves in the other one's slot, over its own; the worse of both directions.
Outcome slot_crosstalk(const Run& run) {
  Outcome out;
  for (const Band lit : {Band::red, Band::infrared}) {
    const auto& alone = run.captures.alone_slots.of(lit);
    if (!alone) return not_captured();
    if (is_clipped_capture(*alone)) return none("clipped");
    const auto levels = alone_levels(run, lit);
    if (!levels) return none("pulses_too_few");
    const Level& own = levels->of(lit);
    const Level& other = levels->of(lit == Band::red ? Band::infrared : Band::red);
    if (!(own.value > 10.0 * own.noise_u)) return none("too_dark");
    const double percent = 100.0 * other.value / own.value;
    if (out.found && percent <= out.found->value) continue;
    out = found(percent, {noise(std::hypot(100.0 * other.noise_u, percent * own.noise_u) / own.value)});
  }
  return out;
}

/// Lamp on less lamp off, brought to the lamp's full level.
Outcome ambient_uptake(const Run& run) {
  const auto& capture = run.captures.ambient;
  if (!capture) return not_captured();
  if (is_clipped({&capture->lit_a, &capture->lit_b, &capture->unlit_a, &capture->unlit_b})) return none("clipped");
  const double scale = run.certificates.adapter.nA_per_code;
  const auto lit = dark_level(capture->lit_a, capture->lit_b, capture->cycle_s, scale, capture->flicker_Hz);
  const auto unlit = dark_level(capture->unlit_a, capture->unlit_b, capture->cycle_s, scale, 0.0);
  if (!lit) return none(reason_of(lit.error()));
  if (!unlit) return none(reason_of(unlit.error()));
  return found((lit->value - unlit->value) / capture->lamp_level,
               {noise(std::hypot(lit->noise_u, unlit->noise_u) / capture->lamp_level)});
}

/// The largest deviation over the set points, with its sign: what is wrong at one of them is wrong.
Outcome modulation_deviation(const Run& run, Band band) {
  const FittedSet set = fitted_set(run, run.model.set_points);
  if (!set.reason.empty()) return none(set.reason);
  Outcome out;
  for (const FittedPulses* pulse : set.all) {
    const CalibratedSetPoint* calibrated = calibration_of(run, *pulse);
    if (calibrated == nullptr) return none("not_certified");
    const PulseFit& fit = pulse->fits.of(band);
    if (const auto modulated = is_modulated(fit); !modulated) return none(reason_of(modulated.error()));
    const double certified = calibrated->modulation.of(band);
    const double percent = 100.0 * (fit.modulation / certified - 1.0);
    if (out.found && std::abs(percent) <= std::abs(out.found->value)) continue;
    out = found(percent, {noise(100.0 * fit.modulation_u / certified)});
  }
  return out;
}

/// Deviation of R from its certificate at one set point, in %.
Outcome ratio_deviation(const Run& run, double nominal) {
  const FittedPulses* pulse = run.pulse(nominal);
  if (pulse == nullptr) return not_captured();
  const CalibratedSetPoint* calibrated = run.certificates.phantom.set_point(nominal);
  if (calibrated == nullptr) return none("not_certified");
  if (!pulse->reason.empty()) return none(pulse->reason);
  const auto ratio = ratio_of(pulse->fits);
  if (!ratio) return none(reason_of(ratio.error()));
  return found(100.0 * (ratio->value / calibrated->ratio - 1.0), {noise(100.0 * ratio->noise_u / calibrated->ratio)});
}

Outcome ratio_line(const Run& run, RatioLineValue value) {
  const FittedSet set = fitted_set(run, run.model.set_points);
  if (!set.reason.empty()) return none(set.reason);
  std::vector<RatioPoint> points;
  for (const FittedPulses* pulse : set.all) {
    const CalibratedSetPoint* calibrated = calibration_of(run, *pulse);
    if (calibrated == nullptr) return none("not_certified");
    const auto ratio = ratio_of(pulse->fits);
    if (!ratio) return none(reason_of(ratio.error()));
    points.push_back({calibrated->ratio, ratio->value, ratio->noise_u});
  }
  const auto line = fit_ratio_line(points);
  if (!line) return none(reason_of(line.error()));
  switch (value) {
    case RatioLineValue::slope:
      return found(line->slope, {noise(line->slope_u)});
    case RatioLineValue::offset:
      return found(line->offset, {noise(line->offset_u)});
    case RatioLineValue::nonlinearity:
      return found(line->nonlinearity, {noise(line->nonlinearity_u)});
  }
  return none("not_a_number");
}

}  // namespace probewright::measure::checks
