#include <gtest/gtest.h>

#include <cmath>
#include <iostream>
#include <map>

#include "tests/trial/memory_ledger.h"

// Readings of the whole chain (devices, wire, drivers, routine, evaluation) against the emulated bench's own truth,
// which shares no optics or maths with them. 200 healthy probes at 25 C, certificates exactly true.
namespace probewright {
namespace {

struct Moments {
  double sum = 0.0, squares = 0.0;
  int n = 0;
  void add(double error) {
    sum += error;
    squares += error * error;
    ++n;
  }
  double bias() const { return sum / n; }
  double sd() const { return std::sqrt((squares - sum * sum / n) / (n - 1)); }
};

double truth_of(const emulated::Truth& truth, const std::string& check) {
  if (check == "red_centroid") return truth.red.centroid_nm;
  if (check == "infrared_centroid") return truth.infrared.centroid_nm;
  if (check == "red_width") return truth.red.width_nm;
  if (check == "infrared_width") return truth.infrared.width_nm;
  if (check == "red_half_power_centre") return truth.red.half_power_centre_nm;
  if (check == "infrared_half_power_centre") return truth.infrared.half_power_centre_nm;
  if (check == "red_peak") return truth.red.peak_nm;
  if (check == "infrared_peak") return truth.infrared.peak_nm;
  if (check == "red_forward_voltage") return truth.red.forward_voltage_V;
  if (check == "infrared_forward_voltage") return truth.infrared.forward_voltage_V;
  if (check == "red_drive") return truth.red.drive_mA;
  if (check == "infrared_drive") return truth.infrared.drive_mA;
  if (check == "dark_current") return truth.dark_current_nA;
  if (check == "id_resistance") return truth.id_resistance_ohm;
  if (check == "id_deviation") return truth.id_deviation_percent;
  if (check == "ratio_deviation_1p0") return truth.ratios[1].ratio_deviation_percent;
  return std::nan("");
}

TEST(Truth, TwoHundredHealthyProbes) {
  trial::MemoryLedger ledger;
  trial::Options options = ledger.options(3);
  options.bench.perfect = true;
  trial::Trial station{options};
  std::map<std::string, Moments> errors;
  for (int i = 1; i <= 200; ++i) {
    std::string serial = std::to_string(i);
    serial = "AQ20-048-" + std::string(5 - serial.size(), '0') + serial;
    const trial::Told told = station.test(serial);
    ASSERT_TRUE(told.outcome) << serial;
    ASSERT_NE(told.outcome->verdict, sequence::RunVerdict::void_run) << serial << told.outcome->cause_words;
    const emulated::Truth& truth = station.bench().truths().at(serial);
    for (const auto& judged : told.outcome->readings) {
      const double expected = truth_of(truth, judged.reading.check);
      if (std::isnan(expected)) continue;
      ASSERT_TRUE(judged.reading.value) << serial << " " << judged.reading.check << " " << judged.reading.none_reason;
      errors[judged.reading.check].add(*judged.reading.value - expected);
    }
  }
  for (const auto& [check, moments] : errors)
    std::cout << check << ": bias " << moments.bias() << ", sd " << moments.sd() << " (" << moments.n << ")\n";
  for (const char* centroid : {"red_centroid", "infrared_centroid"}) {
    EXPECT_LE(std::abs(errors[centroid].bias()), 0.05) << centroid;  // nm
    EXPECT_LE(errors[centroid].sd(), 0.03) << centroid;
  }
  EXPECT_LE(errors["ratio_deviation_1p0"].sd(), 0.11);  // % of the set value: 1 % modulation, 0.6 s
}

}  // namespace
}  // namespace probewright
