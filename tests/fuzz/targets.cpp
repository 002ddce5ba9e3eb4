#include "tests/fuzz/targets.h"

#include <array>

namespace probewright::fuzz {

std::span<const Target> all_targets() {
  static constexpr std::array targets{
      Target{"frames", frames},
      Target{"cobs", cobs},
      Target{"lines", lines},
      Target{"messages", messages},
      Target{"blocks", blocks},
      Target{"answers", answers},
      Target{"recordings", recordings},
      Target{"control", control},
      Target{"station_file", station_file},
      Target{"people", people},
      Target{"model", model},
      Target{"sheet", sheet},
      Target{"phantom_certificate", phantom_certificate},
      Target{"adapter_certificate", adapter_certificate},
      Target{"diagnosis", diagnosis},
      Target{"scenario", scenario},
      Target{"csv", csv},
      Target{"bodies", bodies},
      Target{"captures", captures},
      Target{"quantities", quantities},
      Target{"times", times},
      Target{"scans", scans},
  };
  return targets;
}

}  // namespace probewright::fuzz
