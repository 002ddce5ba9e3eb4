#include <gtest/gtest.h>

#include <boost/asio/co_spawn.hpp>
#include <map>
#include <set>

#include "drivers/emulated/demo_lot.h"
#include "station/sequence/production/emulated_operator.h"
#include "tests/trial/memory_ledger.h"

// A person at the line: the work goes through all nests at once, and whatever the person does wrong ends in a sentence
// and never in a verdict on another probe than the one that was tested.
namespace probewright {
namespace {

namespace production = sequence::production;
using production::Mistake;
using production::Piece;
using sequence::RunVerdict;
using trial::MemoryLedger;
using trial::Trial;

sequence::Configuration with_nests(int nests) {
  sequence::Configuration configuration = trial::demonstration();
  auto& places = configuration.station.value.nests;
  for (int nest = 2; nest <= nests; ++nest) {
    const std::string number = std::to_string(nest);
    places.push_back({nest,
                      {"nest" + number + "-phantom", "PHC-2026-010" + number},
                      {"nest" + number + "-adapter", "ADC-2026-010" + number}});
  }
  return configuration;
}

std::vector<Piece> pieces_of(const std::vector<emulated::LotPiece>& lot) {
  std::vector<Piece> pieces;
  for (const auto& piece : lot)
    pieces.push_back({piece.serial, piece.model, piece.fault ? std::string{slug_of(piece.fault->fault)} : "", 1.0});
  return pieces;
}

/// A lot without faults.
std::vector<Piece> healthy(int count) {
  auto pieces = pieces_of(emulated::demo_lot("AQ-20", 48, count, 1));
  for (Piece& piece : pieces) piece.fault.clear();
  return pieces;
}

class BenchHandler final : public production::ProbeHandler {
 public:
  explicit BenchHandler(emulated::Bench& bench) : bench_(bench) {}
  Result<void> seat(int nest, const Piece& piece) override {
    const auto fault = emulated::parse_fault(piece.fault);
    return fault ? bench_.seat(nest, piece.serial, piece.model, {*fault, piece.severity})
                 : bench_.seat(nest, piece.serial, piece.model);
  }
  Result<void> remove(int nest) override { return bench_.remove(nest); }
  Result<void> lid(int nest, bool open) override { return bench_.lid(nest, open); }

 private:
  emulated::Bench& bench_;
};

/// Verified when the station on it is gone.
class CheckedLedger : public MemoryLedger {
 public:
  ~CheckedLedger() { EXPECT_TRUE(verify().ok()); }
};

/// A whole station under the virtual clock with one person at it.
class Shop {
 public:
  Shop(int nests, std::vector<Piece> pieces, production::MistakePlan mistakes = {}, std::uint64_t seed = 4)
      : configuration_(with_nests(nests)),
        station(options(nests, seed)),
        handler_(station.bench()),
        person(
            station.clock(), handler_, [this](const auto& request) { station.line().request(request); },
            settings(pieces, std::move(mistakes)), pieces) {
    for (const auto& event : station.events()) person.hear(event);
    station.on_event = [this](const auto& event) { person.hear(event); };
  }

  /// Works until the end; false when that never comes.
  bool work() {
    bool ended = false;
    boost::asio::co_spawn(station.io(), person.work(), [&](const std::exception_ptr& error) {
      ended = true;
      if (error) std::rethrow_exception(error);
    });
    const auto limit = station.clock().steady_now() + std::chrono::hours(2);
    station.clock().run_until(
        station.io(), [&] { return ended; }, limit);
    EXPECT_EQ(person.done().trouble, "");
    return ended && station.finish();
  }

  double truth_nm(const std::string& serial) { return station.bench().truths().at(serial).red.centroid_nm; }
  double truth_ohm(const std::string& serial) { return station.bench().truths().at(serial).id_resistance_ohm; }

  /// Every reading belongs to the serial that it stands under: the bench's truth of that serial says so.
  void expect_right_pairs() {
    for (const auto& attempt : person.done().attempts) {
      const std::string& serial = attempt.outcome.serial;
      EXPECT_EQ(attempt.sat_there, serial);
      for (const auto& judged : attempt.outcome.readings) {
        if (!judged.reading.value) continue;
        // U is 0.29 nm and 20 ohm or so (k = 2); bins lie 2 nm and 15 % apart.
        if (judged.reading.check == "red_centroid" && std::isfinite(truth_nm(serial)))
          EXPECT_NEAR(*judged.reading.value, truth_nm(serial), 0.6) << serial;
        if (judged.reading.check == "id_resistance" && std::isfinite(truth_ohm(serial)))
          EXPECT_NEAR(*judged.reading.value, truth_ohm(serial), 0.005 * truth_ohm(serial)) << serial;
      }
    }
  }
  std::map<std::string, std::vector<RunVerdict>> verdicts() const {
    std::map<std::string, std::vector<RunVerdict>> all;
    for (const auto& attempt : person.done().attempts) all[attempt.outcome.serial].push_back(attempt.outcome.verdict);
    return all;
  }

