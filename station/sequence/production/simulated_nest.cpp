#include "station/sequence/production/simulated_nest.h"

#include <boost/asio/co_spawn.hpp>
#include <optional>
#include <stdexcept>
#include <utility>

#include "station/measure/evaluate.h"
#include "station/sequence/device_settings.h"
#include "station/sequence/routine.h"

namespace probewright::sequence::production {
namespace {

using emulated::DeviceKind;

/// Captures of one run, kept as long as the run; nothing is computed until it is over.
class CapturesOnly final : public CaptureBook {
 public:
  void add(measure::AnyCapture capture) override { stage_.push_back(std::move(capture)); }
  void note(RunStep) override {}
  void stage_done() override {
    for (measure::AnyCapture& capture : std::exchange(stage_, {}))
      if (auto taken = measure::add_capture(captures_, std::move(capture)); !taken) throw ProblemError(taken.error());
  }
  const measure::Captures& captures() const { return captures_; }

 private:
  std::vector<measure::AnyCapture> stage_;
  measure::Captures captures_;
};

emulated::BenchOptions bench_of(const SimulatedPlace& place) {
  emulated::BenchOptions options;
  options.seed = place.seed;
  options.errors = place.errors;
  options.ambient_degC = place.room_degC;
  return options;
}

/// A station of one nest, as its drivers are told of it.
StationFile station_of(const emulated::BenchOptions& options) {
  StationFile station;
  station.emulated = true;
  station.speed = options.speed;
  station.baud = static_cast<unsigned>(options.baud);
  return station;
}

}  // namespace

SimulatedNest::SimulatedNest(const SimulatedPlace& place)
    : place_(place),
      io_(1),
      clock_(UtcTime{}),
      entropy_(derived_seed(place.seed, 1)),
      bench_(io_.get_executor(), clock_, bench_of(place)),
      phantom_(phantom_settings(place.certificates.phantom, station_of(bench_.options()), 1),
               bench_.source({1, DeviceKind::phantom}), clock_, entropy_),
      adapter_(adapter_settings(place.certificates.adapter, station_of(bench_.options()), 1),
               bench_.source({1, DeviceKind::adapter}), clock_, entropy_) {}

void SimulatedNest::complete(asio::awaitable<void> work) {
  std::optional<std::exception_ptr> end;
  asio::co_spawn(io_, std::move(work), [&end](std::exception_ptr error) { end = std::move(error); });
  clock_.run_until(io_, [&end] { return end.has_value(); });
  if (!end) throw std::logic_error("a simulated run waits for nothing");
  if (*end) std::rethrow_exception(*end);
}

asio::awaitable<void> SimulatedNest::connect() {
  co_await phantom_.connect();
  co_await adapter_.connect();
}

asio::awaitable<void> SimulatedNest::gather(CaptureBook& book) {
  co_await prepare_adapter(adapter_, place_.model);
  const phantom::NestState nest = co_await phantom_.nest_state();
  const adapter::Presence plug = co_await adapter_.presence();
  Routine routine{{phantom_, adapter_},
                  place_.model,
                  place_.certificates.phantom,
                  {nest.probe.insertions, plug.insertions},
                  clock_,
                  book,
                  [](std::string_view, int, int) {}};
  co_await routine.gather();
}

/// LEDs off however the run ended, and the phantom as it was before.
asio::awaitable<void> SimulatedNest::make_run(CaptureBook& book) {
  co_await connect();
  std::exception_ptr error;
  try {
    co_await gather(book);
  } catch (...) {
    error = std::current_exception();
  }
  co_await adapter_.drive_off();
  if (!error) co_return;
  if (phantom_.connected()) co_await phantom_.reset();
  std::rethrow_exception(error);
}

Result<std::vector<measure::Reading>> SimulatedNest::test(const emulated::Probe& probe) {
  if (auto seated = bench_.seat(1, probe); !seated) return seated.error();
  CapturesOnly book;
  std::optional<Problem> problem;
  try {
    complete(make_run(book));
  } catch (const ProblemError& error) {
    problem = error.problem();
  } catch (const std::exception& error) {
    problem = Problem{"our_bug", "simulated nest", {{"what", error.what()}}};
  }
  if (auto removed = bench_.remove(1); !removed) return removed.error();
  if (problem) return *problem;
  return measure::evaluate(place_.model, place_.certificates, book.captures());
}

void SimulatedNest::rest(double time_s) { complete(clock_.wait_until(clock_.steady_now() + from_seconds(time_s))); }

}  // namespace probewright::sequence::production
