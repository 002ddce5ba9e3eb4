#include <gtest/gtest.h>

#include <boost/asio/post.hpp>

#include "station/sequence/scan_text.h"
#include "station/sequence/tries_rule.h"
#include "tests/trial/memory_ledger.h"

// What people do at the scanner: badges, lot cards, serials, and their mistakes. Each ends in one sentence.
namespace probewright {
namespace {

using sequence::Answered;
using sequence::NestState;
using sequence::RunVerdict;
using trial::MemoryLedger;
using trial::Trial;

constexpr const char* operator_badge = "AQS-7Q41-IV";
constexpr const char* engineer_badge = "AQS-2K88-DO";
constexpr const char* auditor_badge = "AQS-4B62-NC";
constexpr const char* lot_card = "LOT/AQ20-W48-07/AQ-20/48/AQ20-048-00001";

sequence::Configuration with_two_nests() {
  sequence::Configuration configuration = trial::demonstration();
  configuration.station.value.nests.push_back(
      {2, {"nest2-phantom", "PHC-2026-0102"}, {"nest2-adapter", "ADC-2026-0102"}});
  return configuration;
}

class Scans : public ::testing::Test {
 protected:
  trial::Options options() {
    trial::Options with = ledger.options(3);
    with.bench.nests = 2;
    with.configuration = &configuration;
    return with;
  }
  void SetUp() override {
    ASSERT_TRUE(station.reaches(NestState::empty));
    for (int i = 0; i < 100 && state(2) != NestState::empty; ++i) wait(20);
    ASSERT_EQ(state(2), NestState::empty);
  }
  void wait(int ms) { station.let_pass(std::chrono::milliseconds(ms)); }
  NestState state(int nest) { return station.line().views().at(static_cast<std::size_t>(nest - 1)).state; }

  template <class Event>
  std::vector<Event> all() const {
    std::vector<Event> found;
    for (const auto& event : station.events())
      if (const auto* one = std::get_if<Event>(&event)) found.push_back(*one);
    return found;
  }
  Answered ask(sequence::LineRequest request) {
    const std::size_t before = all<Answered>().size();
    boost::asio::post(station.io(), [this, request = std::move(request)] { station.line().request(request); });
    for (int i = 0; i < 200 && all<Answered>().size() == before; ++i) wait(5);
    EXPECT_EQ(all<Answered>().size(), before + 1);
    return all<Answered>().back();
  }
  Answered scan(const std::string& text) { return ask(sequence::Scan{text}); }
  std::string refusal(const std::string& text) {
    const Answered answered = scan(text);
    return answered.problem ? answered.problem->id : "taken: " + answered.words;
  }
  void open_up() {
    EXPECT_TRUE(scan(operator_badge).taken);
    EXPECT_TRUE(scan(lot_card).taken);
  }
  /// Scans, puts the probe in where the line wants it, waits for the end and takes it out.
  sequence::RunOutcome run(const std::string& serial, std::optional<emulated::PlantedFault> fault = {}) {
    const Answered armed = scan(serial);
    EXPECT_TRUE(armed.taken) << armed.words;
    const std::size_t before = all<sequence::RunEnded>().size();
    if (fault)
      station.bench().seat(armed.nest, serial, "AQ-20", *fault).value();
    else
      station.bench().seat(armed.nest, serial, "AQ-20").value();
    for (int i = 0; i < 1000 && all<sequence::RunEnded>().size() == before; ++i) wait(20);
    const auto outcome = all<sequence::RunEnded>().back().outcome;
    station.bench().remove(armed.nest).value();
    for (int i = 0; i < 100 && state(armed.nest) != NestState::empty; ++i) wait(20);
    return outcome;
  }

