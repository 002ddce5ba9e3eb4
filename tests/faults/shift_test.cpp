#include <gtest/gtest.h>

#include <algorithm>
#include <cstdlib>
#include <iostream>
#include <optional>

#include "station/base/numbers.h"
#include "tests/faults/shift/planted.h"
#include "tests/faults/shift/shift.h"

// Whole shifts with faults of the bench, of probes, of people and of the disk: no rule is ever broken. 60 seeds here;
// PROBEWRIGHT_SHIFTS=5000 for a night. Any number of them by hand: tests/faults/run.
namespace probewright {
namespace {

using faults::Doubles;
using faults::drawn_shift;
using faults::make_shift;
using faults::ShiftReport;

std::uint64_t wanted_shifts() {
  const char* wanted = std::getenv("PROBEWRIGHT_SHIFTS");
  const auto number = wanted ? parse_integer(wanted) : std::nullopt;
  return number && *number > 0 ? static_cast<std::uint64_t>(*number) : 60;
}

TEST(Shifts, NoRuleIsBroken) {
  ShiftReport all;
  for (std::uint64_t seed = 1; seed <= wanted_shifts(); ++seed) {
    const ShiftReport report = make_shift(drawn_shift(seed));
    for (const auto& breach : report.breaches)
      ADD_FAILURE() << breach.rule << ": " << breach.words << "\n  again: tests/faults/run --seeds 1 --from " << seed;
    all.add(report);
  }
  EXPECT_GT(all.runs, 0);
  std::cout << faults::table_of(all);
}

TEST(Shifts, TheSamePlanGivesTheSameLedger) {
  for (const std::uint64_t seed : {3u, 4u, 5u}) {
    const auto first = make_shift(drawn_shift(seed)), again = make_shift(drawn_shift(seed));
    EXPECT_EQ(first.seal, again.seal) << "seed " << seed;
    EXPECT_EQ(first.endings, again.endings);
  }
  EXPECT_NE(make_shift(drawn_shift(3)).seal, make_shift(drawn_shift(4)).seal);
}

/// The seed that finds a planted mistake, by one of the rules that must; 0 when none does.
std::uint64_t found_at(const Doubles& doubles, const std::vector<std::string>& rules,
                       const std::optional<emulated::Scenario>& scenario = {}) {
  for (std::uint64_t seed = 1; seed <= 200; ++seed)
    for (const auto& breach : make_shift(drawn_shift(seed, scenario), doubles).breaches)
      if (std::find(rules.begin(), rules.end(), breach.rule) != rules.end()) {
        std::cout << "found by seed " << seed << ": " << breach.rule << ", " << breach.words << "\n";
        return seed;
      }
  return 0;
}

TEST(PlantedMistakes, AVerdictToldBeforeItIsKeptIsFound) {
  Doubles doubles;
  doubles.disk_lies = true;
  EXPECT_NE(found_at(doubles, {"told and not kept", "the ledger does not agree", "the ledger is gone"}), 0u);
}

TEST(PlantedMistakes, ALateReplyTakenForTheNextIsFound) {
  Doubles doubles;
  doubles.ports = faults::taking_late_replies_for_the_next;
  // Late answers alone: among all faults that a shift can have, one of 152 shifts finds it.
  emulated::ScenarioFault late;
  late.fault = emulated::BenchFault::reply_late;
  late.per_reply = 0.001;
  late.by_s = 0.7;
  const emulated::Scenario scenario{"late answers", std::nullopt, {late}};
  const std::vector<std::string> rules{"a wrong reading", "a disturbance that was none", "a lone fault cost a run"};
  EXPECT_NE(found_at(doubles, rules, scenario), 0u);
  // The drivers as they are get over each of them.
  for (std::uint64_t seed = 1; seed <= 10; ++seed)
    EXPECT_TRUE(make_shift(drawn_shift(seed, scenario)).breaches.empty());
}

TEST(PlantedMistakes, LedsLeftOnAfterAVoidAreFound) {
  Doubles doubles;
  doubles.ports = faults::leaving_leds_on_after_a_void;
  EXPECT_NE(found_at(doubles, {"lit after a run"}), 0u);
}

TEST(PlantedMistakes, ResultsOfTwoProbesExchangedAreFound) {
  Doubles doubles;
  doubles.hands_exchange_pairs = true;
  EXPECT_NE(found_at(doubles, {"a wrong reading"}), 0u);
}

}  // namespace
}  // namespace probewright
