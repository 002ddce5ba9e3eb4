#pragma once
#include <map>
#include <mutex>
#include <vector>

#include "drivers/emulated/device.h"

namespace probewright::emulated {

/// Keeps what the devices of a bench tell of their work, so that a run's device floor can be found: how long each step
/// of it kept its device busy. Any thread.
class ActionLog final : public ActionObserver {
 public:
  void done(const Action& action) override;

  /// Busy time in device seconds of all that `device` began from `from` up to `to`, both on the line's clock. Left out:
  /// waiting for the optics to settle (the precedences of a run say how long that takes), and the watches over lid and
  /// drive, which only fill idle time.
  double busy_s(const DeviceId& device, SteadyTime from, SteadyTime to) const;
  /// Forgets what a nest's devices did before that moment.
  void forget(int nest, SteadyTime before);

 private:
  mutable std::mutex mutex_;
  std::map<DeviceId, std::vector<Action>> actions_;  ///< guarded by the mutex; by the end of each
};

}  // namespace probewright::emulated
