#include <gtest/gtest.h>

#include <atomic>
#include <condition_variable>
#include <filesystem>
#include <mutex>
#include <thread>

#include "db/verify.h"
#include "drivers/emulated/bench_thread.h"
#include "station/sequence/line_host.h"
#include "tests/trial/trial.h"

// The line in its own thread with its ledger thread, over real pseudo-terminals, real files and real time: what the
// thread sanitizer has to see. The bench runs thirty times as fast as a real one.
namespace probewright {
namespace {

using sequence::LineEvent;
using sequence::LineHost;

constexpr double speed = 30.0;
constexpr auto patience = std::chrono::seconds(60);

class Host : public ::testing::Test {
 protected:
  void SetUp() override {
    std::string name = (std::filesystem::temp_directory_path() / "pw-host-XXXXXX").string();
    ASSERT_NE(mkdtemp(name.data()), nullptr);
    folder = name;
    emulated::RunBenchOptions options;
    options.bench.nests = 2;
    options.bench.speed = speed;
    options.folder = (folder / "ports").string();
    bench = emulated::BenchThread::start(options).value();
  }
  void TearDown() override {
    bench.reset();
    std::filesystem::remove_all(folder);
  }

  std::unique_ptr<LineHost> start() {
    sequence::Configuration configuration = trial::demonstration();
    auto& station = configuration.station.value;
    station.speed = speed;
    station.nests.resize(1);
    station.nests.push_back({2, {"nest2-phantom", "PHC-2026-0102"}, {"nest2-adapter", "ADC-2026-0102"}});
    sequence::LineHostOptions options;
    options.ledger = (folder / "ledger.db").string();
    options.ports = (folder / "ports").string();
    options.software = {"0.0.0-test", "test", "test"};
    return LineHost::start(std::move(configuration), options,
                           {[this](const LineEvent& event) { hear(event); }, [this](auto) { ++views; },
                            [this](const std::string& what) { broken = what; }})
        .value();
  }
  void hear(const LineEvent& event) {
    const std::lock_guard lock{mutex};
    events.push_back(event);
    heard.notify_all();
  }
  /// Waits until something has been told; nothing when it never is.
  template <class Event>
  std::optional<Event> wait_for(std::function<bool(const Event&)> wanted) {
    std::unique_lock lock{mutex};
    std::optional<Event> found;
    heard.wait_for(lock, patience, [&] {
      for (const auto& event : events)
        if (const auto* one = std::get_if<Event>(&event); one && wanted(*one)) found = *one;
      return found.has_value();
    });
    return found;
  }
  bool becomes(int nest, sequence::NestState state) {
    return wait_for<sequence::NestChanged>(
               [&](const auto& changed) { return changed.view.nest == nest && changed.view.state == state; })
        .has_value();
  }
  void seat(int nest, const std::string& serial) {
    ASSERT_TRUE(bench->with_hands([&](emulated::Hands& hands) { return hands.seat(nest, serial, "AQ-20"); }));
  }

  std::filesystem::path folder;
  std::unique_ptr<emulated::BenchThread> bench;
  std::mutex mutex;
  std::condition_variable heard;
  std::vector<LineEvent> events;
  std::atomic<int> views{0};
  std::string broken;
};

TEST_F(Host, TwoNestsFromScansToVerdictsOnDisk) {
  auto host = start();
  ASSERT_TRUE(becomes(1, sequence::NestState::empty));
  ASSERT_TRUE(becomes(2, sequence::NestState::empty));
  host->request(sequence::Scan{"AQS-7Q41-IV"});
  host->request(sequence::Scan{"LOT/AQ20-W48-07/AQ-20/48/AQ20-048-00001"});
  for (int i = 1; i <= 2; ++i) {
    const std::string serial = "AQ20-048-0000" + std::to_string(i);
    host->request(sequence::Scan{serial});
    const auto armed = wait_for<sequence::Answered>(
        [&](const auto& answer) { return answer.nest == i && answer.words.find(serial) != std::string::npos; });
    ASSERT_TRUE(armed);
    seat(i, serial);
    ASSERT_TRUE(becomes(i, sequence::NestState::running));
  }
  for (int i = 1; i <= 2; ++i) {
    const auto ended = wait_for<sequence::RunEnded>([&](const auto& run) { return run.outcome.nest == i; });
    ASSERT_TRUE(ended);
    EXPECT_EQ(ended->outcome.serial, "AQ20-048-0000" + std::to_string(i));
    EXPECT_NE(ended->outcome.verdict, sequence::RunVerdict::void_run) << ended->outcome.cause_words;
  }
  host->finish("Imre Vasko");
  EXPECT_EQ(host->view()->person->name, "Imre Vasko");
  EXPECT_GT(views.load(), 3);
  EXPECT_EQ(broken, "");
  host.reset();
  EXPECT_TRUE(db::verify((folder / "ledger.db").string(), {}).value().ok());
}

TEST_F(Host, StoppingInMidRunClosesItOnDisk) {
  auto host = start();
  ASSERT_TRUE(becomes(1, sequence::NestState::empty));
  sequence::ArmNest request;
  request.serial = "AQ20-048-00001";
  request.operator_name = "Dalia Oduya";
  host->request(request);
  seat(1, "AQ20-048-00001");
  ASSERT_TRUE(becomes(1, sequence::NestState::running));
  host->finish("Dalia Oduya");
  const auto ended = wait_for<sequence::RunEnded>([](const auto&) { return true; });
  ASSERT_TRUE(ended);
  EXPECT_EQ(ended->outcome.verdict, sequence::RunVerdict::void_run);
  host.reset();
  EXPECT_TRUE(start()->closed_late().empty());
}

TEST_F(Host, TellsWhyItCannotStart) {
  auto first = start();
  sequence::LineHostOptions options;
  options.ledger = (folder / "ledger.db").string();
  const auto second = LineHost::start(trial::demonstration(), options, {});
  ASSERT_FALSE(second);
  EXPECT_EQ(second.error().id, "ledger_in_use");
}

}  // namespace
}  // namespace probewright
