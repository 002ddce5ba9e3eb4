#pragma once
#include <string>
#include <vector>

#include "station/sequence/find_devices.h"

namespace probewright::windows {

/// Where the set-up page looks and what it keeps. The program fills it in.
class SetupDoor {
 public:
  virtual ~SetupDoor() = default;
  /// Ports of this machine. Main thread; does not wait.
  virtual std::vector<std::string> ports() = 0;
  /// Who answers at a port. Called on a thread of its own, one call at a time; may take seconds.
  virtual sequence::FoundDevice look_at(const std::string& port) = 0;
  /// Writes a station file with these nests. Gives its path. Main thread.
  virtual Result<std::string> keep(const std::vector<sequence::NestPlace>& nests) = 0;
};

}  // namespace probewright::windows
