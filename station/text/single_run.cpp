#include "station/text/single_run.h"

#include <boost/asio/co_spawn.hpp>
#include <utility>

namespace probewright::text {

namespace asio = boost::asio;
using namespace sequence;

namespace {

/// How long the devices may take to be found, and a probe to be taken out, real time.
constexpr Duration find_patience = std::chrono::seconds(6), patience = std::chrono::seconds(20);
constexpr Duration look_pause = std::chrono::milliseconds(20);

std::string nest_words(int nest) { return "nest " + std::to_string(nest); }

}  // namespace

SingleRun::SingleRun(const Configuration& configuration, RunOrder order, const BenchHands* hands, Console& console,
                     RunGround ground)
    : configuration_(configuration),
      order_(std::move(order)),
      hands_(hands),
      console_(console),
      ground_(std::move(ground)) {}

Problem SingleRun::problem() const { return problem_.value_or(Problem{"test_stopped", nest_words(order_.nest)}); }

void SingleRun::make(const db::StoreOptions& ledger_options, const Software& software) {
  auto start = start_ledger(ledger_options, ground_.clock);
  if (!start) {
    problem_ = start.error();
    return;
  }
  auto zone = Zone::read(configuration_.station.value.zone);
  if (!zone) {
    problem_ = zone.error();
    return;
  }
  tell_closed_late(start->closed_late);
  LedgerWriter ledger{std::move(start->store), ground_.workers, ground_.io.get_executor()};
  Line line{configuration_, ground_.ports,
            LineServices{ground_.clock, ground_.entropy, ledger, software, *zone,
                         [this](const LineEvent& event) { hear(event); }}};
  line.start(ground_.io.get_executor(), [this](const std::exception_ptr& error) { keep(error); });
  asio::co_spawn(ground_.io, conduct(line), [this](const std::exception_ptr& error) {
    keep(error);
    done_ = true;
  });
  ground_.until([this] { return done_; });
  if (failure_) std::rethrow_exception(failure_);
}

void SingleRun::tell_closed_late(const std::vector<ClosedLate>& runs) {
  for (const ClosedLate& run : runs)
    console_.warn({"run_closed_late",
                   "entry " + std::to_string(run.run),
                   {{"serial", run.serial}, {"verdict", std::string{slug(run.verdict)}}}});
}

void SingleRun::keep(const std::exception_ptr& error) {
  if (error && !failure_) failure_ = error;
  if (error) interrupted_ = true;
}

void SingleRun::hear(const LineEvent& event) {
  std::visit([this](const auto& kind) { heard(kind); }, event);
}

void SingleRun::heard(const NestChanged& changed) {
  if (changed.view.words == shown_words_ && changed.view.stage == shown_stage_) return;
  shown_words_ = changed.view.words;
  shown_stage_ = changed.view.stage;
  if (!tell_) return;
  if (changed.view.state == NestState::running)
    say(std::to_string(changed.view.stage) + "/" + std::to_string(changed.view.stages) + " " + changed.view.doing);
  else
    say(changed.view.words);
}

void SingleRun::heard(const RunStarted& started) {
  say("run " + std::to_string(started.run) + " of " + started.serial + " is open");
}

/// What happens goes to the error stream, so that the verdict alone can be piped.
void SingleRun::say(const std::string& words) { console_.say(nest_words(order_.nest) + ": " + words); }

asio::awaitable<void> SingleRun::pause() { return ground_.clock.wait_until(ground_.clock.steady_now() + look_pause); }

/// Waits until the nest is ready and empty; false when it took too long or somebody stops. A probe that an earlier
/// start left in it is taken out by the bench's hands, where there are any.
asio::awaitable<bool> SingleRun::becomes_empty(const Line& line) {
  const auto state = [&line] { return line.views().front().state; };
  const SteadyTime start = ground_.clock.steady_now();
  bool took_out = false;
  while (state() != NestState::empty) {
    const Duration waits = state() == NestState::not_ready ? find_patience : patience;
    if (interrupted_ || ground_.clock.steady_now() >= start + waits) co_return false;
    if (hands_ && state() == NestState::occupied && !std::exchange(took_out, true))
      static_cast<void>(hands_->take_out(order_.nest));  // what stays is told as the nest's own words
    co_await pause();
  }
  co_return true;
}

asio::awaitable<void> SingleRun::conduct(Line& line) {
  tell_ = true;
  const bool ready = co_await becomes_empty(line);
  if (ready) {
    co_await test_one(line);
  } else if (!interrupted_) {
    problem_ = Problem{"nest_not_ready", nest_words(order_.nest), {{"reason", line.views().front().words}}};
  }
  co_await line.finish("the person at the terminal");
  if (hands_ && seated_) hands_->take_out(order_.nest);
}

asio::awaitable<void> SingleRun::test_one(Line& line) {
  ArmNest request;
  request.nest = order_.nest;
  request.serial = order_.serial;
  request.purpose = order_.purpose;
  request.operator_name = order_.operator_name;
  if (auto armed = line.arm(request); !armed) {
    problem_ = armed.error();
    co_return;
  }
  if (hands_) {
    const auto seated = hands_->seat(order_.nest, order_.serial);
    if (!seated) {
      problem_ = seated.error();
      co_return;
    }
    seated_ = true;
  }
  while (!ended()) co_await pause();
  if (!interrupted_ || outcome_) co_return;
  // Ctrl-C: the run is stopped by a person and closed on disk before the program goes.
  co_await line.finish("the person at the terminal");
}

}  // namespace probewright::text
