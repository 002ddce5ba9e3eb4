#pragma once
#include "limits/compare.h"
#include "limits/explain.h"
#include "station/text/json_out.h"

namespace probewright::text {

/// A usable sheet as JSON (FORMATS.md, "limits check"). `report` must have its sheet.
Json json_of(const limits::SheetReport& report);
/// What changed between two sheets (FORMATS.md, "limits diff").
Json json_of(const limits::SheetDifference& difference);

}  // namespace probewright::text
