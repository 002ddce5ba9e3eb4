#include "station/measure/evaluate.h"

#include <algorithm>
#include <array>
#include <cmath>
#include <optional>
#include <string>

#include "station/base/catalogue.h"
#include "station/base/numbers.h"
#include "station/measure/checks.h"

namespace probewright::measure {
namespace {

using namespace checks;

constexpr double coverage_factor = 2.0;

}  // namespace

namespace checks {

Outcome none(std::string reason) { return {std::nullopt, std::move(reason)}; }
Outcome found(double value, std::vector<Component> components) { return {Found{value, std::move(components)}, {}}; }

std::string reason_of(const Problem& problem) {
  constexpr std::array reasons = std::to_array<std::pair<std::string_view, std::string_view>>({
      {"spectrum_clipped", "clipped"},
      {"spectrum_too_dark", "too_dark"},
      {"spectrum_no_peak", "no_peak"},
      {"spectrum_cut_off", "cut_off"},
      {"pulses_too_dark", "too_dark"},
      {"pulses_no_modulation", "no_modulation"},
  });
  for (const auto& [id, reason] : reasons)
    if (problem.id == id) return std::string{reason};
  return problem.id;  // a capture that no healthy device sends; the id says what is wrong with it
}

Outcome not_captured() { return none("not_captured"); }

Component noise(double u) { return {"noise", u, Scope::per_probe}; }

Found at_reference(const Run& run, Found as_found, double told_C, double per_K, double per_K_u) {
  const double above_K = run.above_reference_K(told_C);
  as_found.value -= per_K * above_K;
  as_found.components.push_back(
      {"temperature", std::abs(per_K) * run.model.temperature.temperature_u_K, Scope::common});
  as_found.components.push_back({"temperature_coefficient", per_K_u * std::abs(above_K), Scope::per_probe});
  return as_found;
}

void add_budget(const Model& model, std::string_view check, Found& found) {
  const Budget* budget = model.budget(check);
  if (budget == nullptr) return;
  for (const BudgetItem& item : budget->items)
    found.components.push_back({item.name, std::hypot(item.absolute, item.relative * found.value), item.scope});
}

double combined(const std::vector<Component>& components) {
  double sum = 0.0;
  for (const Component& component : components) sum += component.standard_u * component.standard_u;
  return std::sqrt(sum);
}

// --- contact

Outcome id_resistance(const Run& run) {
  const auto& electrical = run.captures.electrical;
  if (electrical && electrical->id_open) return none("id_open");
  if (!electrical || !electrical->id_resistance_ohm) return not_captured();
  return found(*electrical->id_resistance_ohm * run.certificates.adapter.resistance_scale);
}

const Bin* coded_bin(const Model& model, double ohm) {
  const Bin* best = nullptr;
  const auto apart = [ohm](const Bin& bin) { return std::abs(std::log(ohm / bin.coded_ohm)); };
  for (const Bin& bin : model.bins)
    if (best == nullptr || apart(bin) < apart(*best)) best = &bin;
  return best;
}

}  // namespace checks

namespace {

Outcome probe_present(const Run& run) {
  const auto& electrical = run.captures.electrical;
  if (!electrical) return not_captured();
  const auto &phantom = electrical->present_phantom, &adapter = electrical->present_adapter;
  if ((phantom && !*phantom) || (adapter && !*adapter)) return found(0.0);
  if (!phantom || !adapter) return not_captured();
  return found(1.0);
}

Outcome id_deviation(const Run& run) {
  const Outcome resistance = id_resistance(run);
  if (!resistance.found) return resistance;
  const double ohm = resistance.found->value;
  // A short has no logarithm; it is nearest to the lowest resistor.
  const Bin* bin = ohm > 0.0 ? coded_bin(run.model, ohm) : (run.model.bins.empty() ? nullptr : &run.model.bins.front());
  if (bin == nullptr) return none("not_certified");
  return found(100.0 * (ohm / bin->coded_ohm - 1.0));
}

// --- LEDs, electrical

const std::optional<ForwardVoltage>* at_drive(const Run& run, Band band) {
  const auto& electrical = run.captures.electrical;
  return electrical && electrical->led.of(band).at_drive ? &electrical->led.of(band).at_drive : nullptr;
}

template <Band band>
Outcome forward_voltage(const Run& run) {
  const auto* led = at_drive(run, band);
  if (led == nullptr) return not_captured();
  const TemperatureModel& t = run.model.temperature;
  Found as_found{(*led)->voltage_V * run.certificates.adapter.voltage_scale, {}};
  return {at_reference(run, std::move(as_found), run.captures.electrical->temperature_C, t.voltage_V_per_K.of(band),
                       t.voltage_V_per_K_u.of(band)),
          {}};
}

template <Band band>
Outcome drive(const Run& run) {
  const auto* led = at_drive(run, band);
  if (led == nullptr) return not_captured();
  return found((*led)->delivered_mA * run.certificates.adapter.drive_scale);
}

Outcome mains_pickup(const Run& run) {
  const auto& electrical = run.captures.electrical;
  if (!electrical || !electrical->mains_pickup_nA) return not_captured();
  return found(*electrical->mains_pickup_nA * run.certificates.adapter.photocurrent_scale);
}

/// Forward voltage at the drive minus that at a quarter of it, in mV.
template <Band band>
Outcome voltage_rise(const Run& run) {
  const auto* led = at_drive(run, band);
  if (led == nullptr || !run.captures.electrical->led.of(band).at_quarter) return not_captured();
  const double rise_V = (*led)->voltage_V - run.captures.electrical->led.of(band).at_quarter->voltage_V;
  return found(1e3 * rise_V * run.certificates.adapter.voltage_scale);
}

/// An antiparallel pair lights the other LED before it leaks.
template <Band band>
Outcome reverse_leakage(const Run& run) {
  if (run.model.wiring == Wiring::antiparallel) return none("not_separate");
  const auto& electrical = run.captures.electrical;
  if (!electrical || !electrical->led.of(band).reverse_leakage_uA) return not_captured();
  return found(*electrical->led.of(band).reverse_leakage_uA);
}

/// How far the forward voltage moves from 5 ms after the drive was set until the LED is warm, in mV.
template <Band band>
Outcome warmup(const Run& run) {
  const auto& electrical = run.captures.electrical;
  if (!electrical) return not_captured();
  const LedElectrical& led = electrical->led.of(band);
  if (!led.first_voltage_V || !led.warm_voltage_V) return not_captured();
  return found(1e3 * std::abs(*led.first_voltage_V - *led.warm_voltage_V) * run.certificates.adapter.voltage_scale);
}

// --- LEDs, optical

Result<Line> line_of(const Certificates& certificates, const Captures& captures, const Result<Spectrum>& spectrum,
                     Band band) {
  if (!spectrum) return spectrum.error();
  return line_in(*spectrum, *captures.spectrum(band), certificates.phantom);
}

/// A wavelength or width of a line, referred to 25 C.
Outcome of_line(const Run& run, Band band, double Line::*value, double Line::*u, const PerBand<double>& per_K,
                const PerBand<double>& per_K_u) {
  if (!run.captures.spectrum(band)) return not_captured();
  const auto& line = run.lines.of(band);
  if (!line) return none(reason_of(line.error()));
  return {at_reference(run, {(*line).*value, {noise((*line).*u)}}, run.captures.spectrum(band)->temperature_C,
                       per_K.of(band), per_K_u.of(band)),
          {}};
}

template <Band band>
Outcome peak(const Run& run) {
  const TemperatureModel& t = run.model.temperature;
  return of_line(run, band, &Line::peak_nm, &Line::peak_u, t.centroid_nm_per_K, t.centroid_nm_per_K_u);
}
template <Band band>
Outcome centroid(const Run& run) {
  return centroid_of(run, band);
}
template <Band band>
Outcome half_power_centre(const Run& run) {
  const TemperatureModel& t = run.model.temperature;
  return of_line(run, band, &Line::half_power_centre_nm, &Line::half_power_centre_u, t.centroid_nm_per_K,
                 t.centroid_nm_per_K_u);
}
template <Band band>
Outcome width(const Run& run) {
  const TemperatureModel& t = run.model.temperature;
  return of_line(run, band, &Line::width_nm, &Line::width_u, t.width_nm_per_K, t.width_nm_per_K_u);
}

// --- detector

Outcome dark_as_found(const Run& run) {
  const auto& dark = run.captures.dark;
  if (!dark) return not_captured();
  const double scale = run.certificates.adapter.photocurrent_scale;
  return found(scale * (dark->connected_nA - dark->open_nA),
               {noise(scale * std::hypot(dark->connected_sd_nA, dark->open_sd_nA))});
}

/// Referred to 25 C by the doubling law: value * 2^(-above / doubling).
Outcome dark_current(const Run& run) {
  Outcome outcome = dark_as_found(run);
  if (!outcome.found) return outcome;
  const TemperatureModel& t = run.model.temperature;
  const double above_K = run.above_reference_K(run.captures.dark->temperature_C);
  const double factor = std::exp2(-above_K / t.dark_doubling_K), ln2 = std::log(2.0);
  Found& dark = *outcome.found;
  dark.value *= factor;
  for (Component& component : dark.components) component.standard_u *= factor;
  const double per_K = std::abs(dark.value) * ln2 / t.dark_doubling_K;
  dark.components.push_back({"temperature", per_K * t.temperature_u_K, Scope::common});
  dark.components.push_back({"temperature_coefficient",
                             per_K * std::abs(above_K) / t.dark_doubling_K * t.dark_doubling_K_u, Scope::per_probe});
  return outcome;
}

// --- from pulses and whole spectra, one function for each check

template <Band band>
Outcome transfer_of(const Run& run) {
  return transfer(run, band);
}
template <Band band>
Outcome modulation_of(const Run& run) {
  return modulation_deviation(run, band);
}
template <int percent>
Outcome saturation_of(const Run& run) {
  return saturation_error(run, percent);
}
template <RatioLineValue value>
Outcome ratio_line_of(const Run& run) {
  return ratio_line(run, value);
}
Outcome ratio_0p4(const Run& run) { return ratio_deviation(run, 0.4); }
Outcome ratio_1p0(const Run& run) { return ratio_deviation(run, 1.0); }
Outcome ratio_1p6(const Run& run) { return ratio_deviation(run, 1.6); }

// --- all checks

/// How a check is computed and what its value means. The definition text is kept with each reading and compared as it
/// stands: change a method or a parameter, and the version goes up.
struct Method {
  std::string_view check;
  Outcome (*compute)(const Run&);
  std::string_view definition;
};

constexpr std::array methods = std::to_array<Method>({
    {"probe_present", probe_present, "presence;phantom and adapter;v1"},
    {"id_resistance", id_resistance, "id-resistance;v1"},
    {"id_deviation", id_deviation, "id-deviation;from=nearest coded value by ratio;v1"},
    {"bin_mismatch", bin_mismatch,
     "bin-mismatch;red centroid minus nominal of the coded bin;threshold=0.01;window=605-785;ref=25C;v1"},
    {"cable_noise", cable_noise,
     "cable-noise;residual of the pulse fit over dc;without=drift to 4th order,100 120 200 240 Hz;largest of bands and "
     "captures;v2"},
    {"mains_pickup", mains_pickup, "mains-pickup;rms;v1"},
    {"red_forward_voltage", forward_voltage<Band::red>, "forward-voltage;at=drive;ref=25C;v1"},
    {"infrared_forward_voltage", forward_voltage<Band::infrared>, "forward-voltage;at=drive;ref=25C;v1"},
    {"red_voltage_rise", voltage_rise<Band::red>, "voltage-rise;drive minus a quarter;v1"},
    {"infrared_voltage_rise", voltage_rise<Band::infrared>, "voltage-rise;drive minus a quarter;v1"},
    {"red_reverse_leakage", reverse_leakage<Band::red>, "reverse-leakage;v1"},
    {"infrared_reverse_leakage", reverse_leakage<Band::infrared>, "reverse-leakage;v1"},
    {"red_drive", drive<Band::red>, "drive-delivered;in=slot;v1"},
    {"infrared_drive", drive<Band::infrared>, "drive-delivered;in=slot;v1"},
    {"red_warmup", warmup<Band::red>, "warm-up;5 ms to warm;magnitude;v1"},
    {"infrared_warmup", warmup<Band::infrared>, "warm-up;5 ms to warm;magnitude;v1"},
    {"red_peak", peak<Band::red>, "peak;fit=cubic;top=0.2;window=605-785;ref=25C;v1"},
    {"infrared_peak", peak<Band::infrared>, "peak;fit=cubic;top=0.2;window=800-1045;less=red alone;ref=25C;v2"},
    {"red_centroid", centroid<Band::red>, "centroid;threshold=0.01;window=605-785;ref=25C;v1"},
    {"infrared_centroid", centroid<Band::infrared>,
     "centroid;threshold=0.01;window=800-1045;less=red alone;ref=25C;v2"},
    {"red_half_power_centre", half_power_centre<Band::red>,
     "half-power-centre;fit=0.38-0.62;window=605-785;ref=25C;v1"},
    {"infrared_half_power_centre", half_power_centre<Band::infrared>,
     "half-power-centre;fit=0.38-0.62;window=800-1045;less=red alone;ref=25C;v2"},
    {"red_width", width<Band::red>, "fwhm;fit=0.38-0.62;slit=removed;window=605-785;ref=25C;v1"},
    {"infrared_width", width<Band::infrared>,
     "fwhm;fit=0.38-0.62;slit=removed;window=800-1045;less=red alone;ref=25C;v2"},
    {"secondary_emission", secondary_emission, "secondary-emission;800-1000 over 605-785 and 800-1000;red alone;v1"},
    {"dark_current", dark_current, "dark-current;connected minus open;ref=25C;law=doubling;v1"},
    {"dark_current_as_found", dark_as_found, "dark-current;connected minus open;as found;v1"},
    {"red_transfer", transfer_of<Band::red>, "transfer;dc of the fit;per=delivered mA;ref=25C;v2"},
    {"infrared_transfer", transfer_of<Band::infrared>, "transfer;dc of the fit;per=delivered mA;ref=25C;v2"},
    {"closed_path_light", closed_path_light, "closed-path;blade in over open;dark=two neighbours;larger band;v1"},
    {"slot_crosstalk", slot_crosstalk,
     "slot-crosstalk;one LED alone;other slot over its own;dark=two neighbours;larger direction;v2"},
    {"ambient_uptake", ambient_uptake, "ambient;dark slots;lamp on minus off;at=full lamp;v1"},
    {"red_modulation_deviation", modulation_of<Band::red>,
     "modulation;fit=hann,slope,curvature,harmonics 2 3;dark=two neighbours;largest of set points;from=certificate;v2"},
    {"infrared_modulation_deviation", modulation_of<Band::infrared>,
     "modulation;fit=hann,slope,curvature,harmonics 2 3;dark=two neighbours;largest of set points;from=certificate;v2"},
    {"ratio_deviation_0p4", ratio_0p4,
     "ratio;fit=hann,slope,curvature,harmonics 2 3;dark=two neighbours;from=certificate;v2"},
    {"ratio_deviation_1p0", ratio_1p0,
     "ratio;fit=hann,slope,curvature,harmonics 2 3;dark=two neighbours;from=certificate;v2"},
    {"ratio_deviation_1p6", ratio_1p6,
     "ratio;fit=hann,slope,curvature,harmonics 2 3;dark=two neighbours;from=certificate;v2"},
    {"ratio_slope", ratio_line_of<RatioLineValue::slope>, "ratio-line;least squares over set points;v2"},
    {"ratio_offset", ratio_line_of<RatioLineValue::offset>, "ratio-line;least squares over set points;v2"},
    {"ratio_nonlinearity", ratio_line_of<RatioLineValue::nonlinearity>,
     "ratio-line;least squares over set points;largest distance;v2"},
    {"saturation_error_100", saturation_of<100>,
     "saturation-error;at=100;threshold=0.01;less=red alone;ref=25C;nominal=coded bin;v2"},
    {"saturation_error_90", saturation_of<90>,
     "saturation-error;at=90;threshold=0.01;less=red alone;ref=25C;nominal=coded bin;v2"},
    {"saturation_error_80", saturation_of<80>,
     "saturation-error;at=80;threshold=0.01;less=red alone;ref=25C;nominal=coded bin;v2"},
    {"saturation_error_70", saturation_of<70>,
     "saturation-error;at=70;threshold=0.01;less=red alone;ref=25C;nominal=coded bin;v2"},
});

/// A modelled saturation error also depends on what the model file names for it.
std::string definition_of(const Model& model, const Method& method) {
  std::string text{method.definition};
  if (!method.check.starts_with("saturation_error_") || !model.saturation) return text;
  const SaturationModel& with = *model.saturation;
  text += ";table=" + with.table + " " + with.table_sha256.substr(0, 16) + ";curve=";
  for (const double c : with.curve.coefficients) text += shortest(c) + " ";
  for (const Curve::Point& p : with.curve.points) text += shortest(p.ratio) + ":" + shortest(p.saturation) + " ";
  text.back() = ';';
  for (const Band band : {Band::red, Band::infrared})
    text += std::string{slug(band)} + "=" + shortest(with.shape.of(band).width_nm) + " " +
            shortest(with.shape.of(band).skew) + ";";
  text += "responsivity=" + (with.responsivity.empty() ? "none" : std::to_string(with.responsivity.size()) + " points");
  return text;
}

Reading finished(const Model& model, const Method& method, Outcome outcome) {
  Reading reading;
  reading.check = method.check;
  reading.definition = definition_of(model, method);
  if (const Check* check = find_check(method.check)) reading.unit = check->unit;
  if (!outcome.found) return reading.none_reason = std::move(outcome.reason), reading;
  Found& found = *outcome.found;
  const bool with_u = carries_uncertainty(method.check);
  if (with_u) add_budget(model, method.check, found);
  const double expanded = coverage_factor * combined(found.components);
  if (!std::isfinite(found.value) || !std::isfinite(expanded)) return reading.none_reason = "not_a_number", reading;
  reading.value = found.value == 0.0 ? 0.0 : found.value;  // never -0.0
  if (with_u) reading.expanded_uncertainty = expanded;
  reading.components = std::move(found.components);
  return reading;
}

bool wants_saturation_error(const Model& model) {
  return std::any_of(model.routine.begin(), model.routine.end(),
                     [](const std::string& check) { return check.starts_with("saturation_error_"); });
}

/// The check whose hard fault leaves this one without a meaning, or nothing.
std::string blocked_by(const Run& run, const std::string& fault, std::string_view check, const Outcome& outcome) {
  if (!fault.empty() && (means_nothing(run, fault, check) || outcome.reason == "not_captured")) return fault;
  const Check* known = find_check(check);
  const bool by_bin = known != nullptr && (known->needs & needs_coded_bin) != 0 && check != "id_deviation";
  return by_bin && outcome.reason == "id_open" ? "id_deviation" : "";
}

}  // namespace

Outcome checks::centroid_of(const Run& run, Band band) {
  const TemperatureModel& t = run.model.temperature;
  return of_line(run, band, &Line::centroid_nm, &Line::centroid_u, t.centroid_nm_per_K, t.centroid_nm_per_K_u);
}

std::span<const std::string_view> evaluated_checks() {
  static const auto checks = [] {
    std::array<std::string_view, methods.size()> slugs;
    std::transform(methods.begin(), methods.end(), slugs.begin(), [](const Method& m) { return m.check; });
    return slugs;
  }();
  return checks;
}

bool carries_uncertainty(std::string_view check) {
  const Check* found = find_check(check);
  return found != nullptr && found->dimension != Dimension::yes_no;
}

std::vector<Reading> evaluate(const Model& model, const Certificates& certificates, const Captures& captures) {
  const PerBand<Result<Spectrum>> spectra{band_spectrum(certificates, captures, Band::red),
                                          band_spectrum(certificates, captures, Band::infrared)};
  Run run{model,
          certificates,
          captures,
          spectra,
          {line_of(certificates, captures, spectra.red, Band::red),
           line_of(certificates, captures, spectra.infrared, Band::infrared)},
          fit_all(model, certificates, captures)};
  if (wants_saturation_error(model)) run.weighed = weigh(run);
  const std::string fault = hard_fault(run);
  std::vector<Reading> readings;
  for (const Method& method : methods) {
    if (!model.has_check(method.check)) continue;
    Outcome outcome = method.compute(run);
    if (const std::string by = blocked_by(run, fault, method.check, outcome); !by.empty())
      outcome = none("blocked_by:" + by);
    readings.push_back(finished(model, method, std::move(outcome)));
  }
  return readings;
}

}  // namespace probewright::measure
