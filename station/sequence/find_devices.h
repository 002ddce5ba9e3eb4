#pragma once
#include <filesystem>
#include <optional>
#include <string>
#include <vector>

#include "station/sequence/configuration.h"
#include "station/sequence/line_services.h"

namespace probewright::sequence {

/// Serial ports of this machine: the names of `devices`/serial/by-id, which stay the same when a cable is plugged in
/// elsewhere; where there are none, ttyUSB* and ttyACM*. Sorted.
std::vector<std::string> serial_ports(const std::filesystem::path& devices = "/dev");

/// What answered at a port.
struct FoundDevice {
  std::string port;
  std::optional<DeviceKind> kind;  ///< empty: none of our devices, or none that could be used
  std::string serial;              ///< "PH-01"
  std::string certificate;         ///< of the documents, that the device carries, too
  bool emulated = false;
  std::optional<Problem> trouble;  ///< why the device cannot be used, or why nothing is known of the port
};

/// Opens the port and asks who is there, as a phantom and then as an adapter. The device is looked up in the
/// certificates of `configuration`. Waits, up to some seconds where nobody answers: any thread but the line's and the
/// main one.
FoundDevice look_at_port(const std::string& port, const Configuration& configuration);

}  // namespace probewright::sequence
