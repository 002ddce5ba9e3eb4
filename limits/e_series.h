#pragma once

namespace probewright::limits {

/// Whether a resistance, in ohm, is a preferred value of the E96 series (IEC 60063) in any decade from 1 ohm up.
bool is_e96(double resistance_ohm);

/// How much larger, at least, the next ID resistor of a model must be, so that a resistor at the end of its tolerance
/// and a worn contact are never read as the neighbouring bin.
inline constexpr double least_resistor_step = 1.15;

}  // namespace probewright::limits
