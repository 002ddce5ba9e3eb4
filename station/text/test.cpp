#include "station/text/test.h"

#include <boost/asio/co_spawn.hpp>
#include <boost/asio/io_context.hpp>
#include <boost/asio/signal_set.hpp>
#include <csignal>
#include <utility>

#include "drivers/wire/asio_clock.h"
#include "drivers/wire/serial_source.h"
#include "drivers/wire/thread_workers.h"
#include "station/base/numbers.h"
#include "station/sequence/ledger_start.h"
#include "station/sequence/line.h"
#include "station/text/run_text.h"
#include "station/text/station_choice.h"

namespace probewright::text {
namespace {

namespace asio = boost::asio;
using namespace sequence;

/// How long the devices may take to be found, and a probe to be taken out, real time.
constexpr Duration find_patience = std::chrono::seconds(6), patience = std::chrono::seconds(20);
constexpr Duration look_pause = std::chrono::milliseconds(20);

/// One run in one nest, from the scan to the verdict on disk. Everything it needs stands in the order in which it
/// may go: the context last.
class TestRun {
 public:
  TestRun(const TestOptions& options, const BenchHands* hands, Configuration configuration, Purpose purpose,
          Console& console)
      : options_(options),
        hands_(hands),
        configuration_(std::move(configuration)),
        purpose_(purpose),
        console_(console),
        clock_(io_.get_executor(), configuration_.station.value.speed) {}

  int run() {
    const Software software{options_.build.version, options_.build.commit, options_.build.compiler};
    const StationFile& station = configuration_.station.value;
    const std::string path = options_.ledger.empty() ? ledger_path(station) : options_.ledger;
    auto start = start_ledger(ledger_options(station, path, software), clock_);
    if (!start) return console_.refuse(start.error());
    auto zone = Zone::read(station.zone);
    if (!zone) return console_.refuse(zone.error());
    tell_closed_late(start->closed_late);

    wire::ThreadWorkers ledger_thread;
    LedgerWriter ledger{std::move(start->store), ledger_thread, io_.get_executor()};
    Line line{configuration_,
              [this](const DevicePlace& place, int, DeviceKind) {
                const StationFile& file = configuration_.station.value;
                return wire::serial_source(io_.get_executor(), clock_, port_path(file, place, options_.ports),
                                           file.baud);
              },
              LineServices{clock_, entropy_, ledger, software, *zone, [this](const LineEvent& event) { hear(event); }}};
    asio::signal_set stop{io_, SIGINT, SIGTERM};
    stop.async_wait([this](const boost::system::error_code& error, int) {
      if (!error) interrupted_ = true;
    });
    line.start(io_.get_executor(), [this](const std::exception_ptr& error) { keep(error); });
    asio::co_spawn(io_, conduct(line), [&](const std::exception_ptr& error) {
      keep(error);
      stop.cancel();
      io_.stop();
    });
    io_.run();
    if (failure_) std::rethrow_exception(failure_);
    return status();
  }

 private:
  void tell_closed_late(const std::vector<ClosedLate>& runs) {
    for (const ClosedLate& run : runs)
      console_.warn({"run_closed_late",
                     "entry " + std::to_string(run.run),
                     {{"serial", run.serial}, {"verdict", std::string{slug(run.verdict)}}}});
  }

  void keep(const std::exception_ptr& error) {
    if (error && !failure_) failure_ = error;
    if (error) interrupted_ = true;
  }

  bool ended() const { return outcome_ || problem_ || interrupted_; }

  void hear(const LineEvent& event) {
    std::visit([this](const auto& kind) { heard(kind); }, event);
  }
  void heard(const NestChanged& changed) {
    if (changed.view.words == shown_words_ && changed.view.stage == shown_stage_) return;
    shown_words_ = changed.view.words;
    shown_stage_ = changed.view.stage;
    if (!tell_) return;
    if (changed.view.state == NestState::running)
      say(std::to_string(changed.view.stage) + "/" + std::to_string(changed.view.stages) + " " + changed.view.doing);
    else
      say(changed.view.words);
  }
  void heard(const RunStarted& started) {
    say("run " + std::to_string(started.run) + " of " + started.serial + " is open");
  }
  void heard(const RunEnded& ended) { outcome_ = ended.outcome; }
  void heard(const RunNotRecorded& lost) { problem_ = lost.problem; }
  void heard(const ArmingEnded& ended) { problem_ = ended.problem; }
  void heard(const Answered&) {}
  void heard(const PersonChanged&) {}
  void heard(const LotChanged&) {}

