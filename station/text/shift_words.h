#pragma once
#include <string>

#include "station/base/zone.h"
#include "station/text/json_out.h"
#include "station/trace/shift.h"

namespace probewright::text {

/// What a shift did, for people; times by the zone.
std::string words_of(const trace::ShiftFacts& facts, const Zone& zone);
/// The same as JSON (FORMATS.md, "report shift").
Json json_of(const trace::ShiftFacts& facts);

}  // namespace probewright::text
