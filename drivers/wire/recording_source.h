#pragma once
#include <memory>
#include <string>

#include "drivers/wire/link.h"
#include "drivers/wire/recording_folder.h"
#include "station/base/clock.h"

namespace probewright::wire {

/// Notes all that goes over the ports that `source` opens, with the time since `zero` on `clock`. Clock and recorder
/// must outlive what comes out. A line in real time recorded like this can be read and cut; replaying gives the same
/// readings exactly only where the line's time stood still while it worked (SteppedLine, trials).
PortSource recording_source(PortSource source, std::string device, const Clock& clock, SteadyTime zero,
                            Recorder& recorder);

}  // namespace probewright::wire