  sequence::Configuration configuration = with_two_nests();
  MemoryLedger ledger;
  Trial station{options()};
};

TEST_F(Scans, AShiftFromTheBadgeToTheClosedLot) {
  EXPECT_EQ(refusal("AQ20-048-00001"), "nobody_signed_in");
  EXPECT_EQ(scan(operator_badge).words, "Imre Vasko, operator, is signed in");
  EXPECT_EQ(refusal("AQ20-048-00001"), "no_lot_open");
  EXPECT_EQ(scan(lot_card).words, "lot AQ20-W48-07 is open: 48 of AQ-20");
  const auto outcome = run("AQ20-048-00001");
  EXPECT_EQ(outcome.verdict, RunVerdict::pass) << outcome.cause_words;
  EXPECT_EQ(outcome.purpose, sequence::Purpose::production);
  EXPECT_EQ(outcome.nest, 1);
  const auto view = station.line().view();
  EXPECT_EQ(view.person->name, "Imre Vasko");
  EXPECT_EQ(view.lot->tested, 1);
  EXPECT_EQ(view.tally.passed_first_time, 1);
  EXPECT_EQ(view.berths.at(0).last->serial, "AQ20-048-00001");
  EXPECT_FALSE(view.berths.at(0).marks.empty());
  EXPECT_TRUE(view.berths.at(0).plots);
  EXPECT_EQ(ask(sequence::CloseLot{}).words, "lot AQ20-W48-07 is closed");
  EXPECT_EQ(refusal(lot_card), "lot_was_closed");
  EXPECT_EQ(ask(sequence::SignOut{}).words, "Imre Vasko is signed out");
  EXPECT_TRUE(station.finish());
}

TEST_F(Scans, OneSerialIsInOneNestAndPassesOnce) {
  open_up();
  run("AQ20-048-00001");
  EXPECT_EQ(refusal("AQ20-048-00001"), "serial_passed");
  EXPECT_TRUE(scan("AQ20-048-00002").taken);
  EXPECT_EQ(refusal("AQ20-048-00002"), "serial_in_nest");
  EXPECT_EQ(refusal("AQ20-048-00003"), "other_probe_awaited");
  station.bench().seat(1, "AQ20-048-00002", "AQ-20").value();
  wait(500);
  EXPECT_EQ(refusal("AQ20-048-00002"), "serial_in_nest");
  EXPECT_EQ(scan("AQ20-048-00003").nest, 2);
}

TEST_F(Scans, AChosenNestIsTakenOnce) {
  open_up();
  EXPECT_EQ(scan("Nest 2").words, "scan the probe for nest 2");
  EXPECT_EQ(run("AQ20-048-00001").nest, 2);
  EXPECT_EQ(run("AQ20-048-00002").nest, 1);
  EXPECT_EQ(refusal("nest 3"), "nest_not_there");
}

// Two scans in one go, the first answered without any wait: the second was never served, for the line still took itself
// to be serving the first.
TEST_F(Scans, AScanRightAfterTheLastAnswerIsServed) {
  boost::asio::post(station.io(), [this] {
    station.line().request(sequence::Scan{"nest 1"});
    station.line().request(sequence::Scan{"nest 2"});
  });
  wait(100);
  ASSERT_EQ(all<Answered>().size(), 2u);
  EXPECT_EQ(all<Answered>()[1].words, "scan the probe for nest 2");
}

TEST_F(Scans, AProbeInTheWrongNestStopsInWords) {
  open_up();
  EXPECT_EQ(scan("AQ20-048-00001").nest, 1);
  station.bench().seat(2, "AQ20-048-00001", "AQ-20").value();
  wait(300);
  const auto ended = all<sequence::ArmingEnded>();
  ASSERT_EQ(ended.size(), 1u);
  EXPECT_EQ(ended[0].problem.id, "probe_in_other_nest");
  EXPECT_EQ(state(2), NestState::occupied);
  EXPECT_TRUE(all<sequence::RunStarted>().empty());
  station.bench().remove(2).value();
  wait(300);
  EXPECT_EQ(run("AQ20-048-00001").verdict, RunVerdict::pass);
}

TEST_F(Scans, AFailIsTriedOnceMoreAfterItsRest) {
  open_up();
  const emulated::PlantedFault leaky{emulated::ProbeFault::detector_leaky, 1.0};
  EXPECT_EQ(run("AQ20-048-00001", leaky).verdict, RunVerdict::fail);
  EXPECT_EQ(refusal("AQ20-048-00001"), "serial_rests");
  wait(61'000);
  EXPECT_EQ(run("AQ20-048-00001").verdict, RunVerdict::fail);
  wait(61'000);
  EXPECT_EQ(refusal("AQ20-048-00001"), "serial_tries_used");
  EXPECT_EQ(station.line().view().tally.failed, 1);  // one serial, however often it was tried
}

TEST_F(Scans, SigningOutStopsWhatGoesOn) {
  open_up();
  const Answered armed = scan("AQ20-048-00001");
  station.bench().seat(armed.nest, "AQ20-048-00001", "AQ-20").value();
  wait(800);
  ASSERT_EQ(state(1), NestState::running);
  EXPECT_EQ(refusal(engineer_badge), "sign_in_while_testing");
  EXPECT_TRUE(ask(sequence::SignOut{}).taken);
  for (int i = 0; i < 100 && all<sequence::RunEnded>().empty(); ++i) wait(20);
  const auto outcome = all<sequence::RunEnded>().at(0).outcome;
  EXPECT_EQ(outcome.verdict, RunVerdict::void_run);
  EXPECT_EQ(outcome.cause_words, "stopped by Imre Vasko");
}

TEST_F(Scans, MistakesAreToldInWords) {
  EXPECT_EQ(refusal(""), "scan_empty");
  EXPECT_EQ(refusal(std::string(65, 'A')), "scan_too_long");
  EXPECT_EQ(refusal("AQ20\x07"), "scan_control");
  const Answered unknown = scan("AQS-0000-XX");
  EXPECT_EQ(unknown.problem->id, "scan_unknown");
  EXPECT_EQ(unknown.words.find("AQS-0000-XX"), std::string::npos);  // it may be somebody's badge
  EXPECT_EQ(refusal("LOT/AQ20-W48-07/AQ-99/48/AQ20-048-00001"), "lot_card_model");
  EXPECT_EQ(refusal("LOT/AQ20-W48-07/AQ-20/48"), "lot_card_malformed");
  EXPECT_EQ(refusal("LOT/AQ20-W48-07/AQ-20/0/AQ20-048-00001"), "lot_card_malformed");
  EXPECT_EQ(refusal("LOT/AQ20-W48-07/AQ-20/48/AQ20-048-99999"), "lot_card_malformed");  // cannot be counted up
  EXPECT_EQ(refusal(lot_card), "nobody_signed_in");
  EXPECT_TRUE(scan(auditor_badge).taken);
  EXPECT_EQ(refusal(lot_card), "person_may_not");
  open_up();
  EXPECT_EQ(refusal("AQ20-048-00049"), "serial_of_other_lot");
  EXPECT_EQ(refusal("LOT/AQ20-W48-08/AQ-20/48/AQ20-048-00101"), "lot_is_open");
  EXPECT_EQ(ask(sequence::StopNest{1, ""}).problem->id, "nest_idle");
}

TEST(Lot, IsTakenUpWhereTheLineLeftIt) {
  const sequence::Configuration configuration = with_two_nests();
  MemoryLedger ledger;
  trial::Options with = ledger.options(3);
  {
    Trial station{with};
    ASSERT_TRUE(station.reaches(NestState::empty));
    boost::asio::post(station.io(), [&] {
      station.line().request(sequence::Scan{operator_badge});
      station.line().request(sequence::Scan{lot_card});
    });
    station.let_pass(std::chrono::seconds(1));
    ASSERT_TRUE(station.line().view().lot);
    ASSERT_TRUE(station.finish());
  }
  {
    Trial station{with};
    ASSERT_TRUE(station.reaches(NestState::empty));
    ASSERT_TRUE(station.line().view().lot);
    EXPECT_EQ(station.line().view().lot->lot, "AQ20-W48-07");
    EXPECT_FALSE(station.line().view().person);  // nobody is signed in after a start
    EXPECT_TRUE(station.finish());
  }
  EXPECT_TRUE(ledger.verify().ok());
}

TEST(Serials, AreCountedUpInTheirWidth) {
  EXPECT_EQ(sequence::serial_after("AQ20-048-00099", 1), "AQ20-048-00100");
  EXPECT_EQ(sequence::serial_after("AQ20-048-00001", 0), "AQ20-048-00001");
  EXPECT_EQ(sequence::serial_after("AQ20-048-99999", 1), std::nullopt);
  EXPECT_EQ(sequence::serial_after("no digits", 1), std::nullopt);
  EXPECT_EQ(sequence::serial_after("123456789012", 1), "123456789013");
}

db::Try run_of(std::string verdict, double ended_s) {
  db::Try run;
  run.verdict = std::move(verdict);
  run.closed_at = UtcTime{static_cast<std::int64_t>(ended_s * 1e6)};
  return run;
}

TEST(Tries, AreCountedByTheRulesOfTheFloor) {
  const limits::Retest retest{1, 60.0};
  const auto problem = [&](std::vector<db::Try> runs, bool engineer = false) {
    const auto found = sequence::not_another_try(runs, retest, {"S", UtcTime{1'000'000'000}, engineer, 1.0});
    return found ? found->id : std::string{"may"};
  };
  EXPECT_EQ(problem({}), "may");
  EXPECT_EQ(problem({run_of("fail", 900.0)}), "may");
  EXPECT_EQ(problem({run_of("fail", 950.0)}), "serial_rests");
  EXPECT_EQ(problem({run_of("fail", 800.0), run_of("pass", 900.0)}), "serial_passed");
  EXPECT_EQ(problem({run_of("fail", 800.0), run_of("fail", 900.0)}), "serial_tries_used");
  EXPECT_EQ(problem({run_of("void", 800.0), run_of("fail", 900.0)}), "serial_tries_used");  // a void uses up a try
  EXPECT_EQ(problem({run_of("void", 800.0), run_of("void", 900.0)}), "serial_voided_twice");
  EXPECT_EQ(problem({run_of("void", 800.0), run_of("void", 900.0)}, true), "may");
  EXPECT_EQ(problem({run_of("fail", 700.0), run_of("fail", 800.0), run_of("void", 900.0)}, true), "serial_tries_used");
}

}  // namespace
}  // namespace probewright
