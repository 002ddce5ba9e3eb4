#include "station/sequence/line.h"

#include <algorithm>
#include <boost/asio/bind_cancellation_slot.hpp>
#include <boost/asio/co_spawn.hpp>
#include <boost/asio/use_awaitable.hpp>

#include "station/sequence/device_settings.h"

namespace probewright::sequence {
namespace {

/// Between two looks whether runs have ended, while the line finishes.
constexpr Duration finish_pause = std::chrono::milliseconds(5);

bool ended_by_cancellation(const std::exception_ptr& error) {
  try {
    std::rethrow_exception(error);
  } catch (const boost::system::system_error& system) {
    return system.code() == asio::error::operation_aborted;
  } catch (...) {
    return false;
  }
}

}  // namespace

Line::Line(const Configuration& configuration, const PortOpener& ports, LineServices services)
    : configuration_(configuration),
      services_(std::move(services)),
      tell_(std::move(services_.tell)),
      floor_(configuration, services_) {
  services_.tell = [this](const LineEvent& event) { hear(event); };
  for (const NestPlace& place : configuration.station.value.nests) {
    places_.push_back({std::make_unique<Nest>(configuration, place, ports, services_),
                       std::make_unique<asio::cancellation_signal>()});
    places_.back().nest->on_stray([this](int nest) { stray(nest); });
  }
}

void Line::hear(const LineEvent& event) {
  changed_ = true;
  if (const auto* ended = std::get_if<RunEnded>(&event)) floor_.note(ended->outcome);
  tell_(event);
}

void Line::spawn(asio::awaitable<void> work, asio::cancellation_signal& end) {
  ++living_;
  asio::co_spawn(executor_, std::move(work),
                 asio::bind_cancellation_slot(end.slot(), [this](const std::exception_ptr& error) {
                   --living_;
                   if (error && !ended_by_cancellation(error)) failed_(error);
                 }));
}

void Line::start(const asio::any_io_executor& executor, std::function<void(std::exception_ptr)> failed) {
  executor_ = executor;
  failed_ = std::move(failed);
  for (Place& place : places_) spawn(place.nest->live(), *place.end);
  begin_serving();  // takes up what was open when the line last ended
  if (services_.show) spawn(publish(), end_publishing_);
}

Nest* Line::find(int nest) const {
  const auto place =
      std::find_if(places_.begin(), places_.end(), [nest](const Place& p) { return p.nest->view().nest == nest; });
  return place == places_.end() ? nullptr : place->nest.get();
}

Result<void> Line::arm(const ArmNest& request) {
  Nest* nest = find(request.nest);
  if (!nest) return Problem{"nest_not_there", "line", {{"nest", std::to_string(request.nest)}}};
  if (request.purpose == Purpose::production) return Problem{"purpose_not_possible", nest_name(request.nest)};
  return nest->arm(request);
}

Result<void> Line::stop(const StopNest& request) {
  Nest* nest = find(request.nest);
  if (!nest) return Problem{"nest_not_there", "line", {{"nest", std::to_string(request.nest)}}};
  if (!nest->stop(request.who)) return Problem{"nest_idle", nest_name(request.nest)};
  return {};
}

void Line::stop_all(const std::string& who) {
  for (Place& place : places_) place.nest->stop(who);
}

/// A probe appeared where nothing is armed: if one nest waits for one, it went to the wrong place.
void Line::stray(int nest) {
  Nest* waiting = nullptr;
  for (Place& place : places_) {
    if (place.nest->view().state != NestState::armed) continue;
    if (waiting) return;  // two wait: nobody can say whose it is, and this nest asks to take it out anyway
    waiting = place.nest.get();
  }
  if (waiting) waiting->probe_went_to(nest);
}

asio::awaitable<void> Line::finish(std::string who) {
  const auto running = [](const Place& place) { return place.nest->running(); };
  stop_all(who);
  while (serving_ || std::any_of(places_.begin(), places_.end(), running)) {
    co_await services_.clock.wait_until(services_.clock.steady_now() + finish_pause);
    stop_all(who);
  }
  for (Place& place : places_) place.end->emit(asio::cancellation_type::terminal);
  end_publishing_.emit(asio::cancellation_type::terminal);
  while (living_ > 0) co_await services_.clock.wait_until(services_.clock.steady_now() + finish_pause);
  co_await services_.ledger.drained();
}

std::vector<NestView> Line::views() const {
  std::vector<NestView> views;
  for (const Place& place : places_) views.push_back(place.nest->view());
  return views;
}

}  // namespace probewright::sequence
