#pragma once
#include <boost/asio/awaitable.hpp>
#include <boost/asio/cancellation_signal.hpp>
#include <memory>
#include <vector>

#include "station/sequence/nest.h"

namespace probewright::sequence {

/// All nests of a station in one thread. Requests go in, events come out; nothing else. Line thread only.
class Line {
 public:
  /// `configuration` outlives the line.
  Line(const Configuration& configuration, const PortOpener& ports, LineServices services);

  /// Starts every nest on `executor`. `failed` hears of an exception that ended a nest: our own mistake.
  void start(const asio::any_io_executor& executor, std::function<void(std::exception_ptr)> failed);
  /// Problems: those of Nest::arm, nest_not_there, nest_idle (a stop of a nest that does nothing).
  Result<void> request(const LineRequest& request);
  /// Stops every run as `who`, waits until all are closed on disk, then ends the nests.
  asio::awaitable<void> finish(std::string who);
  std::vector<NestView> views() const;

 private:
  struct Place {
    std::unique_ptr<Nest> nest;
    std::unique_ptr<asio::cancellation_signal> end;
  };
  Nest* find(int nest);
  Result<void> handle(const ArmNest& request);
  Result<void> handle(const StopNest& request);
  Result<void> handle(const Scan& request);
  Result<void> handle(const SignOut& request);
  Result<void> handle(const CloseLot& request);

  LineServices services_;
  std::vector<Place> places_;
  int living_ = 0;
};

}  // namespace probewright::sequence
