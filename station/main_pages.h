#pragma once
#include <memory>

#include "station/text/page_maker.h"

namespace probewright {

/// What draws pages for commands; empty in a program that was built without them. It starts the tool kit when the first
/// page is asked for. Main thread only.
std::unique_ptr<text::PageMaker> page_maker();

}  // namespace probewright
