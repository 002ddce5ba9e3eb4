#include "drivers/emulated/demo_lot.h"

#include <gtest/gtest.h>

#include <map>
#include <set>
#include <stdexcept>

#include <boost/asio/io_context.hpp>

#include "drivers/emulated/bench.h"
#include "drivers/wire/virtual_clock.h"

namespace probewright::emulated {
namespace {

std::set<std::string_view> all_causes() {
  std::set<std::string_view> causes;
  for (const ProbeFault fault : all_faults()) causes.insert(cause_of(fault));
  return causes;
}

/// How often each cause stands among pieces `from` to `to`.
std::map<std::string_view, int> causes_in(const std::vector<LotPiece>& lot, std::size_t from, std::size_t to) {
  std::map<std::string_view, int> counts;
  for (std::size_t i = from; i < to; ++i) {
    if (lot[i].fault) ++counts[cause_of(lot[i].fault->fault)];
  }
  return counts;
}

std::string text_of(const std::vector<LotPiece>& lot) {
  std::string text;
  for (const LotPiece& piece : lot) {
    text += piece.serial + " " + (piece.fault ? std::string(slug_of(piece.fault->fault)) : "-") + "\n";
  }
  return text;
}

// Source: the design: the demo lot plants one of every probe fault among its 48.
TEST(DemoLot, PlantsEachCauseOnceAmongFortyEight) {
  for (std::uint64_t seed = 1; seed <= 50; ++seed) {
    const auto lot = demo_lot("AQ-20", 48, 48, seed);
    ASSERT_EQ(lot.size(), 48u);
    const auto counts = causes_in(lot, 0, 48);
    EXPECT_EQ(counts.size(), all_causes().size());
    for (const auto& [cause, count] : counts) EXPECT_EQ(count, 1) << cause;
    for (const LotPiece& piece : lot) {
      if (piece.fault) {
        EXPECT_EQ(piece.fault->severity, 1.0);
      }
    }
  }
}

TEST(DemoLot, HasTheSerialsOfItsModel) {
  const auto lot = demo_lot("AQ-35", 7, 120, 1);
  EXPECT_EQ(lot.front().serial, "AQ35-007-00001");
  EXPECT_EQ(lot.back().serial, "AQ35-007-00120");
  std::set<std::string> serials;
  for (const LotPiece& piece : lot) {
    serials.insert(piece.serial);
    EXPECT_EQ(piece.model, "AQ-35");
    EXPECT_EQ(model_of_serial(piece.serial), "AQ-35");
  }
  EXPECT_EQ(serials.size(), 120u);
}

TEST(DemoLot, IsTheSameForTheSameSeed) {
  EXPECT_EQ(text_of(demo_lot("AQ-20", 48, 48, 7)), text_of(demo_lot("AQ-20", 48, 48, 7)));
  EXPECT_NE(text_of(demo_lot("AQ-20", 48, 48, 7)), text_of(demo_lot("AQ-20", 48, 48, 8)));
}

TEST(DemoLot, EveryFortyEightHaveTheirOwnAndTheRestItsShare) {
  const auto lot = demo_lot("AQ-20", 48, 500, 3);
  for (std::size_t first = 0; first + 48 <= lot.size(); first += 48) {
    EXPECT_EQ(causes_in(lot, first, first + 48).size(), all_causes().size());
  }
  std::size_t rest = 0;
  for (const auto& [cause, count] : causes_in(lot, 480, 500)) rest += static_cast<std::size_t>(count);
  EXPECT_EQ(rest, all_causes().size() * 20 / 48);
  std::set<ProbeFault> faults;
  for (const LotPiece& piece : lot) {
    if (piece.fault) faults.insert(piece.fault->fault);
  }
  EXPECT_GE(faults.size(), all_faults().size() - 1);  // each LED of each pair comes up in ten draws, but for bad luck
}

TEST(DemoLot, SpreadsItsFaultsOverAllPlaces) {
  std::vector<int> hits(48);
  for (std::uint64_t seed = 1; seed <= 2000; ++seed) {
    const auto lot = demo_lot("AQ-20", 48, 48, seed);
    for (std::size_t i = 0; i < lot.size(); ++i) hits[i] += lot[i].fault ? 1 : 0;
  }
  const double mean = 2000.0 * static_cast<double>(all_causes().size()) / 48.0;
  for (const int count : hits) EXPECT_NEAR(count, mean, 0.12 * mean);  // five standard deviations
}

TEST(DemoLot, ItsTruthIsThatOfTheProbesOnceTheySit) {
  boost::asio::io_context io;
  wire::VirtualClock clock{UtcTime{}};
  BenchOptions options;
  options.seed = 5;
  Bench bench{io.get_executor(), clock, options};
  const auto lot = demo_lot("AQ-20", 48, 48, 5);
  for (const LotPiece& piece : lot) {
    ASSERT_TRUE(piece.fault ? bench.seat(1, piece.serial, piece.model, *piece.fault)
                            : bench.seat(1, piece.serial, piece.model));
    ASSERT_TRUE(bench.remove(1));
  }
  EXPECT_EQ(truth_json(5, truths_of(lot, 5)), truth_json(5, bench.truths()));
}

TEST(DemoLot, RefusesWhatIsNoLot) {
  EXPECT_TRUE(demo_lot("AQ-20", 0, 0, 1).empty());
  EXPECT_THROW(demo_lot("AQ-99", 1, 48, 1), std::invalid_argument);
  EXPECT_THROW(demo_lot("AQ-20", 1000, 48, 1), std::invalid_argument);
  EXPECT_THROW(demo_lot("AQ-20", 1, -1, 1), std::invalid_argument);
  EXPECT_THROW(demo_lot("AQ-20", 1, 100000, 1), std::invalid_argument);
}

}  // namespace
}  // namespace probewright::emulated
