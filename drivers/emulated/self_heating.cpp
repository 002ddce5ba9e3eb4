#include "drivers/emulated/self_heating.h"

#include <cmath>

namespace probewright::emulated {
namespace {

double relaxed(double from, double to, double time_s, double constant_s) {
  return to + (from - to) * std::exp(-time_s / constant_s);
}

double mean_relaxed(double from, double to, double time_s, double constant_s) {
  const double x = time_s / constant_s;
  return to + (from - to) * (-std::expm1(-x) / x);
}

}  // namespace

Warmth warmed(const Heating& heating, Warmth from, double load, double time_s) {
  return {relaxed(from.die_K, load * heating.die_rise_K, time_s, heating.die_time_s),
          relaxed(from.package_K, load * heating.package_rise_K, time_s, heating.package_time_s)};
}

Warmth mean_warmth(const Heating& heating, Warmth from, double load, double time_s) {
  return {mean_relaxed(from.die_K, load * heating.die_rise_K, time_s, heating.die_time_s),
          mean_relaxed(from.package_K, load * heating.package_rise_K, time_s, heating.package_time_s)};
}

}  // namespace probewright::emulated
