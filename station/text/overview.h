#pragma once
#include <string>

#include "station/text/choices.h"

namespace probewright::text {

/// What the program is for, what it can be asked, and the cautions: printed when it is started without a command.
std::string overview();
/// "probewright 0.1.0 (commit ..., built with ...)"
std::string version_words(const Build& build);

}  // namespace probewright::text
