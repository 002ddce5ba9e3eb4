#pragma once
#include <vector>

namespace probewright::emulated {

/// Lamplight of a room that gets into a closed nest: it flickers at twice the mains and at multiples of that.
struct Flicker {
  double level = 0.0;             ///< mean, in units of the phantom's lamp at full level; 0: the nest is tight
  double depth = 0.3;             ///< amplitude at twice the mains over the mean
  std::vector<double> harmonics;  ///< amplitude at 2, 3 ... times that frequency over the one at 1
  double mains_Hz = 50.0;
};

/// Light at a moment. `phase_turns`: where the mains stands at time 0.
double flicker_light(const Flicker& flicker, double time_s, double phase_turns);
/// Its mean over a span.
double mean_flicker(const Flicker& flicker, double phase_turns, double from_s, double to_s);
/// Mean of sin(2 pi (f t + phase)) over a span.
double mean_sine(double frequency_Hz, double phase_turns, double from_s, double to_s);

}  // namespace probewright::emulated
