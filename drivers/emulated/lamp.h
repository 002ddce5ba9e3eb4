#pragma once

namespace probewright::emulated {

/// The lamp that stands for ambient light, as it is set.
struct Lamp {
  bool on = false;
  double level = 0.5;       ///< of full, 0 to 1
  double flicker_Hz = 0.0;  ///< 0: none

  static constexpr double flicker_depth = 0.3;  ///< amplitude over mean, a fluorescent tube's order of size
};

/// Light of the lamp at a moment, of full. `phase_turns` is where the mains stands at time 0.
double lamp_light(const Lamp& lamp, double time_s, double phase_turns);

}  // namespace probewright::emulated
