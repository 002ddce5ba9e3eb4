#pragma once
#include <vector>

#include "station/sequence/ledger_start.h"
#include "station/windows/frame/text_page.h"

namespace probewright::windows {

/// What is to be done after a start that followed a power cut or a kill: which probe was in which nest, and what became
/// of its run.
std::vector<Passage> late_notice(const std::vector<sequence::ClosedLate>& closed);

}  // namespace probewright::windows
