#include "drivers/emulated/action_log.h"

#include <algorithm>

namespace probewright::emulated {
namespace {

bool is_work(const Action& action) { return action.what != "*OPC?" && action.what != "LID?" && action.what != "state"; }

}  // namespace

void ActionLog::done(const Action& action) {
  const std::lock_guard lock{mutex_};
  actions_[action.device].push_back(action);
}

double ActionLog::busy_s(const DeviceId& device, SteadyTime from, SteadyTime to) const {
  const std::lock_guard lock{mutex_};
  const auto found = actions_.find(device);
  if (found == actions_.end()) return 0.0;
  double sum = 0.0;
  for (const Action& action : found->second)
    if (is_work(action) && action.began >= from && action.began < to) sum += action.busy_s;
  return sum;
}

void ActionLog::forget(int nest, SteadyTime before) {
  const std::lock_guard lock{mutex_};
  for (auto& [device, actions] : actions_)
    if (device.nest == nest) std::erase_if(actions, [&](const Action& action) { return action.began < before; });
}

}  // namespace probewright::emulated
