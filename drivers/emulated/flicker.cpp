#include "drivers/emulated/flicker.h"

#include <cmath>
#include <numbers>

namespace probewright::emulated {
namespace {

/// Sum over the fundamental and its harmonics of amplitude x `wave`(frequency, phase).
template <class Wave>
double over_harmonics(const Flicker& flicker, double phase_turns, const Wave& wave) {
  double sum = wave(2.0 * flicker.mains_Hz, phase_turns);
  double multiple = 1.0;
  for (const double amplitude : flicker.harmonics) {
    multiple += 1.0;
    sum += amplitude * wave(2.0 * flicker.mains_Hz * multiple, phase_turns * multiple);
  }
  return flicker.level * (1.0 + flicker.depth * sum);
}

}  // namespace

double mean_sine(double frequency_Hz, double phase_turns, double from_s, double to_s) {
  const double turn = 2.0 * std::numbers::pi;
  const double low = turn * (frequency_Hz * from_s + phase_turns), high = turn * (frequency_Hz * to_s + phase_turns);
  return (std::cos(low) - std::cos(high)) / (high - low);
}

double flicker_light(const Flicker& flicker, double time_s, double phase_turns) {
  if (flicker.level <= 0.0) return 0.0;
  return over_harmonics(flicker, phase_turns, [time_s](double frequency_Hz, double phase) {
    return std::sin(2.0 * std::numbers::pi * (frequency_Hz * time_s + phase));
  });
}

double mean_flicker(const Flicker& flicker, double phase_turns, double from_s, double to_s) {
  if (flicker.level <= 0.0) return 0.0;
  return over_harmonics(flicker, phase_turns, [from_s, to_s](double frequency_Hz, double phase) {
    return mean_sine(frequency_Hz, phase, from_s, to_s);
  });
}

}  // namespace probewright::emulated
