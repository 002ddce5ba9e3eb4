#include "drivers/emulated/lamp.h"

#include <cmath>
#include <numbers>

namespace probewright::emulated {

double lamp_light(const Lamp& lamp, double time_s, double phase_turns) {
  if (!lamp.on) return 0.0;
  if (lamp.flicker_Hz == 0.0) return lamp.level;
  const double angle = 2.0 * std::numbers::pi * (lamp.flicker_Hz * time_s + phase_turns);
  return lamp.level * (1.0 + Lamp::flicker_depth * std::sin(angle));
}

}  // namespace probewright::emulated
