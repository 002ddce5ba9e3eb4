#include <gtest/gtest.h>

#include <cmath>

#include <iostream>

#include "station/base/numbers.h"
#include "station/sequence/production/true_values.h"
#include "tests/faults/measured.h"
#include "tests/trial/memory_ledger.h"

// Readings of the whole chain (devices, wire, drivers, routine, evaluation) against the emulated bench's own truth,
// which shares no optics or maths with them. Healthy probes at 25 C, certificates exactly true: what is left is noise,
// how a probe sits, and what the routine does (warm-up, order of the captures).
namespace probewright {
namespace {

constexpr int probes = 200;

struct Case {
  const char* model;
  const char* serials;
};

class Truth : public ::testing::TestWithParam<Case> {
 protected:
  void test(const std::string& serial) {
    const trial::Told told = station_.test(serial);
    ASSERT_TRUE(told.outcome) << serial;
    ASSERT_NE(told.outcome->verdict, sequence::RunVerdict::void_run) << serial << told.outcome->cause_words;
    const emulated::Truth& truth = station_.bench().truths().at(serial);
    for (const auto& judged : told.outcome->readings) {
      const measure::Reading& reading = judged.reading;
      ASSERT_TRUE(reading.value) << serial << " " << reading.check << " " << reading.none_reason;
      EXPECT_NE(judged.judgement.outcome, limits::Outcome::unusable) << serial << " " << judged.judgement.words;
      const auto expected = truths_.at_station(truth, reading.check, {}, 25.0);
      if (!expected || std::isnan(*expected)) continue;
      errors[reading.check].add(*reading.value - *expected);
      expanded[reading.check].add(reading.expanded_uncertainty.value_or(0.0));
    }
  }
  static trial::Options exact(trial::Options options) {
    options.bench.perfect = true;
    return options;
  }

  faults::Table errors, expanded;

 private:
  sequence::production::TrueValues truths_{trial::demonstration().models.at(GetParam().model).value};
  trial::MemoryLedger ledger_;
  trial::Trial station_{exact(ledger_.options(3))};
};

TEST_P(Truth, HealthyProbesReadWhatTheyAre) {
  for (int i = 1; i <= probes; ++i) {
    const std::string digits = std::to_string(i);
    test(GetParam().serials + std::string(5 - digits.size(), '0') + digits);
    if (HasFatalFailure()) return;
  }
  std::cout << faults::words_of(errors);
  for (const char* centroid : {"red_centroid", "infrared_centroid"}) {
    EXPECT_LE(std::abs(errors[centroid].bias()), 0.05) << centroid;  // nm
    EXPECT_LE(errors[centroid].sd(), 0.03) << centroid;
  }
  // With certificates that are true, errors lie within what a reading tells of itself. Of a normal error with a bias at
  // least 95 of 100 lie within |bias| + 1.645 sd; a twentieth is to spare for 200 probes. The bias is part of it: the
  // voltage rise reads low because the package cools while it is taken.
  for (const auto& [check, error] : errors)
    EXPECT_LE(std::abs(error.bias()) + 1.645 * error.sd(), 1.05 * expanded[check].bias()) << check;
}

INSTANTIATE_TEST_SUITE_P(Models, Truth, ::testing::Values(Case{"AQ-20", "AQ20-048-"}, Case{"AQ-35", "AQ35-048-"}));

}  // namespace
}  // namespace probewright
