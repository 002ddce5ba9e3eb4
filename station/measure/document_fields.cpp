#include "station/measure/document_fields.h"

#include "station/base/numbers.h"

namespace probewright::measure::fields {
namespace {

void check_range(double value, Range range, std::string_view key, yaml::Place place, std::string_view problem,
                 yaml::Faults& faults) {
  if (value >= range.least && value <= range.most) return;
  faults.add(place, problem,
             {{"key", std::string{key}},
              {"value", shortest(value)},
              {"least", shortest(range.least)},
              {"most", shortest(range.most)}});
}

}  // namespace

std::string text(yaml::Map& map, std::string_view key, yaml::Faults& faults) {
  const auto value = map.need(key, faults);
  return value ? value->text(faults).value_or("") : "";
}

std::optional<std::string> maybe_text(yaml::Map& map, std::string_view key, yaml::Faults& faults) {
  const auto value = map.maybe(key);
  return value ? value->text(faults) : std::nullopt;
}

double number(yaml::Map& map, std::string_view key, Range range, std::string_view problem, yaml::Faults& faults) {
  const auto value = map.need(key, faults);
  const auto number = value ? value->number(faults) : std::nullopt;
  if (!number) return range.least;
  check_range(*number, range, key, value->place(), problem, faults);
  return *number;
}

double quantity(yaml::Map& map, std::string_view key, std::string_view unit, Range range, std::string_view problem,
                yaml::Faults& faults) {
  const auto value = map.need(key, faults);
  const auto number = value ? value->quantity(unit, faults) : std::nullopt;
  if (!number) return range.least;
  check_range(*number, range, key, value->place(), problem, faults);
  return *number;
}

long long integer(yaml::Map& map, std::string_view key, Range range, std::string_view problem, yaml::Faults& faults) {
  const auto value = map.need(key, faults);
  const auto number = value ? value->integer(faults) : std::nullopt;
  if (!number) return static_cast<long long>(range.least);
  check_range(static_cast<double>(*number), range, key, value->place(), problem, faults);
  return *number;
}

std::optional<yaml::Map> map(yaml::Map& parent, std::string_view key, yaml::Faults& faults) {
  const auto value = parent.need(key, faults);
  return value ? value->map(faults) : std::nullopt;
}

std::optional<yaml::List> list(yaml::Map& parent, std::string_view key, yaml::Faults& faults) {
  const auto value = parent.need(key, faults);
  return value ? value->list(faults) : std::nullopt;
}

yaml::Place place_of(yaml::Map& map, std::string_view key) {
  const auto value = map.maybe(key);
  return value ? value->place() : map.place();
}

}  // namespace probewright::measure::fields
