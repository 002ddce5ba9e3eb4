#include "limits/words.h"
#include "station/base/numbers.h"
#include "station/text/lab_file.h"
#include "station/text/measure.h"
#include "station/text/table.h"

namespace probewright::text {
namespace {

bool has_dark(const CsvTable& table) { return table.column("dark_a") >= 0 || table.column("dark_b") >= 0; }

/// What an option lacks or cannot be: the person's, not the train's, to mend.
std::optional<Problem> wrong_option(const MeasurePulsesOptions& options) {
  if (!options.rate_Hz && !options.free_frequency) return Problem{"usage_rate_needed", "probewright measure pulses"};
  for (const auto& [name, value] : {std::pair{"--rate-Hz", options.rate_Hz}, std::pair{"--cycle-s", options.cycle_s}})
    if (value && !(*value > 0.0)) return Problem{"usage_not_above_zero", name, {{"value", shortest(*value)}}};
  return std::nullopt;
}

Json json_of(const measure::LabBand& band) {
  Json uncertainty = Json::object();
  uncertainty.set("dc_nA", band.dc_nA.expanded_uncertainty).set("ac_nA", band.ac_nA.expanded_uncertainty);
  uncertainty.set("modulation", band.modulation.expanded_uncertainty);
  uncertainty.set("phase_rad", band.phase_rad.expanded_uncertainty);
  if (band.rate_Hz) uncertainty.set("rate_Hz", band.rate_Hz->expanded_uncertainty);
  Json json = Json::object();
  json.set("dc_nA", band.dc_nA.value).set("ac_nA", band.ac_nA.value).set("modulation", band.modulation.value);
  json.set("phase_rad", band.phase_rad.value).set("residual_relative", band.residual_relative);
  if (band.rate_Hz) json.set("rate_Hz", band.rate_Hz->value);
  json.set("expanded_uncertainty", std::move(uncertainty));
  return json;
}

Json json_of(const measure::LabPulses& pulses) {
  Json json = Json::object();
  json.set("format", 1).set("red", json_of(pulses.band.red)).set("infrared", json_of(pulses.band.infrared));
  json.set("ratio", pulses.ratio.value).set("ratio_expanded_uncertainty", pulses.ratio.expanded_uncertainty);
  return json;
}

void add(Table& table, const std::string& band, const measure::LabBand& pulses) {
  table.add(cells_of(band + ", DC", pulses.dc_nA));
  table.add(cells_of(band + ", AC", pulses.ac_nA));
  table.add(cells_of(band + ", AC/DC", pulses.modulation));
  table.add(cells_of(band + ", phase", pulses.phase_rad));
  if (pulses.rate_Hz) table.add(cells_of(band + ", rate", *pulses.rate_Hz));
  table.add({band + ", residual over DC",
             fixed(pulses.residual_relative, limits::decimals_for(0.0, pulses.residual_relative))});
}

void print(const measure::LabPulses& pulses, const MeasurePulsesOptions& options, Console& console) {
  Table table({"", "value", "U (k = 2)", "unit"}, {Side::left, Side::right, Side::right});
  add(table, "red", pulses.band.red);
  add(table, "infrared", pulses.band.infrared);
  table.add(cells_of("ratio R", pulses.ratio));
  console.print(options.file);
  console.print(table.text(2));
  console.print(
      "AC is the amplitude of the fundamental. U holds the noise of the fit, not the instrument's calibration.");
}

}  // namespace

int measure_pulses(const MeasurePulsesOptions& options, Console& console) {
  if (const auto wrong = wrong_option(options)) return console.refuse(*wrong);
  const auto table = read_lab_file(options.file, measure::lab_pulse_columns());
  if (!table) return console.refuse(table.error());
  if (has_dark(*table) && !options.cycle_s) return console.refuse(Problem{"pulses_cycle_needed", options.file});
  const auto pulses = measure::measure_pulses(*table, {options.rate_Hz, options.free_frequency, options.cycle_s});
  if (!pulses) return console.refuse(in_file(pulses.error(), options.file), answer_is_no);
  if (console.json())
    console.print_json(json_of(*pulses));
  else
    print(*pulses, options, console);
  return done;
}

}  // namespace probewright::text
