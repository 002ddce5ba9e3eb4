#pragma once
#include <string>
#include <string_view>

#include "station/text/json_out.h"
#include "station/trace/lists.h"

namespace probewright::text {

/// Runs and other entries as tables for people; `of` says what was asked for, "lot AQ20-W48-07". Times are UTC.
std::string words_of(const trace::Found& found, std::string_view of);
/// The same as JSON (FORMATS.md, "trace --lot"): `key` is "lot", "person" or "day".
Json json_of(const trace::Found& found, std::string_view key, std::string_view value);

/// One entry and its run.
std::string words_of(const trace::EntryFound& found);
Json json_of(const trace::EntryFound& found);

}  // namespace probewright::text
