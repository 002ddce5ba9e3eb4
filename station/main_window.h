#pragma once
#include <memory>
#include <string>

#include "station/text/line_window.h"

namespace probewright {

/// A window for a line, or nullptr where this program has none or there is no display. `version` stands in it.
std::unique_ptr<text::LineWindow> line_window(const std::string& version);

}  // namespace probewright
