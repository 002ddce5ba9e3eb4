#include <algorithm>

#include "limits/diagnosis/reader_parts.h"
#include "station/base/numbers.h"

namespace probewright::limits::diagnosis::reader {
namespace {

using Form = Expected::Form;

/// Far beyond anything that a device can tell.
constexpr double most_figure = 1e6;

std::optional<double> figure(std::string_view text) {
  const bool plus = text.starts_with('+');
  const auto number = parse_double(plus ? text.substr(1) : text);
  if (!number || (plus && text.substr(1).starts_with('-'))) return {};
  if (!(*number >= -most_figure && *number <= most_figure)) return {};
  return number;
}

/// "10 %" as 0.1.
std::optional<double> percent(std::string_view text) {
  if (!text.ends_with(" %")) return {};
  const auto number = parse_double(text.substr(0, text.size() - 2));
  if (!number || !(*number > 0.0 && *number <= 100.0)) return {};
  return 0.01 * *number;
}

std::optional<Expected> missing(std::string_view text) {
  if (text.empty()) return Expected{Form::no_reading, 0.0, 0.0, {}};
  if (!text.starts_with(" (") || !text.ends_with(")")) return {};
  const std::string reason{text.substr(2, text.size() - 3)};
  if (!is_slug(reason)) return {};
  return Expected{Form::no_reading, 0.0, 0.0, reason};
}

/// A bound lies off where the check usually is, on the side that is named.
std::optional<Expected> beyond(Form form, std::string_view text) {
  const auto bound = figure(text);
  if (!bound || (form == Form::above ? !(*bound > 0.0) : !(*bound < 0.0))) return {};
  return Expected{form, *bound, 0.0, {}};
}

std::optional<Expected> moved(std::string_view text, double within) {
  constexpr std::string_view known_to = " within ";
  const auto at = text.find(known_to);
  const auto by = figure(text.substr(0, at));
  const auto own = at == text.npos ? std::optional{within} : percent(text.substr(at + known_to.size()));
  if (!by || !own || *by == 0.0) return {};
  return Expected{Form::by, *by, *own, {}};
}

}  // namespace

std::optional<Expected> parse_expected(std::string_view text, double within) {
  constexpr std::string_view none = "no reading", above = "above ", below = "below ";
  if (text.starts_with(none)) return missing(text.substr(none.size()));
  if (text.starts_with(above)) return beyond(Form::above, text.substr(above.size()));
  if (text.starts_with(below)) return beyond(Form::below, text.substr(below.size()));
  return moved(text, within);
}

std::vector<Expected> read_expected(const Value& value, double within, Faults& faults) {
  std::vector<Expected> all;
  const auto take = [&](const Value& one) {
    const auto text = one.text(faults);
    if (!text) return;
    if (const auto expected = parse_expected(*text, within))
      all.push_back(*expected);
    else
      faults.add(one.place(), "rules_expected", {{"text", *text}});
  };
  if (!value.is_list()) return take(value), all;
  const auto alternatives = value.list(faults)->items();
  if (alternatives.empty()) faults.add(value.place(), "rules_expected", {{"text", "[]"}});
  for (const Value& one : alternatives) take(one);
  const auto by = [](const Expected& one) { return one.form == Form::by; };
  if (std::count_if(all.begin(), all.end(), by) > 1) faults.add(value.place(), "rules_two_figures");
  return all;
}

}  // namespace probewright::limits::diagnosis::reader