 private:
  trial::Options options(int nests, std::uint64_t seed) {
    trial::Options with = ledger_.options(seed);
    with.bench.nests = nests;
    with.configuration = &configuration_;
    return with;
  }
  static production::OperatorSettings settings(const std::vector<Piece>& pieces, production::MistakePlan mistakes) {
    production::OperatorSettings with;
    with.badge = "AQS-7Q41-IV";
    with.lot_card =
        "LOT/AQ20-W48-07/AQ-20/" + std::to_string(pieces.size()) + "/" + (pieces.empty() ? "" : pieces[0].serial);
    with.movement = std::chrono::milliseconds(300);
    with.mistakes = std::move(mistakes);
    return with;
  }

  sequence::Configuration configuration_;
  CheckedLedger ledger_;

 public:
  Trial station;

 private:
  BenchHandler handler_;

 public:
  production::EmulatedOperator person;
};

TEST(Operator, WorksThroughALotInAllNestsAtOnce) {
  Shop shop{4, pieces_of(emulated::demo_lot("AQ-20", 48, 48, 4))};
  const auto begin = shop.station.clock().steady_now();
  ASSERT_TRUE(shop.work());
  EXPECT_EQ(shop.person.done().attempts.size(), 48u);
  EXPECT_EQ(shop.verdicts().size(), 48u);
  EXPECT_TRUE(shop.person.done().left_out.empty());
  EXPECT_TRUE(shop.person.done().blunders.empty());
  shop.expect_right_pairs();
  std::set<int> nests;
  Duration measured{};
  for (const auto& attempt : shop.person.done().attempts) {
    nests.insert(attempt.outcome.nest);
    measured += attempt.outcome.cycle;
    const Piece& piece = shop.person.pieces()[attempt.piece];
    const auto fault = emulated::parse_fault(piece.fault);
    if (piece.fault.empty()) EXPECT_EQ(attempt.outcome.verdict, RunVerdict::pass) << attempt.outcome.cause_words;
    if (fault && is_hard(*fault)) EXPECT_EQ(attempt.outcome.verdict, RunVerdict::fail) << piece.fault;
  }
  EXPECT_EQ(nests.size(), 4u);
  // Four nests side by side: the lot takes less than half of what its runs take one after the other.
  EXPECT_LT(shop.station.clock().steady_now() - begin, measured / 2);
}

TEST(Operator, OneSeedGivesOneLedger) {
  const auto seal_of = [](std::uint64_t seed) {
    Shop shop{2, healthy(4), {0.5, seed, {}}, seed};
    EXPECT_TRUE(shop.work());
    return to_hex(shop.station.seal().hash);
  };
  EXPECT_EQ(seal_of(7), seal_of(7));
  EXPECT_NE(seal_of(7), seal_of(8));
}

class EachMistake : public ::testing::TestWithParam<Mistake> {};

/// A wrong move with the third of six probes, in three nests.
TEST_P(EachMistake, EndsInASentenceAndInNoWrongPair) {
  const Mistake mistake = GetParam();
  Shop shop{3, healthy(6), {0.0, 1, {{2, mistake}}}};
  ASSERT_TRUE(shop.work());
  ASSERT_EQ(shop.person.done().blunders.size(), 1u);
  const auto& blunder = shop.person.done().blunders.front();
  EXPECT_EQ(blunder.mistake, mistake);
  EXPECT_TRUE(blunder.made);
  EXPECT_FALSE(blunder.taken);
  ASSERT_FALSE(blunder.told.empty());
  for (const std::string& words : blunder.told) EXPECT_GT(words.size(), 10u) << words;
  shop.expect_right_pairs();
  // Nobody's probe is worse off: each has its pass. The one whose lid was opened has a void before it.
  const auto verdicts = shop.verdicts();
  EXPECT_EQ(verdicts.size(), 6u);
  for (const auto& [serial, all] : verdicts) {
    EXPECT_EQ(all.back(), RunVerdict::pass) << serial;
    const bool twice = mistake == Mistake::lid_opened && serial == "AQ20-048-00003";
    EXPECT_EQ(all.size(), twice ? 2u : 1u) << serial;
    if (twice) EXPECT_EQ(all.front(), RunVerdict::void_run);
  }
  EXPECT_TRUE(shop.person.done().left_out.empty());
}

INSTANTIATE_TEST_SUITE_P(Of, EachMistake,
                         ::testing::ValuesIn(production::all_mistakes().begin(), production::all_mistakes().end()),
                         [](const auto& item) { return std::string{slug(item.param)}; });

TEST(Operator, MistakesAtRandomNeverMixUpProbes) {
  std::map<Mistake, int> made;
  for (std::uint64_t seed = 1; seed <= 4; ++seed) {
    SCOPED_TRACE(seed);
    Shop shop{3, pieces_of(emulated::demo_lot("AQ-20", 48, 20, seed)), {0.7, seed, {}}, seed};
    ASSERT_TRUE(shop.work());
    shop.expect_right_pairs();
    for (const auto& blunder : shop.person.done().blunders) {
      if (!blunder.made) continue;
      ++made[blunder.mistake];
      EXPECT_FALSE(blunder.told.empty()) << slug(blunder.mistake);
      EXPECT_FALSE(blunder.taken) << slug(blunder.mistake);
    }
    EXPECT_EQ(shop.verdicts().size() + shop.person.done().left_out.size(), 20u);
  }
  EXPECT_EQ(made.size(), production::all_mistakes().size()) << "each kind comes up in 56 draws of nine kinds";
}

TEST(Operator, WithOneNestAMistakeThatNeedsTwoIsToldAsNotMade) {
  Shop shop{1, healthy(2), {0.0, 1, {{0, Mistake::wrong_nest}}}};
  ASSERT_TRUE(shop.work());
  ASSERT_EQ(shop.person.done().blunders.size(), 1u);
  EXPECT_FALSE(shop.person.done().blunders[0].made);
  EXPECT_EQ(shop.verdicts().size(), 2u);
}

TEST(Operator, StopsWhenAskedAndLeavesNoProbeBehind) {
  Shop shop{2, healthy(10)};
  bool asked = false;
  shop.station.on_event = [&](const sequence::LineEvent& event) {
    shop.person.hear(event);
    if (asked || !std::holds_alternative<sequence::RunEnded>(event)) return;
    asked = true;
    shop.person.stop();
  };
  ASSERT_TRUE(shop.work());
  EXPECT_GE(shop.verdicts().size(), 1u);
  EXPECT_LT(shop.verdicts().size(), 10u);
  EXPECT_EQ(shop.verdicts().size() + shop.person.done().left_out.size(), 10u);
  for (int nest = 1; nest <= 2; ++nest) EXPECT_EQ(shop.station.bench().remove(nest).error().id, "bench_nest_empty");
}

TEST(Operator, ALineThatRefusesTheBadgeEndsTheWork) {
  Shop shop{1, healthy(1)};
  production::OperatorSettings settings;
  settings.badge = "AQS-NOBODY";
  BenchHandler handler{shop.station.bench()};
  production::EmulatedOperator stranger{shop.station.clock(), handler,
                                        [&](const auto& request) { shop.station.line().request(request); }, settings,
                                        healthy(1)};
  for (const auto& event : shop.station.events()) stranger.hear(event);
  shop.station.on_event = [&](const auto& event) { stranger.hear(event); };
  bool ended = false;
  boost::asio::co_spawn(shop.station.io(), stranger.work(), [&](const std::exception_ptr&) { ended = true; });
  shop.station.clock().run_until(shop.station.io(), [&] { return ended; });
  EXPECT_NE(stranger.done().trouble.find("no badge"), std::string::npos) << stranger.done().trouble;
  EXPECT_TRUE(stranger.done().attempts.empty());
  EXPECT_EQ(stranger.done().left_out.size(), 1u);
  EXPECT_TRUE(shop.station.finish());
}

TEST(MistakePlan, DrawsAtItsRateAndEachKindAlike) {
  const production::MistakePlan plan{0.3, 9, {{5, Mistake::lid_opened}}};
  std::map<Mistake, int> counts;
  int all = 0;
  for (std::size_t piece = 0; piece < 30000; ++piece)
    if (const auto mistake = plan.at(piece)) {
      ++counts[*mistake];
      ++all;
    }
  EXPECT_NEAR(all, 9000, 400);  // five standard deviations of a binomial count
  for (const auto& [mistake, count] : counts) EXPECT_NEAR(count, 1000, 160) << slug(mistake);
  EXPECT_EQ(plan.at(5), Mistake::lid_opened);
  EXPECT_EQ((production::MistakePlan{}.at(3)), std::nullopt);
}

}  // namespace
}  // namespace probewright
