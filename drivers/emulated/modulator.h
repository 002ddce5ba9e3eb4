#pragma once
#include <array>
#include <cstddef>

#include "drivers/emulated/timeline.h"

namespace probewright::emulated {

/// Amplitude over mean of the two bands.
struct Depths {
  double red = 0.0;
  double infrared = 0.0;
};

/// A stored pair of depths.
struct StoredSetPoint {
  double nominal_ratio = 0.0;
  Depths depths;
};

/// The set points of the demonstration phantom, numbered from 1, as its certificate has them. The smaller modulation of
/// each is about 1 %.
inline constexpr std::array<StoredSetPoint, 3> stored_set_points{
    {{0.4, {0.010, 0.025}}, {1.0, {0.010, 0.010}}, {1.6, {0.016, 0.010}}}};

/// Two-band modulator: the transmission of a band is multiplied by 1 + depth sin(2 pi rate t) with small harmonics. New
/// depths are reached as a first-order system reaches them; the phase runs on through every change.
/// Times are device seconds.
class Modulator {
 public:
  /// phase_turns: where the sine stands at time 0, 0 to 1.
  explicit Modulator(double phase_turns);

  /// Depths and rate from `time_s` on; depths 0 stand still at the mean transmission.
  void change(double time_s, Depths depths, double rate_Hz);

  struct Bands {
    double red = 1.0;
    double infrared = 1.0;
  };
  /// Transmission relative to its mean at a moment.
  Bands at(double time_s) const;

  static constexpr double time_constant_s = 0.015;  ///< 150 ms leave 5e-5 of a step
  static constexpr double settling_s = 0.150;       ///< what the device calls settled
  static constexpr double second_harmonic = 0.004;  ///< relative to the depth
  static constexpr double third_harmonic = 0.002;

 private:
  struct Segment {
    Depths from, to;
    double rate_Hz = 5.0;
    double phase_turns = 0.0;  ///< at the beginning of the segment
    double start_s = 0.0;
  };
  static Depths depths_at(const Segment& segment, double time_s);

  Timeline<Segment> segments_;
};

}  // namespace probewright::emulated
