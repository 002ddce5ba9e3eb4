#pragma once
#include <boost/asio/any_io_executor.hpp>
#include <boost/asio/awaitable.hpp>
#include <boost/asio/cancellation_signal.hpp>
#include <deque>
#include <memory>
#include <optional>
#include <vector>

#include "station/sequence/floor.h"
#include "station/sequence/nest.h"

namespace probewright::sequence {

/// All nests of a station in one thread. Requests go in, events and views come out; nothing else. Line thread only.
class Line {
 public:
  /// `configuration` outlives the line.
  Line(const Configuration& configuration, const PortOpener& ports, LineServices services);

  /// Starts every nest on `executor`. `failed` hears of an exception that ended a nest: our own mistake.
  void start(const asio::any_io_executor& executor, std::function<void(std::exception_ptr)> failed);

  /// Asks for what a person wants. Requests are served one after the other; each ends in one Answered event.
  void request(LineRequest request);
  /// Arms a nest at once, for whoever runs a single probe. Problems: those of Nest::arm, nest_not_there,
  /// purpose_not_possible (production: only a scan in an open lot arms for it).
  Result<void> arm(const ArmNest& request);
  /// Takes an arming back or stops a run. Problems: nest_not_there, nest_idle.
  Result<void> stop(const StopNest& request);

  /// Stops every run as `who`, waits until all are closed on disk, then ends the nests.
  asio::awaitable<void> finish(std::string who);
  std::vector<NestView> views() const;
  LineView view() const;

 private:
  struct Place {
    std::unique_ptr<Nest> nest;
    std::unique_ptr<asio::cancellation_signal> end;
  };
  using Said = Result<std::string>;  ///< what was done, one sentence

  Nest* find(int nest) const;
  void spawn(asio::awaitable<void> work, asio::cancellation_signal& end);
  void hear(const LineEvent& event);

  void begin_serving();
  asio::awaitable<void> take_up_the_floor();
  asio::awaitable<void> serve();
  asio::awaitable<void> answer(LineRequest request);
  asio::awaitable<Said> handle(ArmNest request);
  asio::awaitable<Said> handle(StopNest request);
  asio::awaitable<Said> handle(Scan scan);
  asio::awaitable<Said> handle(SignOut);
  asio::awaitable<Said> handle(CloseLot);
  asio::awaitable<Said> scanned(Person person);
  asio::awaitable<Said> scanned(LotCard card);
  asio::awaitable<Said> scanned(NestChoice choice);
  asio::awaitable<Said> scanned(SerialScan scan);
  Result<Nest*> nest_for(const std::string& serial);
  void stop_all(const std::string& who);
  void stray(int nest);

  asio::awaitable<void> publish();

  const Configuration& configuration_;
  LineServices services_;
  std::function<void(const LineEvent&)> tell_;
  Floor floor_;
  std::vector<Place> places_;
  asio::any_io_executor executor_;
  std::function<void(std::exception_ptr)> failed_;
  asio::cancellation_signal end_publishing_;
  int living_ = 0;

  std::deque<LineRequest> asked_;
  bool serving_ = false;
  bool recovered_ = false;
  std::optional<int> chosen_nest_;  ///< by "nest 3", for the next serial
  int armed_nest_ = 0;              ///< by the request that is served now
  ScanView scan_;

  bool changed_ = true;  ///< since the last view
  std::uint64_t revision_ = 0;
};

}  // namespace probewright::sequence
