#include <gtest/gtest.h>

#include <algorithm>
#include <iostream>

#include "drivers/emulated/demo_lot.h"
#include "station/base/numbers.h"
#include "station/sequence/production/true_values.h"
#include "tests/faults/measured.h"
#include "tests/trial/memory_ledger.h"

// Every fault of a probe planted into whole runs, in full severity and in parts of it: what escapes, and what healthy
// probes are failed for. The station reads none of the truths.
namespace probewright {
namespace {

using emulated::PlantedFault;
using sequence::RunVerdict;

/// What came out of the probes of one kind.
struct Count {
  int made = 0, passed = 0, voided = 0;
  int escaped = 0;      ///< passed, though the truth of a judged check lies outside its limits
  int false_fails = 0;  ///< failed, though none does
  std::map<std::string, int> failing;
};

/// Whether the truth of every judged check lies inside its limits; one that this probe has no more does not.
bool conforms(const emulated::Truth& truth, const limits::Sheet& sheet,
              const sequence::production::TrueValues& values) {
  return std::none_of(sheet.checks.begin(), sheet.checks.end(), [&](const limits::CheckRule& rule) {
    if (rule.use != limits::Use::judged || rule.must_be_yes) return false;
    const auto value = values.of(truth, rule.check);
    if (!value) return false;
    return std::isnan(*value) || (rule.limits.lower && *value < *rule.limits.lower) ||
           (rule.limits.upper && *value > *rule.limits.upper);
  });
}

class Lot {
 public:
  Lot(const char* model, std::uint64_t seed)
      : sheet_(trial::demonstration().sheets.at(model).value), values_(trial::demonstration().models.at(model).value) {
    trial::Options options = ledger_.options(seed);
    options.bench.perfect = true;
    station_.emplace(std::move(options));
  }
  /// One probe; its readings' errors are kept when it is healthy.
  void test(const std::string& serial, std::optional<PlantedFault> fault, Count& count) {
    const trial::Told told = station_->test(serial, fault);
    ASSERT_TRUE(told.outcome) << serial << (told.problem ? told.problem->text() : " hung");
    const sequence::RunOutcome& run = *told.outcome;
    const emulated::Truth& truth = station_->bench().truths().at(serial);
    const bool good = conforms(truth, sheet_, values_), passed = run.verdict == RunVerdict::pass;
    ++count.made;
    count.passed += passed;
    count.voided += run.verdict == RunVerdict::void_run;
    count.escaped += passed && !good;
    count.false_fails += !passed && good && !fault;
    for (const std::string& check : run.failing) ++count.failing[check];
    EXPECT_EQ(station_->bench().drive(1), emulated::AdapterDevice::Drive{}) << serial;
    if (fault) return;
    for (const auto& judged : run.readings) {
      const auto expected = values_.at_station(truth, judged.reading.check, {}, 25.0);
      if (expected && !std::isnan(*expected) && judged.reading.value)
        errors[judged.reading.check].add(*judged.reading.value - *expected);
    }
    cycles_s.push_back(seconds(run.cycle));
  }
  void finish() { EXPECT_TRUE(station_->finish()); }

  faults::Table errors;
  std::vector<double> cycles_s;

 private:
  trial::MemoryLedger ledger_;
  std::optional<trial::Trial> station_;
  const limits::Sheet& sheet_;
  sequence::production::TrueValues values_;
};

std::string words_of(const Count& count) {
  std::string words = std::to_string(count.made) + " made, " + std::to_string(count.passed) + " passed (" +
                      std::to_string(count.escaped) + " nonconforming)";
  if (count.voided > 0) words += ", " + std::to_string(count.voided) + " void";
  for (const auto& [check, times] : count.failing) words += " " + check + ":" + std::to_string(times);
  return words;
}

double median(std::vector<double> values) {
  const auto middle = values.begin() + static_cast<std::ptrdiff_t>(values.size() / 2);
  std::nth_element(values.begin(), middle, values.end());
  return *middle;
}

class FaultTrial : public ::testing::TestWithParam<const char*> {};

TEST_P(FaultTrial, ALotWithEveryFault) {
  Lot lot{GetParam(), 3};
  Count healthy;
  std::map<std::string, Count> faulty;
  for (const emulated::LotPiece& piece : emulated::demo_lot(GetParam(), 48, 500, 3)) {
    const bool bad = piece.fault.has_value();
    lot.test(piece.serial, piece.fault, bad ? faulty[std::string{slug_of(piece.fault->fault)}] : healthy);
    if (HasFatalFailure()) return;
  }
  lot.finish();
  std::cout << GetParam() << ", healthy probes against their truths:\n" << faults::words_of(lot.errors);
  std::cout << "healthy: " << words_of(healthy) << ", failed though conforming " << healthy.false_fails << "\n";
  for (const auto& [fault, count] : faulty) std::cout << fault << ": " << words_of(count) << "\n";
  std::cout << "median device time " << fixed(median(lot.cycles_s), 3) << " s\n";

  EXPECT_EQ(healthy.voided, 0);
  EXPECT_EQ(healthy.escaped, 0);
  EXPECT_LE(healthy.false_fails, healthy.made / 20);  // guard bands fail what lies between them and the limits
  for (const auto& [fault, count] : faulty) {
    EXPECT_EQ(count.escaped, 0) << fault;
    EXPECT_EQ(count.voided, 0) << fault;
    if (is_hard(*emulated::parse_fault(fault))) EXPECT_EQ(count.passed, 0) << fault;
  }
  for (const char* centroid : {"red_centroid", "infrared_centroid"}) {
    EXPECT_LE(std::abs(lot.errors[centroid].bias()), 0.05) << centroid;  // nm
    EXPECT_LE(lot.errors[centroid].sd(), 0.03) << centroid;
  }
}

TEST_P(FaultTrial, EachFaultInPartsOfItsSeverity) {
  Lot lot{GetParam(), 5};
  std::string prefix = GetParam();
  std::erase(prefix, '-');
  int number = 0;
  for (const emulated::ProbeFault fault : emulated::all_faults())
    for (const double severity : {0.1, 0.25, 0.5, 1.0}) {
      if (is_hard(fault) && severity < 1.0) continue;
      Count count;
      for (int i = 0; i < 8; ++i) {
        const std::string digits = std::to_string(++number);
        lot.test(prefix + "-049-" + std::string(5 - digits.size(), '0') + digits, PlantedFault{fault, severity}, count);
        if (HasFatalFailure()) return;
      }
      std::cout << slug_of(fault) << " " << shortest(severity) << ": " << words_of(count) << "\n";
      EXPECT_EQ(count.voided, 0) << slug_of(fault);
      // In full severity nothing outside its limits passes. A bad die attach of the infrared LED lies outside of none:
      // its warm-up is recorded only.
      if (severity == 1.0) EXPECT_EQ(count.escaped, 0) << slug_of(fault);
      if (severity == 1.0 && fault != emulated::ProbeFault::infrared_die_attach)
        EXPECT_EQ(count.passed, 0) << slug_of(fault);
    }
  lot.finish();
}

INSTANTIATE_TEST_SUITE_P(Models, FaultTrial, ::testing::Values("AQ-20", "AQ-35"));

}  // namespace
}  // namespace probewright
