#include <gtest/gtest.h>

#include <iostream>

#include "tests/faults/measured.h"
#include "tests/trial/memory_ledger.h"

// Readings of the whole chain (devices, wire, drivers, routine, evaluation) against the emulated bench's own truth,
// which shares no optics or maths with them. Healthy probes at 25 C, certificates exactly true.
namespace probewright {
namespace {

std::string serial_of(const std::string& prefix, int number) {
  const std::string digits = std::to_string(number);
  return prefix + std::string(5 - digits.size(), '0') + digits;
}

/// Errors of all readings of that many healthy probes, none of which may fail.
faults::Table errors_of(const std::string& prefix, int count, std::vector<double>* cycles_s) {
  trial::MemoryLedger ledger;
  trial::Options options = ledger.options(3);
  options.bench.perfect = true;
  trial::Trial station{options};
  faults::Table errors;
  for (int i = 1; i <= count; ++i) {
    const std::string serial = serial_of(prefix, i);
    const trial::Told told = station.test(serial);
    EXPECT_TRUE(told.outcome) << serial;
    if (!told.outcome) return errors;
    EXPECT_NE(told.outcome->verdict, sequence::RunVerdict::void_run) << serial << told.outcome->cause_words;
    if (cycles_s) cycles_s->push_back(seconds(told.outcome->cycle));
    const emulated::Truth& truth = station.bench().truths().at(serial);
    for (const auto& judged : told.outcome->readings) {
      const measure::Reading& reading = judged.reading;
      EXPECT_TRUE(reading.value) << serial << " " << reading.check << " " << reading.none_reason;
      EXPECT_NE(judged.judgement.outcome, limits::Outcome::unusable) << judged.judgement.words;
      const double expected = faults::truth_of(truth, reading.check);
      if (!std::isnan(expected) && reading.value) errors[reading.check].add(*reading.value - expected);
      if (reading.expanded_uncertainty) errors["U of " + reading.check].add(*reading.expanded_uncertainty);
    }
  }
  return errors;
}

TEST(Truth, HealthyProbesOfTheFingerClip) {
  std::vector<double> cycles_s;
  faults::Table errors = errors_of(std::getenv("PFX") ? std::getenv("PFX") : "AQ20-048-", 200, &cycles_s);
  std::cout << faults::words_of(errors);
  for (const auto& [name, m] : errors)
    if (name.starts_with("U of")) std::cout << name << " " << m.bias() << " +- " << m.sd() << "\n";
  std::nth_element(cycles_s.begin(), cycles_s.begin() + cycles_s.size() / 2, cycles_s.end());
  std::cout << "median device time " << cycles_s[cycles_s.size() / 2] << " s\n";
}

}  // namespace
}  // namespace probewright
