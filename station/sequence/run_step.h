#pragma once
#include <span>
#include <string>
#include <vector>

#include "station/base/times.h"

namespace probewright::sequence {

/// What a step of a run waits for: the end of another step, and perhaps some time after it (settling, warm-up).
struct Precedence {
  std::string after;
  double at_least_s = 0.0;  ///< device seconds after that step's end
  bool operator==(const Precedence&) const = default;
};

/// One step of a run on one device, as it was made, with what it had to wait for. Steps of one device follow each
/// other.
struct RunStep {
  std::string name;  ///< unique within a run
  bool on_adapter = false;
  std::vector<Precedence> after;
  SteadyTime from{}, to{};  ///< on the line's clock
};

/// The device floor of a run: the length of the longest path over its steps, in device seconds, when each device does
/// one step after another in the order of `steps`, each step keeps its precedences, and nothing else takes any time.
/// busy_s   how long each step kept its device busy, as the devices tell it, in the order of `steps`
/// A precedence that names a step which was not made is passed over. Throws std::invalid_argument when the lengths
/// differ.
double device_floor_s(std::span<const RunStep> steps, std::span<const double> busy_s);

}  // namespace probewright::sequence
