#include "station/sequence/production/true_values.h"

#include <algorithm>
#include <array>
#include <cmath>
#include <limits>
#include <span>

#include "drivers/emulated/photodiode.h"
#include "station/base/numbers.h"

namespace probewright::sequence::production {
namespace {

using emulated::LedTruth;
using emulated::RatioTruth;
using emulated::Truth;

constexpr double no_value = std::numeric_limits<double>::quiet_NaN();

struct LedRow {
  std::string_view check;  ///< without the colour
  double LedTruth::*value;
};
constexpr std::array led_rows = std::to_array<LedRow>({
    {"peak", &LedTruth::peak_nm},
    {"centroid", &LedTruth::centroid_nm},
    {"half_power_centre", &LedTruth::half_power_centre_nm},
    {"width", &LedTruth::width_nm},
    {"forward_voltage", &LedTruth::forward_voltage_V},
    {"voltage_rise", &LedTruth::voltage_rise_mV},
    {"drive", &LedTruth::drive_mA},
    {"reverse_leakage", &LedTruth::reverse_leakage_uA},
    {"warmup", &LedTruth::warmup_mV},
    {"transfer", &LedTruth::transfer_nA_per_mA},
});

struct ProbeRow {
  std::string_view check;
  double Truth::*value;
};
constexpr std::array probe_rows = std::to_array<ProbeRow>({
    {"id_resistance", &Truth::id_resistance_ohm},
    {"id_deviation", &Truth::id_deviation_percent},
    {"cable_noise", &Truth::cable_noise},
    {"mains_pickup", &Truth::mains_pickup_nA},
    {"secondary_emission", &Truth::secondary_emission_percent},
    {"dark_current", &Truth::dark_current_nA},
    {"closed_path_light", &Truth::closed_path_light_percent},
    {"slot_crosstalk", &Truth::slot_crosstalk_percent},
    {"ambient_uptake", &Truth::ambient_uptake_nA},
});

/// "red_peak" with "red": "peak"
std::optional<std::string_view> after(std::string_view text, std::string_view start) {
  if (!text.starts_with(start)) return std::nullopt;
  return text.substr(start.size());
}

std::optional<double> of_led(const LedTruth& led, std::string_view check) {
  for (const LedRow& row : led_rows)
    if (row.check == check) return led.*row.value;
  return std::nullopt;
}

/// A magnitude for checks that are told as one.
std::optional<double> of_either_led(const Truth& truth, std::string_view check) {
  const auto red = after(check, "red_"), infrared = after(check, "infrared_");
  if (!red && !infrared) return std::nullopt;
  const auto value = red ? of_led(truth.red, *red) : of_led(truth.infrared, *infrared);
  return value && check.ends_with("_warmup") ? std::abs(*value) : value;
}

/// The largest over the set points, with its sign; not a number as soon as one is none.
double largest(const Truth& truth, double RatioTruth::*value) {
  double most = 0.0;
  for (const RatioTruth& at : truth.ratios)
    if (std::isnan(at.*value) || std::abs(at.*value) > std::abs(most)) most = at.*value;
  return most;
}

/// "0p4": 0.4
std::optional<double> ratio_named(std::string_view name) {
  std::string text{name};
  std::replace(text.begin(), text.end(), 'p', '.');
  return parse_double(text);
}

std::optional<double> ratio_deviation(const Truth& truth, std::string_view at) {
  const auto nominal = ratio_named(at);
  for (const RatioTruth& ratio : truth.ratios)
    if (nominal && std::abs(ratio.nominal - *nominal) < 1e-9) return ratio.ratio_deviation_percent;
  return std::nullopt;
}

/// Straight line of the true over the stored ratios, by the textbook's sums.
struct Straight {
  double slope = 0.0, offset = 0.0, farthest = 0.0;
};
Straight straight_through(std::span<const RatioTruth> ratios) {
  const auto n = static_cast<double>(ratios.size());
  double x = 0.0, y = 0.0, xx = 0.0, xy = 0.0;
  for (const RatioTruth& at : ratios)
    x += at.nominal, y += at.ratio, xx += at.nominal * at.nominal, xy += at.nominal * at.ratio;
  Straight line;
  line.slope = (n * xy - x * y) / (n * xx - x * x);
  line.offset = (y - line.slope * x) / n;
  for (const RatioTruth& at : ratios) {
    const double distance = std::abs(at.ratio - line.offset - line.slope * at.nominal);
    if (!(distance <= line.farthest)) line.farthest = distance;
  }
  return line;
}

std::optional<double> of_ratios(const Truth& truth, std::string_view check) {
  if (const auto at = after(check, "ratio_deviation_")) return ratio_deviation(truth, *at);
  if (check == "red_modulation_deviation") return largest(truth, &RatioTruth::red_modulation_deviation_percent);
  if (check == "infrared_modulation_deviation")
    return largest(truth, &RatioTruth::infrared_modulation_deviation_percent);
  if (check == "ratio_slope") return straight_through(truth.ratios).slope;
  if (check == "ratio_offset") return straight_through(truth.ratios).offset;
  if (check == "ratio_nonlinearity") return straight_through(truth.ratios).farthest;
  return std::nullopt;
}

constexpr double grid_from_nm = 590.0, grid_to_nm = 1060.0, grid_step_nm = 0.5;

double responsivity_at(const measure::SaturationModel& model, double nm) {
  const auto& rows = model.responsivity;
  if (rows.empty()) return 1.0;
  const auto above = std::find_if(rows.begin(), rows.end(), [nm](const auto& row) { return row.wavelength_nm >= nm; });
  if (above == rows.begin()) return rows.front().relative;
  if (above == rows.end()) return rows.back().relative;
  const auto& below = *(above - 1);
  return std::lerp(below.relative, above->relative,
                   (nm - below.wavelength_nm) / (above->wavelength_nm - below.wavelength_nm));
}

emulated::BloodGrid blood_of(const measure::SaturationModel& model) {
  emulated::BloodGrid grid{grid_from_nm, grid_step_nm, {}};
  for (double nm = grid_from_nm; nm <= grid_to_nm; nm += grid_step_nm) {
    const double inside = std::clamp(nm, model.haemoglobin->from_nm(), model.haemoglobin->to_nm());
    const measure::Extinction extinction = model.haemoglobin->at(inside).value();
    grid.points.push_back({extinction.oxygenated, extinction.deoxygenated, responsivity_at(model, nm)});
  }
  return grid;
}

emulated::LineShape nominal_of(const measure::LineShape& shape, double centroid_nm) {
  return emulated::nominal_line(centroid_nm, shape.width_nm, shape.skew);
}

}  // namespace

TrueValues::TrueValues(const measure::Model& model) : model_(model) {
  if (!model.saturation || !model.saturation->haemoglobin) return;
  const measure::SaturationModel& with = *model.saturation;
  const auto displayed = [&with](double ratio) { return with.curve.saturation_at(ratio).value_or(no_value); };
  const auto ratio_showing = [&with](double saturation) { return with.curve.ratio_at(saturation).value_or(no_value); };
  const emulated::BloodGrid blood = blood_of(with);
  for (const measure::Bin& bin : model.bins)
    standards_[bin.name] = {blood, displayed, ratio_showing, nominal_of(with.shape.red, bin.nominal_nm.red),
                            nominal_of(with.shape.infrared, bin.nominal_nm.infrared)};
}

std::optional<double> TrueValues::saturation_error(const Truth& truth, double saturation) const {
  const auto standard = standards_.find(truth.probe.coded_bin);
  if (standard == standards_.end()) return std::nullopt;
  if (std::isinf(truth.id_resistance_ohm)) return no_value;  // no bin to compare with
  return emulated::true_saturation_error(truth.probe, saturation, standard->second);
}

std::optional<double> TrueValues::bin_mismatch(const Truth& truth) const {
  for (const measure::Bin& bin : model_.bins)
    if (bin.name == truth.probe.coded_bin) return truth.red.centroid_nm - bin.nominal_nm.red;
  return std::nullopt;
}

std::optional<double> TrueValues::of(const Truth& truth, std::string_view check) const {
  if (check == "probe_present") return 1.0;
  if (check == "bin_mismatch") return bin_mismatch(truth);
  for (const ProbeRow& row : probe_rows)
    if (row.check == check) return truth.*row.value;
  if (const auto at = after(check, "saturation_error_")) {
    const auto saturation = parse_double(*at);
    return saturation ? saturation_error(truth, *saturation) : std::nullopt;
  }
  if (const auto value = of_ratios(truth, check)) return value;
  return of_either_led(truth, check);
}

std::optional<double> TrueValues::at_station(const Truth& truth, std::string_view check,
                                             const emulated::StationErrors& errors, double room_degC) const {
  if (check == "dark_current_as_found")
    return emulated::dark_current_nA(truth.probe.photodiode, room_degC, model_.dark_bias_V);
  const auto value = of(truth, check);
  return value && check.ends_with("_drive") ? *value * (1.0 + errors.source_gain) : value;
}

}  // namespace probewright::sequence::production
