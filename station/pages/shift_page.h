#pragma once
#include "station/pages/shift_report.h"
#include "station/trace/page_notes.h"
#include "station/trace/shift.h"

namespace probewright::pages {

/// What a shift report says, from the facts of a shift: names in words, the checks nearest to their limits drawn.
ShiftReport shift_report_of(const trace::ShiftFacts& facts, const trace::PageNotes& notes);

}  // namespace probewright::pages
