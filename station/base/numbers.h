#pragma once
#include <optional>
#include <string>
#include <string_view>

namespace probewright {

/// Shortest text that reads back as the same double (std::to_chars); no locale.
std::string shortest(double value);
/// `value` with `decimals` digits after the point; no locale.
std::string fixed(double value, int decimals);
/// Whole text as a double (std::from_chars) or nothing; "nan" and "inf" are refused.
std::optional<double> parse_double(std::string_view text);
/// Whole text as an integer or nothing.
std::optional<long long> parse_integer(std::string_view text);

}  // namespace probewright
