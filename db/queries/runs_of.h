#pragma once
#include <string_view>
#include <vector>

#include "db/queries/run_brief.h"

namespace probewright::db {

/// Runs of a lot, oldest first. Throws as run_brief.
std::vector<RunBrief> runs_of_lot(Reader& reader, std::string_view lot);
/// Runs that a person operated, oldest first.
std::vector<RunBrief> runs_of_operator(Reader& reader, std::string_view person);

}  // namespace probewright::db
