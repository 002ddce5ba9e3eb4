#pragma once

namespace probewright::limits {

/// `value` rounded to ten significant decimal digits. Whatever a sheet computes (20 mA + 2 %, 5 nA - 0.83 U) goes
/// through here once, so that the number that is printed and signed is the number that is applied, and so that 20.4
/// is inside a window that a person reads as ending at 20.4. Ten digits are far below every uncertainty.
double fixed_number(double value);

}  // namespace probewright::limits
