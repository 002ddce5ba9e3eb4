#include "station/sequence/line.h"

#include <algorithm>
#include <boost/asio/bind_cancellation_slot.hpp>
#include <boost/asio/co_spawn.hpp>

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
    : services_(std::move(services)) {
  for (const NestPlace& place : configuration.station.value.nests)
    places_.push_back({std::make_unique<Nest>(configuration, place, ports, services_),
                       std::make_unique<asio::cancellation_signal>()});
}

void Line::start(const asio::any_io_executor& executor, std::function<void(std::exception_ptr)> failed) {
  for (Place& place : places_) {
    ++living_;
    asio::co_spawn(executor, place.nest->live(),
                   asio::bind_cancellation_slot(place.end->slot(), [this, failed](const std::exception_ptr& error) {
                     --living_;
                     if (error && !ended_by_cancellation(error)) failed(error);
                   }));
  }
}

Nest* Line::find(int nest) {
  const auto place =
      std::find_if(places_.begin(), places_.end(), [nest](const Place& p) { return p.nest->view().nest == nest; });
  return place == places_.end() ? nullptr : place->nest.get();
}

Result<void> Line::request(const LineRequest& request) {
  return std::visit([this](const auto& kind) { return handle(kind); }, request);
}

Result<void> Line::handle(const ArmNest& request) {
  Nest* nest = find(request.nest);
  if (!nest) return Problem{"nest_not_there", "line", {{"nest", std::to_string(request.nest)}}};
  return nest->arm(request);
}

Result<void> Line::handle(const StopNest& request) {
  Nest* nest = find(request.nest);
  if (!nest) return Problem{"nest_not_there", "line", {{"nest", std::to_string(request.nest)}}};
  if (!nest->stop(request.who)) return Problem{"nest_idle", "nest " + std::to_string(request.nest)};
  return {};
}

Result<void> Line::handle(const Scan&) { return Problem{"purpose_not_possible", "line"}; }
Result<void> Line::handle(const SignOut&) { return Problem{"purpose_not_possible", "line"}; }
Result<void> Line::handle(const CloseLot&) { return Problem{"purpose_not_possible", "line"}; }

asio::awaitable<void> Line::finish(std::string who) {
  for (Place& place : places_) place.nest->stop(who);
  const auto running = [](const Place& place) { return place.nest->running(); };
  while (std::any_of(places_.begin(), places_.end(), running))
    co_await services_.clock.wait_until(services_.clock.steady_now() + finish_pause);
  for (Place& place : places_) place.end->emit(asio::cancellation_type::terminal);
  while (living_ > 0) co_await services_.clock.wait_until(services_.clock.steady_now() + finish_pause);
  co_await services_.ledger.drained();
}

std::vector<NestView> Line::views() const {
  std::vector<NestView> views;
  for (const Place& place : places_) views.push_back(place.nest->view());
  return views;
}

}  // namespace probewright::sequence
