#include <gtest/gtest.h>

#include <boost/asio/co_spawn.hpp>
#include <boost/asio/post.hpp>
#include <map>

#include "tests/trial/memory_ledger.h"

// Several nests in one line: they run at the same time, and what happens to one is nothing to the others.
namespace probewright {
namespace {

using emulated::DeviceId;
using emulated::DeviceKind;
using sequence::NestState;
using sequence::RunOutcome;
using sequence::RunVerdict;
using trial::MemoryLedger;
using trial::Trial;

constexpr int nests = 4;

/// The demonstration with more nests; their certificates stand in its configuration.
sequence::Configuration with_nests() {
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

std::string serial_of(int nest) { return "AQ20-048-0000" + std::to_string(nest); }

class ManyNests : public ::testing::Test {
 protected:
  /// Scans, seats and waits until every nest has told its outcome.
  std::map<int, RunOutcome> test_all() {
    for (int nest = 1; nest <= nests; ++nest) {
      sequence::ArmNest request;
      request.nest = nest;
      request.serial = serial_of(nest);
      station.line().arm(request).value();
      station.bench().seat(nest, serial_of(nest), "AQ-20").value();
    }
    for (int i = 0; i < 1000 && outcomes().size() < nests; ++i) station.let_pass(std::chrono::milliseconds(20));
    return outcomes();
  }
  bool all_empty() {
    for (int i = 0; i < 500; ++i) {
      station.let_pass(std::chrono::milliseconds(20));
      bool empty = true;
      for (const auto& view : station.line().views()) empty &= view.state == NestState::empty;
      if (empty) return true;
    }
    return false;
  }
  std::map<int, RunOutcome> outcomes() const {
    std::map<int, RunOutcome> ended;
    for (const auto& event : station.events())
      if (const auto* run = std::get_if<sequence::RunEnded>(&event)) ended[run->outcome.nest] = run->outcome;
    return ended;
  }

  trial::Options options() {
    trial::Options with = ledger.options(4);
    with.bench.nests = nests;
    with.configuration = &configuration;
    return with;
  }
  sequence::Configuration configuration = with_nests();
  MemoryLedger ledger;
  Trial station{options()};
};

TEST_F(ManyNests, RunAtTheSameTimeEachWithItsOwnProbe) {
  ASSERT_TRUE(all_empty());
  const auto ended = test_all();
  ASSERT_EQ(ended.size(), static_cast<std::size_t>(nests));
  for (const auto& [nest, outcome] : ended) {
    EXPECT_EQ(outcome.serial, serial_of(nest));
    EXPECT_EQ(outcome.verdict, RunVerdict::pass) << outcome.cause_words;
    // The reading belongs to this probe: the bench's truth of the serial says so, not the nest that told it.
    const double truth = station.bench().truths().at(outcome.serial).red.centroid_nm;
    for (const auto& judged : outcome.readings)
      if (judged.reading.check == "red_centroid") EXPECT_NEAR(*judged.reading.value, truth, 0.33);
  }
  EXPECT_LT(seconds(ended.at(1).cycle), 4.0);  // as long as one nest alone, not four times that
  EXPECT_LT(seconds(ended.at(nests).cycle), 4.0);
  ASSERT_TRUE(station.finish());
}

/// Where in a run of nest 2 which cable is pulled, and how long after the stage began.
struct Pull {
  int stage;
  DeviceKind device;
  int after_ms;
};
class PulledCable : public ManyNests, public ::testing::WithParamInterface<Pull> {};

TEST_P(PulledCable, IsNothingToTheOthersAndComesBackByItself) {
  const Pull pull = GetParam();
  ASSERT_TRUE(all_empty());
  std::optional<SteadyTime> due;
  station.on_event = [&](const sequence::LineEvent& event) {
    const auto* changed = std::get_if<sequence::NestChanged>(&event);
    if (due || !changed || changed->view.nest != 2 || changed->view.stage != pull.stage) return;
    due = station.clock().steady_now() + std::chrono::milliseconds(pull.after_ms);
    boost::asio::co_spawn(station.io(), station.clock().wait_until(*due), [&](const std::exception_ptr&) {
      station.bench().pull({2, pull.device}).value();
    });
  };
  const auto ended = test_all();
  ASSERT_TRUE(due);
  ASSERT_EQ(ended.size(), static_cast<std::size_t>(nests));
  for (const auto& [nest, outcome] : ended)
    EXPECT_EQ(outcome.verdict, nest == 2 ? RunVerdict::void_run : RunVerdict::pass) << outcome.cause_words;
  EXPECT_EQ(ended.at(2).cause, "device_lost");
  EXPECT_EQ(ended.at(1).asked_again + ended.at(3).asked_again + ended.at(4).asked_again, 0);
  station.bench().plug({2, pull.device}).value();
  for (int nest = 1; nest <= nests; ++nest) station.bench().remove(nest).value();
  EXPECT_TRUE(all_empty()) << station.line().views()[1].words;
  ASSERT_TRUE(station.finish());
}

// Each stage with captures, both devices, early and in mid-capture.
INSTANTIATE_TEST_SUITE_P(TenTimes, PulledCable,
                         ::testing::Values(Pull{1, DeviceKind::adapter, 20}, Pull{2, DeviceKind::phantom, 40},
                                           Pull{2, DeviceKind::adapter, 90}, Pull{3, DeviceKind::adapter, 10},
                                           Pull{3, DeviceKind::phantom, 150}, Pull{4, DeviceKind::adapter, 300},
                                           Pull{4, DeviceKind::phantom, 60}, Pull{5, DeviceKind::adapter, 450},
                                           Pull{5, DeviceKind::phantom, 200}, Pull{6, DeviceKind::adapter, 120}));

}  // namespace
}  // namespace probewright
