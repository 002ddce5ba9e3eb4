#pragma once
#include <boost/asio/any_io_executor.hpp>
#include <cstdint>
#include <functional>
#include <list>
#include <map>
#include <memory>
#include <vector>

#include "drivers/emulated/device.h"
#include "drivers/emulated/flicker.h"
#include "drivers/emulated/scenario.h"
#include "drivers/emulated/station_errors.h"
#include "station/base/entropy.h"

namespace probewright::emulated {

class Bench;

/// Makes happen what scenarios say, on one bench. Whatever is left to chance is drawn from the seed, the number of the
/// fault and the device alone. Line thread only; its coroutines end when it goes.
class ScenarioPlayer {
 public:
  /// The bench must outlive it.
  ScenarioPlayer(asio::any_io_executor executor, DeviceClock clock, Bench& bench, std::uint64_t seed);
  ~ScenarioPlayer();

  /// Begins all faults of a scenario; their times count from `zero_s`. Errors: bench_no_such_nest, then nothing began.
  Result<void> play(const Scenario& scenario, double zero_s);
  /// Begins one.
  Result<void> cause(const ScenarioFault& fault, double zero_s);
  void mend();

  /// How often each fault of a nest and its devices has begun (nest 1 for the room); those of lines are counted by
  /// their lines.
  std::map<BenchFault, std::uint64_t> begun(int nest) const;

 private:
  /// One fault at one place.
  struct Act {
    ScenarioFault fault;
    DeviceId place;
    std::uint64_t seed = 0;
    double zero_s = 0.0;
    int number = 0;
  };
  /// A fault of a nest's physics that lasts.
  struct Lasting {
    int number = 0;
    ScenarioFault fault;
    int nest = 0;
    double strength = 1.0;  ///< while it comes, below 1
  };
  using Alive = std::weak_ptr<ScenarioPlayer*>;

  Result<void> known(const ScenarioFault& fault) const;
  std::vector<DeviceId> places(const ScenarioFault& fault) const;
  void begin(const ScenarioFault& fault, std::uint64_t seed, double zero_s);
  static asio::awaitable<void> act(Alive alive, DeviceClock clock, int season, Act act);
  static asio::awaitable<void> come(Alive alive, DeviceClock clock, int season, Act act);
  static asio::awaitable<void> at_random(Alive alive, DeviceClock clock, int season, Act act);
  static asio::awaitable<void> restart_later(Alive alive, DeviceClock clock, int season, DeviceId device, double at_s);
  /// The player, unless it is gone or was mended since.
  static ScenarioPlayer* still(const Alive& alive, int season);

  void start(const Act& act);
  void stop(const Act& act);
  void start_on_line(const Act& act);
  void start_share(const Act& act);
  void restart_in_capture(const Act& act);
  void set_strength(int number, double strength);
  void apply_physics(int nest);
  void apply_room();

  asio::any_io_executor executor_;
  DeviceClock clock_;
  Bench& bench_;
  std::uint64_t seed_;
  std::uint64_t caused_ = 0;
  int numbers_ = 0;
  int season_ = 0;  ///< counts mend(): what began in an older one ends
  std::list<Lasting> lasting_;
  std::map<int, std::vector<std::function<void()>>> endings_;  ///< by act: what takes its rates off the lines
  std::map<std::pair<int, BenchFault>, std::uint64_t> begun_;  ///< by nest
  std::shared_ptr<ScenarioPlayer*> self_;
};

}  // namespace probewright::emulated
