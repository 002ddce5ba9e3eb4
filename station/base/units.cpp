#include "station/base/units.h"

#include <algorithm>
#include <array>
#include <charconv>
#include <cmath>
#include <optional>

#include "station/base/words.h"

namespace probewright {
namespace {

using enum Dimension;

/// value in the dimension's base unit = value * times * 10^power + offset. The power of ten is kept apart, so that
/// "260 uA" in mA is the double nearest to 0.26 and not a product of two rounded numbers.
struct Unit {
  std::string_view text;
  Dimension dimension;
  int power;
  double times = 1.0;
  double offset = 0.0;
};

constexpr std::array units = std::to_array<Unit>({
    {"nm", length, -9},
    {"um", length, -6},
    {"A", current, 0},
    {"mA", current, -3},
    {"uA", current, -6},
    {"nA", current, -9},
    {"pA", current, -12},
    {"V", voltage, 0},
    {"mV", voltage, -3},
    {"ohm", resistance, 0},
    {"kohm", resistance, 3},
    {"Mohm", resistance, 6},
    {"s", time, 0},
    {"ms", time, -3},
    {"us", time, -6},
    {"min", time, 0, 60.0},
    {"h", time, 0, 3600.0},
    {"K", temperature, 0},
    {"degC", temperature, 0, 1.0, 273.15},
    {"%", ratio, 0},
    {"points", saturation, 0},
    {"%SpO2", saturation, 0},
    {"nA/mA", responsivity, 0},
    {"1", none, 0},
    {"yes/no", yes_no, 0},
});

const Unit* find_unit(std::string_view text) {
  const auto found = std::find_if(units.begin(), units.end(), [text](const Unit& u) { return u.text == text; });
  return found == units.end() ? nullptr : &*found;
}

/// Units that a person writes after a number.
bool is_written(const Unit& unit) { return unit.dimension != none && unit.dimension != yes_no; }

/// The signs that people type for our letters.
std::string in_our_letters(std::string text) {
  constexpr std::pair<std::string_view, std::string_view> signs[] = {
      {"\u00B5", "u"}, {"\u03BC", "u"}, {"\u03A9", "ohm"}, {"\u2126", "ohm"}, {"\u00B0", "deg"}};
  for (const auto& [sign, ours] : signs)
    for (auto at = text.find(sign); at != std::string::npos; at = text.find(sign)) text.replace(at, sign.size(), ours);
  return text;
}

char lower(char c) { return c >= 'A' && c <= 'Z' ? static_cast<char>(c - 'A' + 'a') : c; }

std::string lower(std::string_view text) {
  std::string small{text};
  for (char& c : small) c = lower(c);
  return small;
}

/// The known unit nearest to `text`: the case of letters counts less than a wrong letter.
std::string_view nearest_unit(std::string_view text) {
  const std::string ours = in_our_letters(std::string{text}), small = lower(ours);
  const auto distance = [&](const Unit& u) {
    return 8 * edit_distance(small, lower(u.text)) + edit_distance(ours, u.text);
  };
  const Unit* best = nullptr;
  for (const Unit& unit : units)
    if (is_written(unit) && (best == nullptr || distance(unit) < distance(*best))) best = &unit;
  return best->text;
}

Problem unknown_unit(std::string_view unit, std::string_view where) {
  return {"unit_unknown", where, {{"unit", std::string{unit}}, {"nearest", std::string{nearest_unit(unit)}}}};
}

std::string_view trimmed(std::string_view text) {
  while (!text.empty() && text.front() == ' ') text.remove_prefix(1);
  while (!text.empty() && text.back() == ' ') text.remove_suffix(1);
  return text;
}

/// What may not follow a number at once: these make another number of it, or a slip such as "1,5" or "0x10".
bool spoils_a_number(char c) {
  return (c >= '0' && c <= '9') || c == '.' || c == ',' || c == '+' || c == '-' || c == 'x' || c == 'X';
}

double power_of_ten(double value, int power) {
  // 10^n is exact for n up to 22, so one multiplication or division rounds once.
  const double ten = std::pow(10.0, std::abs(power));
  return power >= 0 ? value * ten : value / ten;
}

double convert(double value, const Unit& from, const Unit& to) {
  if (from.times != to.times) value = value * from.times / to.times;
  if (from.offset != to.offset) value += from.offset - to.offset;
  return power_of_ten(value, from.power - to.power);
}

std::string_view name_of(Dimension dimension) {
  switch (dimension) {
    case yes_no:
      return "yes or no";
    case ratio:
      return "a part of something";
    case current:
      return "a current";
    case voltage:
      return "a voltage";
    case resistance:
      return "a resistance";
    case length:
      return "a length";
    case time:
      return "a time";
    case temperature:
      return "a temperature";
    case saturation:
      return "points of saturation";
    case responsivity:
      return "current per current";
    case none:
      return "a bare number";
  }
  return "";
}

}  // namespace

Result<Quantity> parse_quantity(std::string_view text, std::string_view where) {
  const std::string_view all = trimmed(text);
  const auto malformed = [&] { return Problem{"number_malformed", where, {{"text", std::string{text}}}}; };
  std::string_view digits = all;
  if (digits.starts_with('+') && digits.size() > 1 && digits[1] != '-') digits.remove_prefix(1);
  double value = 0.0;
  const auto [stop, error] = std::from_chars(digits.data(), digits.data() + digits.size(), value);
  if (error == std::errc::invalid_argument) return malformed();
  if (error != std::errc{} || !std::isfinite(value))
    return Problem{"number_not_finite", where, {{"text", std::string{text}}}};
  const std::string_view rest{stop, static_cast<std::size_t>(digits.data() + digits.size() - stop)};
  if (!rest.empty() && spoils_a_number(rest.front())) return malformed();
  const std::string_view unit = trimmed(rest);
  const Unit* known = find_unit(unit);
  if (!unit.empty() && (known == nullptr || !is_written(*known))) return unknown_unit(unit, where);
  return Quantity{value, std::string{unit}};
}

Result<double> in_unit(const Quantity& quantity, std::string_view unit, std::string_view where) {
  const Unit* to = find_unit(unit);
  if (to == nullptr) return unknown_unit(unit, where);
  if (quantity.unit.empty()) {
    if (to->dimension == none) return quantity.value;
    return Problem{"unit_missing", where, {{"unit", std::string{unit}}}};
  }
  const Unit* from = find_unit(quantity.unit);
  if (from == nullptr) return unknown_unit(quantity.unit, where);
  if (from->dimension != to->dimension)
    return Problem{"unit_mismatch",
                   where,
                   {{"unit", quantity.unit},
                    {"found", std::string{name_of(from->dimension)}},
                    {"wanted", std::string{name_of(to->dimension)}},
                    {"wanted_unit", std::string{unit}}}};
  return convert(quantity.value, *from, *to);
}

Result<Dimension> dimension_of(std::string_view unit) {
  if (const Unit* known = find_unit(unit)) return known->dimension;
  return unknown_unit(unit, {});
}

}  // namespace probewright
