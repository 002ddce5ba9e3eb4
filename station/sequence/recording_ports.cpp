#include "station/sequence/recording_ports.h"

#include "drivers/wire/recording_source.h"

namespace probewright::sequence {

std::string device_name(int nest, DeviceKind kind) {
  return "nest" + std::to_string(nest) + (kind == DeviceKind::phantom ? "-phantom" : "-adapter");
}

PortOpener recording_ports(PortOpener ports, const Clock& clock, SteadyTime zero, wire::Recorder& recorder) {
  return [ports = std::move(ports), &clock, zero, &recorder](const DevicePlace& place, int nest, DeviceKind kind) {
    return wire::recording_source(ports(place, nest, kind), device_name(nest, kind), clock, zero, recorder);
  };
}

}  // namespace probewright::sequence
