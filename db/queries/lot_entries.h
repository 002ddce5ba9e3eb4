#pragma once
#include <string_view>
#include <vector>

#include "db/queries/entries.h"

namespace probewright::db {

/// Entries about a lot other than its runs: those whose kind begins with `lot_` and whose data names it, oldest first.
/// Throws as entries.
std::vector<EntryRecord> lot_entries(Reader& reader, std::string_view lot);

}  // namespace probewright::db
