#pragma once
#include <cstddef>
#include <memory>
#include <string>

#include "drivers/wire/line_clock.h"
#include "drivers/wire/port.h"

namespace probewright::wire {

/// Two ports whose bytes go to each other, without a device.
struct MemoryPair {
  std::unique_ptr<Port> station;  ///< the end for a driver
  std::unique_ptr<Port> device;   ///< the end for an emulated device
};

struct MemoryLine {
  /// 0: bytes are there at once. Else each direction carries so many bytes a second of the clock's time (8N1 at `baud`
  /// and `speed`: baud / 10 * speed) while the writer goes on, as it does into a UART's buffer.
  double bytes_per_s = 0.0;
  /// How many bytes stand between writer and reader before write_all waits, per direction.
  std::size_t capacity = 65536;
};

/// Makes a pair on `clock`, virtual or real, which must outlive it. What one end wrote before it closed can still be
/// read, then the other end is lost. `name` is the name of both ends.
MemoryPair make_memory_pair(const LineClock& clock, const std::string& name, MemoryLine line = {});

}  // namespace probewright::wire
