#pragma once
#include <array>
#include <boost/asio/awaitable.hpp>
#include <cstdint>
#include <functional>
#include <memory>
#include <optional>
#include <span>
#include <stdexcept>
#include <string>

#include "drivers/wire/line_clock.h"
#include "drivers/wire/port.h"
#include "drivers/wire/waiters.h"
#include "station/base/result.h"

namespace probewright::wire {

/// An answer that is late, damaged, or not what was asked: the request may be tried again. Never leaves a driver.
class Miss : public std::runtime_error {
 public:
  using std::runtime_error::runtime_error;
};

/// The device is gone: unplugged, or silent after all tries. A run that meets it is void. Problem device_lost.
class DeviceLost : public ProblemError {
 public:
  DeviceLost(const std::string& device, int tries, const std::string& cause);

 protected:
  explicit DeviceLost(Problem problem) : ProblemError(std::move(problem)) {}
};

/// The device has started anew and forgotten its settings: lost for this run, whatever it answers. Problem
/// device_reset.
class DeviceReset : public DeviceLost {
 public:
  explicit DeviceReset(const std::string& device);
};

/// Opens a device's port anew each time. Throws PortLost or ProblemError when that cannot be done.
using PortSource = std::function<asio::awaitable<std::unique_ptr<Port>>()>;

/// What went wrong on one line since the driver was made, for the run's record (differences of two readings).
struct LineCounts {
  std::uint64_t misses = 0;       ///< answers late, damaged, or not what was asked
  std::uint64_t fences = 0;       ///< phantom only: times the line was drained up to an echo
  std::uint64_t asked_again = 0;  ///< requests and captures sent once more
  std::uint64_t connects = 0;     ///< times the device was found
  bool operator==(const LineCounts&) const = default;
};

struct LinkSettings {
  std::string device;                                ///< name for messages: "phantom of nest 1"
  int tries = 3;                                     ///< of each request, at least 1
  Duration margin = std::chrono::milliseconds(500);  ///< real time on top of what a request is expected to take
  double baud = 921600.0;                            ///< for the time that bytes take: 10 bits each
};

/// What both drivers share: the port and its loss, turns, deadlines, bounded tries, and finding the device again.
/// Line thread only.
class Link {
 public:
  Link(LinkSettings settings, PortSource source, LineClock& clock);

  const LinkSettings& settings() const { return settings_; }
  LineClock& clock() { return clock_; }
  LineCounts& counts() { return counts_; }
  const LineCounts& counts() const { return counts_; }

  /// The turn to use the device; hold it over a whole exchange.
  asio::awaitable<Turn::Held> turn() { return turn_.take(); }

  /// Whether the device was found, checked, and not lost since.
  bool ready() const { return ready_; }
  /// Throws DeviceLost unless ready().
  void require_ready() const;

  /// Opens the port (dropping an older one). Throws DeviceLost or what the source throws as ProblemError.
  asio::awaitable<void> open();
  /// From now on ready().
  void found();
  /// Closes the port and wakes keep(). Harmless when there is none.
  void drop();
  /// Drops the link on the way out of connecting unless found() was called.
  class Opening {
   public:
    explicit Opening(Link& link) : link_(link) {}
    ~Opening() {
      if (!link_.ready()) link_.drop();
    }
    Opening(const Opening&) = delete;
    Opening& operator=(const Opening&) = delete;

   private:
    Link& link_;
  };

  /// When an answer must be there: `busy` of the device and `bytes` both ways at the baud rate, over the speed, and the
  /// margin.
  SteadyTime deadline(Duration busy, std::size_t bytes) const;
  Duration transfer_time(std::size_t bytes) const;

  asio::awaitable<void> send(std::span<const std::byte> bytes, SteadyTime deadline);
  /// Bytes as they come, at least one. The span lives until the next call.
  asio::awaitable<std::span<const std::byte>> receive(SteadyTime deadline);

  /// Runs `attempt` until it does not throw Miss or DeadlinePassed, at most settings().tries times; then, or when the
  /// port is gone, drops the link and throws DeviceLost. `attempt` must stay alive: it is kept here. Every other
  /// exception passes.
  template <class T>
  asio::awaitable<T> tried(std::function<asio::awaitable<T>()> attempt) {
    std::string cause;
    for (int n = 1; n <= settings_.tries; ++n) {
      if (n > 1) ++counts_.asked_again;
      try {
        co_return co_await attempt();
      } catch (const Miss& miss) {
        cause = miss.what();
      } catch (const DeadlinePassed&) {
        cause = "no answer in time";
      } catch (const PortLost& lost) {
        lose(n, lost.what());
      } catch (const DeviceLost& lost) {
        trouble_ = lost.problem();
        drop();
        throw;
      }
      ++counts_.misses;
    }
    lose(settings_.tries, cause);
  }

  /// Keeps the device found: whenever it is not ready, calls `connect` with a pause before each try that grows from
  /// 0.1 s to 5 s of real time. Never returns; ends by cancellation with operation_aborted.
  asio::awaitable<void> keep(std::function<asio::awaitable<void>()> connect);
  /// Why the last try to find the device failed; nothing once it was found.
  const std::optional<Problem>& trouble() const { return trouble_; }
  void note_trouble(Problem problem) { trouble_ = std::move(problem); }

 private:
  [[noreturn]] void lose(int tries, const std::string& cause);

  LinkSettings settings_;
  PortSource source_;
  LineClock& clock_;
  LineCounts counts_;
  Turn turn_;
  Waiters lost_;
  std::unique_ptr<Port> port_;
  bool ready_ = false;
  std::optional<Problem> trouble_;
  std::array<std::byte, 4096> incoming_{};
};

}  // namespace probewright::wire
