#pragma once
#include <boost/asio/io_context.hpp>
#include <exception>
#include <functional>
#include <optional>
#include <string>

#include "db/store.h"
#include "drivers/wire/line_clock.h"
#include "drivers/wire/workers.h"
#include "station/base/entropy.h"
#include "station/sequence/configuration.h"
#include "station/sequence/ledger_start.h"
#include "station/sequence/line.h"
#include "station/text/console.h"
#include "station/text/test.h"

namespace probewright::text {

/// What a single run stands on: real devices, real devices that are recorded, or a recording. All of it outlives the
/// run.
struct RunGround {
  boost::asio::io_context& io;
  wire::LineClock& clock;
  Entropy& entropy;
  wire::Workers& workers;
  sequence::PortOpener ports;
  /// Lets everything go on until what it is handed holds.
  std::function<void(const std::function<bool()>&)> until;
};

/// Which probe in which nest.
struct RunOrder {
  std::string serial;
  int nest = 1;
  sequence::Purpose purpose = sequence::Purpose::engineering;
  std::string operator_name;
};

/// One run of one probe in one nest, from the scan to the verdict on disk.
class SingleRun {
 public:
  /// `configuration` holds the order's nest alone. `hands` may be null: a person puts the probe in. What happens
  /// meanwhile is said on the console. All references outlive it.
  SingleRun(const sequence::Configuration& configuration, RunOrder order, const BenchHands* hands, Console& console,
            RunGround ground);
  /// Once. Rethrows what broke the line. Afterwards outcome() or problem() says how it went.
  void make(const db::StoreOptions& ledger, const sequence::Software& software);
  /// A person wants it to end: the run is stopped and closed on disk. Line thread only.
  void interrupt() { interrupted_ = true; }

  const std::optional<sequence::RunOutcome>& outcome() const { return outcome_; }
  /// Why there is no outcome.
  Problem problem() const;

 private:
  using Line = sequence::Line;
  void tell_closed_late(const std::vector<sequence::ClosedLate>& runs);
  void keep(const std::exception_ptr& error);
  bool ended() const { return outcome_ || problem_ || interrupted_; }
  void hear(const sequence::LineEvent& event);
  void heard(const sequence::NestChanged& changed);
  void heard(const sequence::RunStarted& started);
  void heard(const sequence::RunEnded& ended) { outcome_ = ended.outcome; }
  void heard(const sequence::RunNotRecorded& lost) { problem_ = lost.problem; }
  void heard(const sequence::ArmingEnded& ended) { problem_ = ended.problem; }
  template <class Other>
  void heard(const Other&) {}
  void say(const std::string& words);
  boost::asio::awaitable<void> pause();
  boost::asio::awaitable<bool> becomes_empty(const Line& line);
  boost::asio::awaitable<void> conduct(Line& line);
  boost::asio::awaitable<void> test_one(Line& line);

  const sequence::Configuration& configuration_;
  RunOrder order_;
  const BenchHands* hands_;
  Console& console_;
  RunGround ground_;
  bool tell_ = false, seated_ = false, interrupted_ = false, done_ = false;
  std::string shown_words_;
  int shown_stage_ = 0;
  std::optional<sequence::RunOutcome> outcome_;
  std::optional<Problem> problem_;
  std::exception_ptr failure_;
};

}  // namespace probewright::text
