#include "station/base/numbers.h"

#include <array>
#include <charconv>
#include <cmath>

namespace probewright {

std::string shortest(double value) {
  std::array<char, 32> text{};
  const auto end = std::to_chars(text.data(), text.data() + text.size(), value).ptr;
  return {text.data(), end};
}

std::string fixed(double value, int decimals) {
  // The largest double has 309 digits before the point.
  std::string text(static_cast<std::size_t>(320 + decimals), '\0');
  const auto end = std::to_chars(text.data(), text.data() + text.size(), value, std::chars_format::fixed, decimals).ptr;
  text.resize(static_cast<std::size_t>(end - text.data()));
  const bool only_zeros = text.find_first_not_of("-0.") == std::string::npos;
  return only_zeros && text.starts_with('-') ? text.substr(1) : text;  // "-0.00" tells a reader nothing
}

std::optional<double> parse_double(std::string_view text) {
  double value = 0.0;
  const char* const end = text.data() + text.size();
  const auto [stop, error] = std::from_chars(text.data(), end, value);
  if (error != std::errc{} || stop != end || !std::isfinite(value)) return std::nullopt;
  return value;
}

std::optional<long long> parse_integer(std::string_view text) {
  long long value = 0;
  const char* const end = text.data() + text.size();
  const auto [stop, error] = std::from_chars(text.data(), end, value);
  if (error != std::errc{} || stop != end) return std::nullopt;
  return value;
}

}  // namespace probewright
