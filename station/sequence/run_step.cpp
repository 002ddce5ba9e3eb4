#include "station/sequence/run_step.h"

#include <algorithm>
#include <map>
#include <stdexcept>

namespace probewright::sequence {

double device_floor_s(std::span<const RunStep> steps, std::span<const double> busy_s) {
  if (steps.size() != busy_s.size()) throw std::invalid_argument("a busy time for each step");
  std::map<std::string, double, std::less<>> ended;
  double phantom_free_s = 0.0, adapter_free_s = 0.0;
  for (std::size_t i = 0; i < steps.size(); ++i) {
    double& free_s = steps[i].on_adapter ? adapter_free_s : phantom_free_s;
    double begin_s = free_s;
    for (const Precedence& precedence : steps[i].after)
      if (const auto found = ended.find(precedence.after); found != ended.end())
        begin_s = std::max(begin_s, found->second + precedence.at_least_s);
    free_s = begin_s + busy_s[i];
    ended[steps[i].name] = free_s;
  }
  return std::max(phantom_free_s, adapter_free_s);
}

}  // namespace probewright::sequence
