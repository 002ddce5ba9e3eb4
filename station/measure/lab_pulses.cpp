#include "station/measure/lab.h"

namespace probewright::measure {
namespace {

constexpr double coverage_factor = 2.0;

const std::vector<double>* column_of(const CsvTable& table, std::string_view name) {
  const int index = table.column(name);
  return index < 0 ? nullptr : &table.columns[static_cast<std::size_t>(index)];
}

Result<PerBand<Train>> trains_of(const CsvTable& table, const LabPulseOptions& options) {
  const auto &t = *column_of(table, "t_s"), &red = *column_of(table, "red"), &infrared = *column_of(table, "infrared");
  const auto *dark_a = column_of(table, "dark_a"), *dark_b = column_of(table, "dark_b");
  if ((dark_a == nullptr) != (dark_b == nullptr)) return Problem{"pulses_one_dark", ""};
  if (dark_a == nullptr) return PerBand<Train>{{t, red}, {t, infrared}};
  if (!options.cycle_s || !(*options.cycle_s > 0.0)) return Problem{"pulses_cycle_needed", ""};
  return subtract_dark(red, *dark_a, infrared, *dark_b, t, *options.cycle_s);
}

LabBand lab_band(const PulseFit& fit, bool free_rate) {
  const auto figure = [](double value, double u, const char* unit) { return Figure{value, coverage_factor * u, unit}; };
  LabBand out;
  out.dc_nA = figure(fit.dc, fit.dc_u, "nA");
  out.ac_nA = figure(fit.ac, fit.ac_u, "nA");
  out.modulation = figure(fit.modulation, fit.modulation_u, "1");
  out.phase_rad = figure(fit.phase_rad, fit.phase_u_rad, "rad");
  if (free_rate) out.rate_Hz = figure(fit.rate_Hz, fit.rate_u_Hz, "Hz");
  out.residual_relative = fit.residual_relative;
  return out;
}

}  // namespace

CsvRules lab_pulse_columns() {
  CsvRules rules;
  rules.needed = {"t_s", "red", "infrared"};
  rules.optional = {"dark_a", "dark_b"};
  return rules;
}

Result<LabPulses> measure_pulses(const CsvTable& table, const LabPulseOptions& options) {
  const auto trains = trains_of(table, options);
  if (!trains) return trains.error();
  const PulseRules rules{options.rate_Hz, options.free_rate};
  const auto red = fit_pulses(trains->red, rules), infrared = fit_pulses(trains->infrared, rules);
  if (!red) return red.error();
  if (!infrared) return infrared.error();
  const auto ratio = ratio_of({*red, *infrared});
  if (!ratio) return ratio.error();
  LabPulses out;
  out.band.red = lab_band(*red, options.free_rate);
  out.band.infrared = lab_band(*infrared, options.free_rate);
  out.ratio = {ratio->value, coverage_factor * ratio->noise_u, "1"};
  return out;
}

}  // namespace probewright::measure
