#include "limits/reader/parts.h"

#include "limits/fixed_number.h"
#include "station/base/numbers.h"

namespace probewright::limits::reader {

std::optional<double> amount(const Value& value, std::string_view unit, Faults& faults) {
  const auto quantity = value.quantity(unit, faults);
  if (!quantity) return {};
  return fixed_number(*quantity);
}

std::string as_written(const Value& value) {
  if (!value.is_scalar()) return {};
  Faults unheard{""};
  return value.text(unheard).value_or("");
}

std::string hint(std::string_view word, const std::vector<std::string>& words, std::string_view otherwise) {
  const std::string nearest = yaml::nearest_word(word, words);
  return nearest.empty() ? std::string{otherwise} : "did you mean \"" + nearest + "\"?";
}

std::string with_unit(double value, std::string_view unit) {
  if (unit == "1" || unit == "yes/no") return shortest(value);
  return shortest(value) + " " + std::string{unit == "%SpO2" ? "points" : unit};
}

std::optional<double> read_at(Map& map, Faults& faults) {
  constexpr double reference_degC = 25.0;
  const auto value = map.maybe("at");
  if (!value) return {};
  const auto at_degC = amount(*value, "degC", faults);
  if (at_degC && *at_degC != reference_degC)
    faults.add(value->place(), "sheet_at_other_temperature", {{"text", as_written(*value)}});
  return at_degC;
}

}  // namespace probewright::limits::reader
