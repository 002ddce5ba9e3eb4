#pragma once
#include <vector>

#include "station/windows/frame/text_page.h"

namespace probewright::windows {

/// The help page of the line: what is scanned, what a berth shows, which key does what, what to do when something is
/// wrong.
std::vector<Passage> line_help();

}  // namespace probewright::windows
