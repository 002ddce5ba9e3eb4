#pragma once
#include <optional>
#include <string>
#include <string_view>

#include "station/base/strict_yaml.h"

// Reading of single fields, shared by the documents of this folder. Each tells `faults` what is wrong and returns a
// stand-in, so that reading goes on and all faults are told at once. Inside this folder only.
namespace probewright::measure::fields {

/// An allowed range, ends included, and the problem to tell outside it.
struct Range {
  double least, most;
};

std::string text(yaml::Map& map, std::string_view key, yaml::Faults& faults);
std::optional<std::string> maybe_text(yaml::Map& map, std::string_view key, yaml::Faults& faults);
/// A bare number (its unit stands in the key). `problem` is told outside the range, with {key}, {value}, {least},
/// {most}.
double number(yaml::Map& map, std::string_view key, Range range, std::string_view problem, yaml::Faults& faults);
/// A number with a unit, converted to `unit`.
double quantity(yaml::Map& map, std::string_view key, std::string_view unit, Range range, std::string_view problem,
                yaml::Faults& faults);
long long integer(yaml::Map& map, std::string_view key, Range range, std::string_view problem, yaml::Faults& faults);
/// The map or list under a key that must be there.
std::optional<yaml::Map> map(yaml::Map& parent, std::string_view key, yaml::Faults& faults);
std::optional<yaml::List> list(yaml::Map& parent, std::string_view key, yaml::Faults& faults);
/// Place of a key's value, or of the map when it is missing.
yaml::Place place_of(yaml::Map& map, std::string_view key);

}  // namespace probewright::measure::fields
