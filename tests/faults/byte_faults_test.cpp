#include <gtest/gtest.h>

#include <array>
#include <cmath>
#include <cstdlib>
#include <iostream>
#include <map>

#include "tests/trial/memory_ledger.h"

// Every byte of a run's traffic, both ways on both lines, lost, changed and doubled in turn: one fault a run. What must
// hold each time: the run ends, right or void with its cause; no reading is wrong; both LEDs are off; the chain agrees.
// 2000 faults spread evenly here; PROBEWRIGHT_BYTE_FAULTS=all tries every one.
namespace probewright {
namespace {

using emulated::DeviceId;
using emulated::DeviceKind;
using emulated::Way;
using trial::MemoryLedger;
using trial::Trial;
using wire::FaultKind;

constexpr std::uint64_t seed = 11;
const std::string serial = "AQ20-048-00001";

struct Line {
  DeviceId device;
  Way way;
  std::uint64_t first = 0, bytes = 0;  ///< of the run, from the start of the trial
};
struct Clean {
  std::array<Line, 4> lines;
  std::map<std::string, measure::Reading> readings;
  std::uint64_t total() const {
    std::uint64_t sum = 0;
    for (const Line& line : lines) sum += line.bytes;
    return sum;
  }
};

/// The run without a fault: how many bytes it takes, and what it reads.
Clean clean_run() {
  Clean clean;
  clean.lines = {Line{{1, DeviceKind::phantom}, Way::to_device}, Line{{1, DeviceKind::phantom}, Way::from_device},
                 Line{{1, DeviceKind::adapter}, Way::to_device}, Line{{1, DeviceKind::adapter}, Way::from_device}};
  MemoryLedger ledger;
  Trial station{ledger.options(seed)};
  station.on_event = [&](const sequence::LineEvent& event) {
    if (std::holds_alternative<sequence::RunStarted>(event))
      for (Line& line : clean.lines) line.first = station.bench().bytes(line.device, line.way);
    if (std::holds_alternative<sequence::RunEnded>(event))
      for (Line& line : clean.lines) line.bytes = station.bench().bytes(line.device, line.way) - line.first;
  };
  const trial::Told told = station.test(serial);
  for (const auto& judged : told.outcome.value().readings) clean.readings[judged.reading.check] = judged.reading;
  return clean;
}

struct Fault {
  const Line* line;
  std::uint64_t index;
  FaultKind kind;
};

Fault fault_at(const Clean& clean, std::uint64_t n) {
  std::uint64_t byte = n / 3;
  for (const Line& line : clean.lines) {
    if (byte < line.bytes) return {&line, line.first + byte, static_cast<FaultKind>(n % 3)};
    byte -= line.bytes;
  }
  throw std::out_of_range("no such byte");
}

std::string words(const Fault& fault) {
  static const char* const kinds[] = {"lost", "changed", "doubled"};
  return to_text(fault.line->device) + (fault.line->way == Way::to_device ? " to" : " from") + " device, byte " +
         std::to_string(fault.index) + " " + kinds[static_cast<int>(fault.kind)];
}

/// Which of several set points deviates most may change with the noise, and the sign with it.
bool tells_the_largest(const std::string& check) { return check.ends_with("_modulation_deviation"); }

/// A capture that was asked for again has other noise; both must agree within the uncertainty that they claim: that of
/// a difference of two is sqrt(2) times that of one.
void expect_right(const measure::Reading& reading, const measure::Reading& clean) {
  ASSERT_EQ(reading.value.has_value(), clean.value.has_value()) << reading.check << " " << reading.none_reason;
  if (!reading.value) return;
  const bool size_only = tells_the_largest(reading.check);
  const double is = size_only ? std::abs(*reading.value) : *reading.value;
  const double was = size_only ? std::abs(*clean.value) : *clean.value;
  EXPECT_LE(std::abs(is - was), std::sqrt(2.0) * clean.expanded_uncertainty.value_or(0.0)) << reading.check;
}

struct Counts {
  int passed = 0, voided = 0, asked_again = 0;
};

void try_fault(const Clean& clean, const Fault& fault, Counts& counts) {
  SCOPED_TRACE(words(fault));
  MemoryLedger ledger;
  {
    Trial station{ledger.options(seed)};
    const int flips[] = {0x01, 0x80, 0x20};
    emulated::SpoiltByte byte{fault.line->way, fault.index, fault.kind,
                              static_cast<std::uint8_t>(flips[fault.index % 3])};
    station.bench().spoil(fault.line->device, byte).value();
    const trial::Told told = station.test(serial);
    ASSERT_FALSE(told.hung);
    ASSERT_TRUE(told.outcome) << (told.problem ? told.problem->text() : "");
    EXPECT_EQ(station.bench().spoilt(fault.line->device), 1u) << "the fault never came";
    EXPECT_EQ(station.bench().drive(1), emulated::AdapterDevice::Drive{});
    for (const auto& judged : told.outcome->readings)
      EXPECT_NE(judged.judgement.outcome, limits::Outcome::not_ok) << judged.judgement.words;
    EXPECT_NE(told.outcome->verdict, sequence::RunVerdict::fail) << ::testing::PrintToString(told.outcome->failing);
    if (told.outcome->verdict == sequence::RunVerdict::void_run) {
      ++counts.voided;
      EXPECT_FALSE(told.outcome->cause_words.empty());
      std::cout << words(fault) << ": void, " << told.outcome->cause_words << "\n";
    } else {
      ++counts.passed;
      for (const auto& judged : told.outcome->readings)
        expect_right(judged.reading, clean.readings.at(judged.reading.check));
    }
    counts.asked_again += told.outcome->asked_again > 0;
    ASSERT_TRUE(station.finish());
  }
  const auto report = ledger.verify();
  EXPECT_TRUE(report.ok()) << report.first_fault->what;
}

TEST(ByteFaults, NeverAWrongReadingNeverAHang) {
  const Clean clean = clean_run();
  const std::uint64_t all = 3 * clean.total();
  const char* wanted = std::getenv("PROBEWRIGHT_BYTE_FAULTS");
  const std::uint64_t tried = wanted && std::string{wanted} == "all" ? all : std::min<std::uint64_t>(all, 2000);
  Counts counts;
  for (std::uint64_t i = 0; i < tried && !::testing::Test::HasFatalFailure(); ++i)
    try_fault(clean, fault_at(clean, i * all / tried), counts);
  std::cout << clean.total() << " bytes a run, " << tried << " faults of " << all << " tried: " << counts.passed
            << " passed, " << counts.voided << " void; something was asked again in " << counts.asked_again << "\n";
}

}  // namespace
}  // namespace probewright
