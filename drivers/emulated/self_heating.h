#pragma once

namespace probewright::emulated {

/// How an LED warms itself in its standard drive: two first-order parts, each with its final rise and time constant.
struct Heating {
  double die_rise_K = 0.0;
  double die_time_s = 0.005;
  double package_rise_K = 0.0;
  double package_time_s = 0.5;

  double standard_rise_K() const { return die_rise_K + package_rise_K; }
};

/// How far the two parts of one LED have warmed above the nest, in K.
struct Warmth {
  double die_K = 0.0;
  double package_K = 0.0;

  double total_K() const { return die_K + package_K; }
};

/// The warmth after `time_s` more seconds at `load`, the heating power relative to the standard drive's.
Warmth warmed(const Heating& heating, Warmth from, double load, double time_s);

/// The mean warmth over those seconds; `time_s` > 0.
Warmth mean_warmth(const Heating& heating, Warmth from, double load, double time_s);

}  // namespace probewright::emulated
