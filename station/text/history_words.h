#pragma once
#include <string>

#include "station/text/json_out.h"
#include "station/trace/history.h"

namespace probewright::text {

/// The history of a serial for people: a line that sums it up, then each run with its readings. Times are UTC.
std::string words_of(const trace::History& history);
/// The same as JSON (FORMATS.md, "trace").
Json json_of(const trace::History& history);
/// Text and integers of a ledger body as JSON.
Json json_of(const Body& body);

}  // namespace probewright::text