  /// What happens goes to the error stream, so that the verdict alone can be piped.
  void say(const std::string& words) { console_.say("nest " + std::to_string(options_.nest) + ": " + words); }

  NestState state(const Line& line) const { return line.views().front().state; }

  /// Waits until the nest is ready and empty; false when it took too long or somebody stops. A probe that an earlier
  /// start left in it is taken out by the bench's hands, where there are any.
  asio::awaitable<bool> becomes_empty(const Line& line) {
    const SteadyTime start = clock_.steady_now();
    bool took_out = false;
    while (state(line) != NestState::empty) {
      const Duration waits = state(line) == NestState::not_ready ? find_patience : patience;
      if (interrupted_ || clock_.steady_now() >= start + waits) co_return false;
      if (hands_ && state(line) == NestState::occupied && !std::exchange(took_out, true))
        static_cast<void>(hands_->take_out(options_.nest));  // what stays is told as the nest's own words
      co_await clock_.wait_until(clock_.steady_now() + look_pause);
    }
    co_return true;
  }

  asio::awaitable<void> conduct(Line& line) {
    tell_ = true;
    const bool ready = co_await becomes_empty(line);
    if (ready) {
      co_await test_one(line);
    } else if (!interrupted_) {
      problem_ =
          Problem{"nest_not_ready", "nest " + std::to_string(options_.nest), {{"reason", line.views().front().words}}};
    }
    co_await line.finish("the person at the terminal");
    if (hands_ && seated_) hands_->take_out(options_.nest);
  }

  asio::awaitable<void> test_one(Line& line) {
    ArmNest request;
    request.nest = options_.nest;
    request.serial = options_.serial;
    request.purpose = purpose_;
    request.operator_name = options_.operator_name;
    if (auto armed = line.arm(request); !armed) {
      problem_ = armed.error();
      co_return;
    }
    if (hands_) {
      const auto seated = hands_->seat(options_.nest, options_.serial);
      if (!seated) {
        problem_ = seated.error();
        co_return;
      }
      seated_ = true;
    }
    while (!ended()) co_await clock_.wait_until(clock_.steady_now() + look_pause);
    if (!interrupted_ || outcome_) co_return;
    // Ctrl-C: the run is stopped by a person and closed on disk before the program goes.
    co_await line.finish("the person at the terminal");
  }

  int status() {
    if (outcome_) {
      if (console_.json())
        console_.print_json(run_json(*outcome_));
      else
        console_.print_text(run_text(*outcome_));
      return outcome_->verdict == RunVerdict::pass ? done : answer_is_no;
    }
    if (problem_) return console_.refuse(*problem_);
    return console_.refuse(Problem{"test_stopped", "nest " + std::to_string(options_.nest)});
  }

  const TestOptions& options_;
  const BenchHands* hands_;
  asio::io_context io_{1};
  Configuration configuration_;
  Purpose purpose_;
  Console& console_;
  wire::AsioClock clock_;
  SystemEntropy entropy_;
  bool tell_ = false, seated_ = false, interrupted_ = false;
  std::string shown_words_;
  int shown_stage_ = 0;
  std::optional<RunOutcome> outcome_;
  std::optional<Problem> problem_;
  std::exception_ptr failure_;
};

}  // namespace

int test(const TestOptions& options, const BenchHands* hands, Console& console) {
  const auto purpose = find_purpose(options.purpose);
  if (!purpose) return console.refuse(Problem{"purpose_unknown", "--purpose", {{"purpose", options.purpose}}});
  auto configuration = chosen_configuration(options.choice, options.speed);
  if (!configuration) return console.refuse(configuration.error());
  auto& nests = configuration->station.value.nests;
  std::erase_if(nests, [&](const NestPlace& place) { return place.nest != options.nest; });
  if (nests.empty())
    return console.refuse(
        Problem{"nest_not_there", configuration->station.document.file, {{"nest", std::to_string(options.nest)}}});
  // A real probe is put in by a person, whatever bench may also be running on this machine.
  if (!configuration->station.value.emulated) hands = nullptr;
  return TestRun{options, hands, std::move(*configuration), *purpose, console}.run();
}

}  // namespace probewright::text
