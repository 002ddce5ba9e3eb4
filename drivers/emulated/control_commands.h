#pragma once
#include <string>
#include <string_view>

#include "drivers/emulated/hands.h"

namespace probewright::emulated {

/// Does what one line of the control socket asks for (CONTROL.md) and gives the reply: "ok", or a sentence that says
/// what is wrong. Never throws for what stands in the line.
std::string obey(Hands& hands, std::string_view line);

}  // namespace probewright::emulated
