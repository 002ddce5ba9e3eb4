#include "tests/trial/trial.h"

#include <boost/asio/co_spawn.hpp>
#include <filesystem>
#include <stdexcept>

namespace probewright::trial {
namespace {

using namespace sequence;

/// Virtual time after which a run that has not ended counts as hung: far more than all deadlines of a run together.
constexpr Duration patience = std::chrono::minutes(10);

}  // namespace

const Configuration& demonstration() {
  static const Configuration configuration = [] {
    auto read = read_configuration(std::filesystem::path{PW_SOURCE_DIR} / "configs", "Quay-1");
    if (!read) {
      std::string all;
      for (const Problem& problem : read.error()) all += problem.text() + "\n";
      throw std::runtime_error(all);
    }
    return std::move(*read);
  }();
  return configuration;
}

Trial::Trial(Options options)
    : options_(std::move(options)),
      io_(1),
      clock_(options_.start, options_.bench.speed),
      entropy_(derived_seed(options_.seed, 1)) {
  const Configuration& configuration = options_.configuration ? *options_.configuration : demonstration();
  options_.bench.seed = options_.seed;
  const Software software{"0.0.0-trial", "trial", "trial"};
  db::StoreOptions store = ledger_options(configuration.station.value, options_.store.path, software);
  store.vfs = options_.store.vfs;
  store.exclusive = options_.store.exclusive;
  store.lease = options_.store.vfs.empty();
  auto start = start_ledger(store, clock_);
  if (!start) {
    start_problem_ = start.error();
    return;
  }
  store_ = start->store.get();
  closed_late_ = start->closed_late;
  workers_.emplace(clock_, derived_seed(options_.seed, 2));
  bench_ = std::make_unique<emulated::Bench>(io_.get_executor(), clock_, options_.bench, options_.observer);
  bench_->play(options_.scenario).value();
  ledger_ = std::make_unique<LedgerWriter>(std::move(start->store), *workers_, io_.get_executor());
  PortOpener ports = [this](const DevicePlace&, int nest, DeviceKind kind) {
    return bench_->source(
        {nest, kind == DeviceKind::phantom ? emulated::DeviceKind::phantom : emulated::DeviceKind::adapter});
  };
  if (options_.between) ports = options_.between(std::move(ports));
  LineServices services{clock_, entropy_, *ledger_, software, Zone{}, [this](const LineEvent& e) { hear(e); }};
  line_ = std::make_unique<Line>(configuration, ports, std::move(services));
  line_->start(io_.get_executor(), [this](const std::exception_ptr& error) {
    try {
      std::rethrow_exception(error);
    } catch (const std::exception& known) {
      broken_ = known.what();
    }
  });
}

/// Coroutines that still wait die with the context: first what they use must still be there.
Trial::~Trial() = default;

void Trial::hear(const LineEvent& event) {
  if (on_event) on_event(event);
  events_.push_back(event);
}

bool Trial::reaches(NestState state) {
  const auto limit = clock_.steady_now() + patience;
  const auto ended = clock_.run_until(
      io_, [&] { return broken_ || line_->views().front().state == state; }, limit);
  if (broken_) throw std::runtime_error("a nest ended: " + *broken_);
  return ended == wire::VirtualClock::Ended::reached;
}

void Trial::let_pass(Duration time) {
  bool passed = false;
  boost::asio::co_spawn(io_, clock_.wait_until(clock_.steady_now() + time),
                        [&passed](const std::exception_ptr&) { passed = true; });
  clock_.run_until(io_, [&] { return passed; });
}

Told Trial::test(const std::string& serial, std::optional<emulated::PlantedFault> fault) {
  Told told;
  if (!reaches(NestState::empty)) {
    told.hung = true;
    return told;
  }
  ArmNest request;
  request.serial = serial;
  request.purpose = options_.purpose;
  request.operator_name = "Imre Vasko";
  if (auto armed = line_->arm(request); !armed) {
    told.problem = armed.error();
    return told;
  }
  const std::string_view model = *emulated::model_of_serial(serial);
  (fault ? bench_->seat(1, serial, model, *fault) : bench_->seat(1, serial, model)).value();
  const std::size_t first = events_.size();
  const auto end_of = [&]() -> const LineEvent* {
    for (std::size_t i = first; i < events_.size(); ++i)
      if (!std::holds_alternative<NestChanged>(events_[i]) && !std::holds_alternative<RunStarted>(events_[i]))
        return &events_[i];
    return nullptr;
  };
  const auto ended = clock_.run_until(
      io_, [&] { return broken_ || end_of(); }, clock_.steady_now() + patience);
  if (broken_) throw std::runtime_error("a nest ended: " + *broken_);
  told.hung = ended != wire::VirtualClock::Ended::reached;
  if (const LineEvent* end = end_of()) {
    if (const auto* run = std::get_if<RunEnded>(end)) told.outcome = run->outcome;
    if (const auto* lost = std::get_if<RunNotRecorded>(end)) told.problem = lost->problem;
    if (const auto* arming = std::get_if<ArmingEnded>(end)) told.problem = arming->problem;
    told.recorded_trouble = std::holds_alternative<RunNotRecorded>(*end);
  }
  static_cast<void>(bench_->remove(1));  // it may have been taken out by the trial already
  return told;
}

bool Trial::finish() {
  boost::asio::co_spawn(io_, line_->finish("the trial"), [this](const std::exception_ptr& error) {
    finished_ = true;
    try {
      if (error) std::rethrow_exception(error);
    } catch (const std::exception& known) {
      broken_ = known.what();
    }
  });
  clock_.run_until(
      io_, [&] { return finished_; }, clock_.steady_now() + patience);
  if (broken_) throw std::runtime_error("the line did not finish: " + *broken_);
  return finished_;
}

}  // namespace probewright::trial
