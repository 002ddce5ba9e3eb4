#pragma once
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "limits/sheet.h"
#include "station/base/catalogue.h"
#include "station/base/strict_yaml.h"

// The parts of the sheet's reader, one file each. Every part tells `faults` what is wrong and goes on with what it can
// still read; what it returns is only used when there was no fault at all.
namespace probewright::limits::reader {

using yaml::Faults;
using yaml::Map;
using yaml::Value;

struct ReadChecks {
  std::vector<CheckRule> rules;  ///< those without a fault, in catalogue order
  std::vector<std::string>
      named;  ///< every check that the sheet names, faulty or not; the nearest one for a misspelt name
};
ReadChecks read_checks(const Value& value, Faults& faults);

/// The rule of one check of the catalogue. `key_place` is where its name stands.
std::optional<CheckRule> read_rule(const Check& check, yaml::Place key_place, const Value& value, Faults& faults);
/// The same for a map without `watch`, and for one with it.
std::optional<CheckRule> read_judged(const Check& check, yaml::Place key_place, Map map, Faults& faults);
std::optional<CheckRule> read_watched(const Check& check, Map map, Faults& faults);

/// Bins, which must fill the window of the check that sorts. Resistors outside E96 are `warnings`.
std::optional<Bins> read_bins(const Value& value, const ReadChecks& checks, Faults& faults, Faults& warnings);

Retest read_retest(const Value& value, Faults& faults);
StopWhen read_stop_when(const Value& value, Faults& faults);

/// A number with a unit, in `unit`, as a fixed number.
std::optional<double> amount(const Value& value, std::string_view unit, Faults& faults);
/// The scalar as it stands in the file, for messages; "" for a map or list.
std::string as_written(const Value& value);
/// "did you mean red_centroid?", or what stands in `otherwise` when no word is near.
std::string hint(std::string_view word, const std::vector<std::string>& words, std::string_view otherwise);
/// "655 nm", "0.3 %", "1 points"; the number alone for a check without a unit.
std::string with_unit(double value, std::string_view unit);
/// The temperature that the limits hold for: readings are referred to 25 degC and to nothing else.
std::optional<double> read_at(Map& map, Faults& faults);

}  // namespace probewright::limits::reader
