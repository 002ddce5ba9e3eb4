#pragma once
#include <optional>
#include <string>
#include <string_view>

#include "limits/limits.h"
#include "station/base/catalogue.h"

namespace probewright::limits {

/// The unit of a check as people read it: "nm", "points", "% of certificate", "" for a bare number.
std::string unit_words(const Check& check);

/// The same without what "%" is of, for the second number of a sentence: "nm", "points", "%".
std::string short_unit(const Check& check);

/// "5.0 nA", "0.31 % of red power, 800-1000 nm", with this many decimals.
std::string with_unit(double value, int decimals, const Check& check);
/// The same with the short unit.
std::string with_short_unit(double value, int decimals, const Check& check);

/// "inside 655.0 to 665.0 nm", "accepted up to 5.0 nA", "accepted from 1.2 V up".
std::string window_words(const Limits& limits, int decimals, const Check& check);

/// Decimals that show a number of this uncertainty with two significant digits of it; four significant digits of
/// `value` when the uncertainty is 0. Between 0 and 12.
int decimals_for(double uncertainty, double value);

/// The least number of decimals, from `at_least` up, that shows `value` and `limit` as different texts if they are
/// different numbers: 5.0 never fails against 5.0.
int decimals_apart(double value, double limit, int at_least);

/// Decimals that show the number whole: 2 for 0.25, 0 for 20, 4 for 2e-4; at most 12.
int decimals_of(double value);

/// "blocked_by:dark_current" as "blocked by dark current"; any other slug with blanks for underscores.
std::string reason_words(std::string_view reason);

}  // namespace probewright::limits
