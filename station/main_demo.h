#pragma once
#include "station/text/demo.h"

namespace probewright {

/// The bench, the lot and the pages of a demonstration. `options` must be possible (text::impossible).
text::DemoParts demo_parts(const text::DemoOptions& options);

}  // namespace probewright
