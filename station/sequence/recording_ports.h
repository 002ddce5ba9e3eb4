#pragma once
#include "drivers/wire/recording_folder.h"
#include "station/sequence/line_services.h"

namespace probewright::sequence {

/// "nest1-phantom": a device as recordings name it.
std::string device_name(int nest, DeviceKind kind);

/// Ports that note all that goes over them, with the time since `zero`. Clock and recorder must outlive the line. See
/// wire::recording_source for what such a recording is good for.
PortOpener recording_ports(PortOpener ports, const Clock& clock, SteadyTime zero, wire::Recorder& recorder);

}  // namespace probewright::sequence
