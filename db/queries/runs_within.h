#pragma once
#include <string_view>
#include <vector>

#include "db/queries/entry_range.h"
#include "db/queries/run_brief.h"

namespace probewright::db {

/// Runs whose closing entry lies in the range, in the order in which they ended; of one lot, or of all where `lot` is
/// empty. Throws as run_brief.
std::vector<RunBrief> runs_closed_within(Reader& reader, EntryRange range, std::string_view lot = {});
/// Runs that were opened in the range and not closed by its end, oldest first.
std::vector<RunBrief> runs_left_open(Reader& reader, EntryRange range, std::string_view lot = {});
/// Runs that were opened in the range, oldest first.
std::vector<RunBrief> runs_opened_within(Reader& reader, EntryRange range);

}  // namespace probewright::db
