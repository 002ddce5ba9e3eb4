#include <gtest/gtest.h>

#include <boost/asio/post.hpp>

#include "tests/trial/memory_ledger.h"

// The rules of the floor that hold already: arming, the right probe in the nest, pass, fail and void.
namespace probewright {
namespace {

using emulated::DeviceId;
using emulated::DeviceKind;
using sequence::NestState;
using sequence::RunVerdict;
using trial::MemoryLedger;
using trial::Told;
using trial::Trial;

constexpr DeviceId the_phantom{1, DeviceKind::phantom}, the_adapter{1, DeviceKind::adapter};
constexpr emulated::AdapterDevice::Drive dark{};

class Floor : public ::testing::Test {
 protected:
  MemoryLedger ledger;
  Trial station{ledger.options(1)};

  sequence::ArmNest scan(const std::string& serial) {
    sequence::ArmNest request;
    request.serial = serial;
    request.operator_name = "Imre Vasko";
    return request;
  }
  /// Does something once, when the run has come to this stage.
  void at_stage(int stage, std::function<void()> what) {
    station.on_event = [this, stage, what, done = false](const sequence::LineEvent& event) mutable {
      const auto* changed = std::get_if<sequence::NestChanged>(&event);
      if (done || !changed || changed->view.state != NestState::running || changed->view.stage != stage) return;
      done = true;
      boost::asio::post(station.io(), what);  // not from within the line's own call
    };
  }
  /// A probe whose ID resistor is far off: its reading lies outside from the first stage on.
  void seat_bad_id(const std::string& serial) {
    emulated::Probe probe = emulated::draw_probe(1, serial, "AQ-20");
    probe.id_ohm *= 1.08;
    station.bench().seat(1, probe).value();
  }
  Told run_of_bad_id() {
    const std::string serial = "AQ20-048-00009";
    EXPECT_TRUE(station.reaches(NestState::empty));
    station.line().arm(scan(serial)).value();
    seat_bad_id(serial);
    Told told;
    for (int i = 0; i < 400 && !told.outcome; ++i) {
      station.let_pass(std::chrono::milliseconds(50));
      for (const auto& event : station.events())
        if (const auto* end = std::get_if<sequence::RunEnded>(&event)) told.outcome = end->outcome;
    }
    return told;
  }
};

TEST_F(Floor, AProbeThatWasInBeforeTheScanIsRefused) {
  ASSERT_TRUE(station.reaches(NestState::empty));
  station.bench().seat(1, "AQ20-048-00001", "AQ-20").value();
  ASSERT_TRUE(station.reaches(NestState::occupied));
  const auto armed = station.line().arm(scan("AQ20-048-00001"));
  ASSERT_FALSE(armed);
  EXPECT_EQ(armed.error().id, "nest_occupied");
}

TEST_F(Floor, AProbeLeftInPlaceIsNotTestedAgain) {
  ASSERT_TRUE(station.test("AQ20-048-00001").outcome);
  station.bench().seat(1, "AQ20-048-00001", "AQ-20").value();  // in again before the line saw the nest empty
  ASSERT_TRUE(station.reaches(NestState::occupied));
  EXPECT_EQ(station.line().arm(scan("AQ20-048-00001")).error().id, "nest_occupied");
}

TEST_F(Floor, AScanOfNoModelAndAProductionRunAreRefused) {
  ASSERT_TRUE(station.reaches(NestState::empty));
  EXPECT_EQ(station.line().arm(scan("AQ99-1")).error().id, "serial_unknown");
  auto production = scan("AQ20-048-00001");
  production.purpose = sequence::Purpose::production;
  EXPECT_EQ(station.line().arm(production).error().id, "purpose_not_possible");
  auto elsewhere = scan("AQ20-048-00001");
  elsewhere.nest = 7;
  EXPECT_EQ(station.line().arm(elsewhere).error().id, "nest_not_there");
}

TEST_F(Floor, AnArmingEndsAfterTwentySeconds) {
  ASSERT_TRUE(station.reaches(NestState::empty));
  station.line().arm(scan("AQ20-048-00001")).value();
  station.let_pass(std::chrono::seconds(19));
  EXPECT_EQ(station.line().views().front().state, NestState::armed);
  station.let_pass(std::chrono::seconds(2));
  EXPECT_EQ(station.line().views().front().state, NestState::empty);
  EXPECT_EQ(std::get<sequence::ArmingEnded>(station.events()[station.events().size() - 2]).problem.id, "arming_ended");
}

TEST_F(Floor, ARunWaitsForTheLid) {
  ASSERT_TRUE(station.reaches(NestState::empty));
  station.bench().lid(1, true).value();
  station.line().arm(scan("AQ20-048-00001")).value();
  station.bench().seat(1, "AQ20-048-00001", "AQ-20").value();
  station.let_pass(std::chrono::seconds(3));
  EXPECT_EQ(station.line().views().front().words, "close the lid");
  station.bench().lid(1, false).value();
  EXPECT_TRUE(station.reaches(NestState::running));
}

// Part of the rule: a stop by a person before any reading lies outside is void.
TEST_F(Floor, AStopBeforeAnyReadingLiesOutsideIsVoid) {
  at_stage(3, [this] { station.line().stop(sequence::StopNest{1, "Imre Vasko"}).value(); });
  const Told told = station.test("AQ20-048-00001");
  ASSERT_TRUE(told.outcome);
  EXPECT_EQ(told.outcome->verdict, RunVerdict::void_run);
  EXPECT_EQ(told.outcome->cause, "stopped_by_person");
  EXPECT_EQ(station.bench().drive(1), dark);
}

TEST_F(Floor, AStopAfterAReadingOutsideIsAFail) {
  at_stage(4, [this] { station.line().stop(sequence::StopNest{1, "Imre Vasko"}).value(); });
  const Told told = run_of_bad_id();
  ASSERT_TRUE(told.outcome);
  EXPECT_EQ(told.outcome->verdict, RunVerdict::fail);
  EXPECT_EQ(told.outcome->cause, "stopped_by_person");
  EXPECT_EQ(told.outcome->failing, std::vector<std::string>{"id_deviation"});
}

TEST_F(Floor, ACompletedRunWithAReadingOutsideFailsByTheSheet) {
  const Told told = run_of_bad_id();
  ASSERT_TRUE(told.outcome);
  EXPECT_EQ(told.outcome->verdict, RunVerdict::fail);
  EXPECT_EQ(told.outcome->cause, "limits");
  EXPECT_EQ(told.outcome->failing, std::vector<std::string>{"id_deviation"});
}

class Disturbance : public Floor, public ::testing::WithParamInterface<int> {};

TEST_P(Disturbance, AnOpenedLidEndsTheRunVoidAndDark) {
  at_stage(GetParam(), [this] { station.bench().lid(1, true).value(); });
  const Told told = station.test("AQ20-048-00001");
  ASSERT_TRUE(told.outcome);
  EXPECT_EQ(told.outcome->verdict, RunVerdict::void_run);
  EXPECT_EQ(told.outcome->cause, "lid_opened");
  EXPECT_EQ(station.bench().drive(1), dark);
}

TEST_P(Disturbance, AProbeTakenOutEndsTheRunVoid) {
  at_stage(GetParam(), [this] { station.bench().remove(1).value(); });
  const Told told = station.test("AQ20-048-00001");
  ASSERT_TRUE(told.outcome);
  EXPECT_EQ(told.outcome->verdict, RunVerdict::void_run) << told.outcome->cause_words;
  EXPECT_EQ(station.bench().drive(1), dark);
}

TEST_P(Disturbance, AnotherProbePutInDuringTheRunEndsItVoid) {
  at_stage(GetParam(), [this] {
    station.bench().remove(1).value();
    station.bench().seat(1, "AQ20-048-00002", "AQ-20").value();
  });
  const Told told = station.test("AQ20-048-00001");
  ASSERT_TRUE(told.outcome);
  EXPECT_EQ(told.outcome->verdict, RunVerdict::void_run) << told.outcome->cause_words;
}

TEST_P(Disturbance, APulledDeviceVoidsTheRunAndComesBack) {
  for (const DeviceId device : {the_phantom, the_adapter}) {
    at_stage(GetParam(), [this, device] { station.bench().pull(device).value(); });
    const Told told = station.test("AQ20-048-00001");
    ASSERT_TRUE(told.outcome) << to_text(device);
    EXPECT_EQ(told.outcome->verdict, RunVerdict::void_run);
    EXPECT_EQ(told.outcome->cause, "device_lost");
    ASSERT_TRUE(station.reaches(NestState::not_ready));
    station.bench().plug(device).value();
    station.on_event = nullptr;
    const Told after = station.test("AQ20-048-00001");
    ASSERT_TRUE(after.outcome) << to_text(device);
    EXPECT_EQ(after.outcome->verdict, RunVerdict::pass);
  }
}

TEST_P(Disturbance, ADeviceThatStartsAnewVoidsTheRun) {
  for (const DeviceId device : {the_phantom, the_adapter}) {
    at_stage(GetParam(), [this, device] { station.bench().restart(device).value(); });
    const Told told = station.test("AQ20-048-00001");
    ASSERT_TRUE(told.outcome) << to_text(device);
    EXPECT_EQ(told.outcome->verdict, RunVerdict::void_run) << to_text(device) << " " << told.outcome->cause;
    EXPECT_EQ(station.bench().drive(1), dark) << to_text(device);
    station.on_event = nullptr;
    ASSERT_TRUE(station.reaches(NestState::empty)) << to_text(device);
  }
}

INSTANTIATE_TEST_SUITE_P(AtEveryStage, Disturbance, ::testing::Range(1, 7));

TEST(Readiness, AWrongCertificateIsRefusedInWords) {
  MemoryLedger ledger;
  trial::Options options = ledger.options(1);
  options.bench.wrong_certificate = {the_adapter};
  Trial station{options};
  station.let_pass(std::chrono::seconds(5));
  const auto view = station.line().views().front();
  EXPECT_EQ(view.state, NestState::not_ready);
  EXPECT_NE(view.words.find("certificate"), std::string::npos) << view.words;
}

TEST(Readiness, ACertificateHoldsToTheEndOfItsDay) {
  MemoryLedger ledger;
  trial::Options options = ledger.options(1);
  options.start = parse_utc("2027-06-30T23:59:00Z").value();
  Trial station{options};
  EXPECT_TRUE(station.reaches(NestState::empty));
  station.let_pass(std::chrono::seconds(70));
  const auto view = station.line().views().front();
  EXPECT_EQ(view.state, NestState::not_ready);
  EXPECT_NE(view.words.find("2027-06-30"), std::string::npos) << view.words;
}

}  // namespace
}  // namespace probewright
