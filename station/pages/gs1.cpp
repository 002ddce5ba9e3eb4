#include "station/pages/gs1.h"

#include <algorithm>
#include <array>

namespace probewright::pages::gs1 {
namespace {

constexpr std::size_t longest_value = 20;

bool all_digits(std::string_view text) {
  return std::all_of(text.begin(), text.end(), [](char c) { return c >= '0' && c <= '9'; });
}

int number_at(std::string_view digits, std::size_t at) { return (digits[at] - '0') * 10 + (digits[at + 1] - '0'); }

// Character set 82 of the GS1 General Specifications (from memory: figure "unique graphic character allocations").
bool in_set_82(char c) {
  constexpr std::string_view marks = "!\"%&'()*+,-./:;<=>?_";
  return (c >= '0' && c <= '9') || (c >= 'A' && c <= 'Z') || (c >= 'a' && c <= 'z') ||
         marks.find(c) != std::string_view::npos;
}

int days_in(int month, int year) {
  constexpr std::array days{31, 28, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31};
  const bool leap = (year % 4 == 0 && year % 100 != 0) || year % 400 == 0;
  return days.at(static_cast<std::size_t>(month - 1)) + (month == 2 && leap ? 1 : 0);
}

// The century of AI 11 is not in the text. Every year 2000 + YY that divides by four is a leap year, and so was 1900 +
// YY but for 1900 itself, when nothing of this kind was made.
bool is_yymmdd(std::string_view text) {
  if (text.size() != 6 || !all_digits(text)) return false;
  const int month = number_at(text, 2);
  return month >= 1 && month <= 12 && number_at(text, 4) <= days_in(month, 2000 + number_at(text, 0));
}

std::optional<Problem> fault_of_value(std::string_view ai, std::string_view value) {
  if (value.size() > longest_value)
    return Problem{"gs1_length", "", {{"ai", std::string{ai}}, {"value", std::string{value}}}};
  if (!std::all_of(value.begin(), value.end(), in_set_82))
    return Problem{"gs1_value", "", {{"ai", std::string{ai}}, {"value", std::string{value}}}};
  return std::nullopt;
}

// One kind of element: where it stands and how long it is; 0: up to the separator or the end.
struct Kind {
  std::string_view ai;
  std::string Elements::*value;
  std::size_t length;
};
constexpr std::array<Kind, 4> kinds{{{"01", &Elements::gtin, 14},
                                     {"11", &Elements::production_date, 6},
                                     {"10", &Elements::lot, 0},
                                     {"21", &Elements::serial, 0}}};

Result<std::string> written(const Elements& elements, std::string_view open, std::string_view close,
                            std::string_view between) {
  if (auto fault = fault_of(elements)) return *fault;
  std::string text, pending;
  for (const Kind& kind : kinds) {
    const std::string& value = elements.*kind.value;
    if (value.empty()) continue;
    text += pending;
    text.append(open).append(kind.ai).append(close).append(value);
    pending = kind.length == 0 ? between : "";
  }
  return text;
}

// Takes the value of `kind` off the front of `rest`, with its separator.
Result<std::string> take(const Kind& kind, std::string_view& rest) {
  const std::size_t end = std::min(rest.find(separator), rest.size());
  const std::size_t length = kind.length == 0 ? end : kind.length;
  if (length == 0 || end < length) return Problem{"gs1_cut_short", "", {{"ai", std::string{kind.ai}}}};
  std::string value{rest.substr(0, length)};
  rest.remove_prefix(length);
  if (!rest.empty() && rest.front() == separator) rest.remove_prefix(1);
  return value;
}

}  // namespace

std::optional<char> check_digit(std::string_view digits) {
  if (digits.empty() || !all_digits(digits)) return std::nullopt;
  int sum = 0, weight = 3;
  for (auto digit = digits.rbegin(); digit != digits.rend(); ++digit, weight = 4 - weight)
    sum += weight * (*digit - '0');
  return static_cast<char>('0' + (10 - sum % 10) % 10);
}

Result<std::string> gtin_14(std::string_view gtin) {
  const std::string text{gtin};
  if (!all_digits(gtin)) return Problem{"gs1_gtin_digits", "", {{"gtin", text}}};
  if (gtin.size() != 8 && (gtin.size() < 12 || gtin.size() > 14))
    return Problem{"gs1_gtin_length", "", {{"gtin", text}}};
  const auto wanted = check_digit(gtin.substr(0, gtin.size() - 1));
  if (wanted != gtin.back())
    return Problem{"gs1_check_digit", "", {{"gtin", text}, {"wanted", std::string(1, *wanted)}}};
  return std::string(14 - gtin.size(), '0') + text;
}

bool is_example(std::string_view gtin_14_digits) {
  return gtin_14_digits.size() == 14 && gtin_14_digits.substr(1, 3) == "952";
}

Result<std::string> yymmdd(std::string_view day) {
  const Problem refused{"gs1_date", "", {{"value", std::string{day}}}};
  if (day.size() != 10 || day[4] != '-' || day[7] != '-') return refused;
  const std::string text{std::string{day.substr(2, 2)}.append(day.substr(5, 2)).append(day.substr(8, 2))};
  if (!all_digits(day.substr(0, 2)) || !is_yymmdd(text) || text.ends_with("00")) return refused;
  return text;
}

std::optional<Problem> fault_of(const Elements& elements) {
  if (elements.gtin.empty()) return Problem{"gs1_no_gtin", ""};
  const auto gtin = gtin_14(elements.gtin);
  if (gtin.has_error()) return gtin.error();
  if (elements.gtin.size() != 14) return Problem{"gs1_gtin_length", "", {{"gtin", elements.gtin}}};
  if (!elements.production_date.empty() && !is_yymmdd(elements.production_date))
    return Problem{"gs1_date", "", {{"value", elements.production_date}}};
  if (auto fault = fault_of_value("10", elements.lot)) return fault;
  if (elements.serial.empty()) return Problem{"gs1_no_serial", ""};
  return fault_of_value("21", elements.serial);
}

Result<std::string> element_string(const Elements& elements) {
  return written(elements, "", "", std::string_view{&separator, 1});
}

Result<std::string> bracketed(const Elements& elements, char open, char close) {
  return written(elements, {&open, 1}, {&close, 1}, "");
}

Result<Elements> parse(std::string_view scanned) {
  Elements elements;
  std::string_view rest = scanned;
  if (rest.starts_with(data_matrix_identifier)) rest.remove_prefix(data_matrix_identifier.size());
  while (!rest.empty()) {
    const std::string ai{rest.substr(0, 2)};
    const auto kind = std::find_if(kinds.begin(), kinds.end(), [&](const Kind& k) { return k.ai == ai; });
    if (kind == kinds.end()) return Problem{"gs1_unknown_ai", "", {{"ai", ai}}};
    rest.remove_prefix(ai.size());
    if (!(elements.*kind->value).empty()) return Problem{"gs1_twice", "", {{"ai", ai}}};
    auto value = take(*kind, rest);
    if (value.has_error()) return value.error();
    elements.*kind->value = *value;
  }
  if (auto fault = fault_of(elements)) return *fault;
  return elements;
}

}  // namespace probewright::pages::gs1
