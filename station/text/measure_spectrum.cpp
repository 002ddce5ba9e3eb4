#include "station/text/lab_file.h"
#include "station/text/measure.h"
#include "station/text/table.h"

namespace probewright::text {
namespace {

measure::LabSpectrumOptions rules_of(const MeasureSpectrumOptions& options) {
  measure::LabSpectrumOptions rules;
  if (!options.band.empty()) rules.band = options.band == "red" ? measure::Band::red : measure::Band::infrared;
  rules.threshold = options.threshold;
  rules.slit_nm = options.slit_nm;
  rules.temperature_C = options.temperature_C;
  return rules;
}

std::optional<Problem> wrong_option(const MeasureSpectrumOptions& options) {
  if (!(options.threshold >= 0.0 && options.threshold <= 0.5))
    return Problem{"usage_out_of_range", "--threshold", {{"least", "0"}, {"most", "0.5"}}};
  if (!(options.slit_nm >= 0.0 && options.slit_nm <= 50.0))
    return Problem{"usage_out_of_range", "--slit-nm", {{"least", "0"}, {"most", "50"}}};
  if (options.temperature_C && !(*options.temperature_C >= -40.0 && *options.temperature_C <= 125.0))
    return Problem{"usage_out_of_range", "--temperature-C", {{"least", "-40"}, {"most", "125"}}};
  return std::nullopt;
}

Json json_of(const measure::LabSpectrum& spectrum, const MeasureSpectrumOptions& options) {
  Json json = Json::object();
  json.set("format", 1).set("band", measure::slug(spectrum.band)).set("threshold", options.threshold);
  json.set("slit_nm", options.slit_nm).set("temperature_C", options.temperature_C);
  json.set("referred_to_C", options.temperature_C ? Json{25.0} : Json{});
  json.set("peak_nm", text::json_of(spectrum.peak_nm)).set("centroid_nm", text::json_of(spectrum.centroid_nm));
  json.set("half_power_centre_nm", text::json_of(spectrum.half_power_centre_nm));
  json.set("fwhm_nm", text::json_of(spectrum.fwhm_nm));
  json.set("secondary_fraction", spectrum.secondary_fraction ? text::json_of(*spectrum.secondary_fraction) : Json{});
  return json;
}

void print(const measure::LabSpectrum& spectrum, const MeasureSpectrumOptions& options, Console& console) {
  Table table({"", "value", "U (k = 2)", "unit"}, {Side::left, Side::right, Side::right});
  table.add(cells_of("peak", spectrum.peak_nm));
  table.add(cells_of("centroid", spectrum.centroid_nm));
  table.add(cells_of("half-power centre", spectrum.half_power_centre_nm));
  table.add(cells_of("width (FWHM)", spectrum.fwhm_nm));
  if (spectrum.secondary_fraction)
    table.add(cells_of("secondary emission, part of the power", *spectrum.secondary_fraction));
  const std::string referred = options.temperature_C ? ", referred to 25 degC" : "";
  console.print(options.file + ": " + std::string{measure::slug(spectrum.band)} + " line" + referred);
  console.print(table.text(2));
  console.print("U holds what the samples themselves tell (noise, grid, cut ends), not the instrument's calibration.");
}

}  // namespace

int measure_spectrum(const MeasureSpectrumOptions& options, Console& console) {
  if (const auto wrong = wrong_option(options)) return console.refuse(*wrong);
  const auto table = read_lab_file(options.file, measure::lab_spectrum_columns());
  if (!table) return console.refuse(table.error());
  const auto spectrum = measure::measure_spectrum(*table, rules_of(options));
  if (!spectrum) return console.refuse(in_file(spectrum.error(), options.file), answer_is_no);
  if (console.json())
    console.print_json(json_of(*spectrum, options));
  else
    print(*spectrum, options, console);
  return done;
}

}  // namespace probewright::text
