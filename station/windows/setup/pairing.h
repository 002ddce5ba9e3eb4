#pragma once
#include <vector>

#include "station/sequence/find_devices.h"

namespace probewright::windows {

/// A found device and the nest that it is meant for.
struct Placed {
  sequence::FoundDevice device;
  int nest = 0;  ///< 0: none
};

/// The nest for a device that has just been found: the lowest that lacks its kind. Devices that cannot be used get
/// none.
int free_nest(const std::vector<Placed>& placed, const sequence::FoundDevice& device);
/// The nests as a station file has them. Problems: setup_no_device, setup_nest_incomplete.
Result<std::vector<sequence::NestPlace>> nests_of(const std::vector<Placed>& placed);

}  // namespace probewright::windows
