#include "drivers/emulated/modulator.h"

#include <cmath>
#include <numbers>

namespace probewright::emulated {

Modulator::Modulator(double phase_turns) : segments_(Segment{{}, {}, 5.0, phase_turns, 0.0}) {}

Depths Modulator::depths_at(const Segment& segment, double time_s) {
  const double left = std::exp(-(time_s - segment.start_s) / time_constant_s);
  return {segment.to.red + (segment.from.red - segment.to.red) * left,
          segment.to.infrared + (segment.from.infrared - segment.to.infrared) * left};
}

void Modulator::change(double time_s, Depths depths, double rate_Hz) {
  const Segment& now = segments_.latest();
  const double turns = now.phase_turns + now.rate_Hz * (time_s - now.start_s);
  segments_.set(time_s, Segment{depths_at(now, time_s), depths, rate_Hz, turns - std::floor(turns), time_s});
}

Modulator::Bands Modulator::at(double time_s) const {
  const Segment& segment = segments_.at(time_s);
  const double angle = 2.0 * std::numbers::pi * (segment.phase_turns + segment.rate_Hz * (time_s - segment.start_s));
  // Harmonics from the sine and cosine of the fundamental: sin 2x = 2 s c, sin 3x = 3 s - 4 s^3.
  const double s = std::sin(angle), c = std::cos(angle);
  const double wave = s + second_harmonic * 2.0 * s * c + third_harmonic * (3.0 - 4.0 * s * s) * s;
  const Depths depths = depths_at(segment, time_s);
  return {1.0 + depths.red * wave, 1.0 + depths.infrared * wave};
}

}  // namespace probewright::emulated
