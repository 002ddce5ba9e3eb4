#pragma once
#include "drivers/emulated/led.h"
#include "drivers/emulated/timeline.h"

namespace probewright::emulated {

/// What drives the two LEDs of the seated probe and how warm they are, at any recent moment. Device seconds.
class LedDrive {
 public:
  struct Moment {
    double red_mA = 0.0, infrared_mA = 0.0;
    Warmth red, infrared;
    double start_s = 0.0;  ///< when this drive began
  };

  LedDrive() : moments_(Moment{}) {}

  /// A probe with these heatings was put in, cold and dark.
  void seat(double time_s, const Led& red, const Led& infrared);
  /// The probe is gone.
  void remove(double time_s);
  /// New drive from `time_s` on.
  void set(double time_s, double red_mA, double infrared_mA);

  /// Drive and warmth at a moment.
  Moment at(double time_s) const;
  const Moment& latest_change() const { return moments_.latest(); }

  /// Mean warmth of both LEDs over a span in which the drive did not change.
  Moment mean_over(double from_s, double to_s) const;

 private:
  struct Part {
    Heating heating;
    double standard_mA = 20.0;
  };
  Moment warmed_to(const Moment& from, double time_s) const;

  Part red_, infrared_;
  Timeline<Moment> moments_;
};

}  // namespace probewright::emulated
