#include "drivers/emulated/led_drive.h"

namespace probewright::emulated {

void LedDrive::seat(double time_s, const Led& red, const Led& infrared) {
  red_ = {red.heating, red.standard_drive_mA};
  infrared_ = {infrared.heating, infrared.standard_drive_mA};
  moments_.set(time_s, Moment{moments_.latest().red_mA, moments_.latest().infrared_mA, {}, {}, time_s});
}

void LedDrive::remove(double time_s) { moments_.set(time_s, Moment{0.0, 0.0, {}, {}, time_s}); }

void LedDrive::set(double time_s, double red_mA, double infrared_mA) {
  Moment now = warmed_to(moments_.latest(), time_s);
  now.red_mA = red_mA;
  now.infrared_mA = infrared_mA;
  now.start_s = time_s;
  moments_.set(time_s, now);
}

LedDrive::Moment LedDrive::warmed_to(const Moment& from, double time_s) const {
  Moment moment = from;
  const double elapsed_s = time_s - from.start_s;
  if (elapsed_s <= 0.0) return moment;
  moment.red = warmed(red_.heating, from.red, from.red_mA / red_.standard_mA, elapsed_s);
  moment.infrared = warmed(infrared_.heating, from.infrared, from.infrared_mA / infrared_.standard_mA, elapsed_s);
  return moment;
}

LedDrive::Moment LedDrive::at(double time_s) const { return warmed_to(moments_.at(time_s), time_s); }

LedDrive::Moment LedDrive::mean_over(double from_s, double to_s) const {
  Moment moment = at(from_s);
  if (to_s <= from_s) return moment;
  const double span_s = to_s - from_s;
  moment.red = mean_warmth(red_.heating, moment.red, moment.red_mA / red_.standard_mA, span_s);
  moment.infrared = mean_warmth(infrared_.heating, moment.infrared, moment.infrared_mA / infrared_.standard_mA, span_s);
  return moment;
}

}  // namespace probewright::emulated
