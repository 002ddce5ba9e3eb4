#pragma once
#include <string>
#include <string_view>

#include "station/measure/captures.h"

namespace probewright::measure {

/// Whether the voltage says that this LED cannot shine: no current flows (open, the wrong way round), or nothing but
/// leads takes it (short). An infrared LED that shines drops more than 0.8 V at any drive of this trade: its photons
/// have 1.3 eV. Without light nothing optical is worth the time.
bool cannot_shine(const ForwardVoltage& at_drive);

}  // namespace probewright::measure
