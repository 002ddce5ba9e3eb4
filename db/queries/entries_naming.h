#pragma once
#include <string_view>
#include <vector>

#include "db/queries/entries.h"
#include "db/queries/entry_range.h"

// Entries other than those that open and close runs, oldest first. All throw as entries.
namespace probewright::db {

/// Those whose data name the serial: labels, rework, holds.
std::vector<EntryRecord> entries_naming_serial(Reader& reader, std::string_view serial);
/// Those whose data name the lot: its opening and close-out, labels.
std::vector<EntryRecord> entries_naming_lot(Reader& reader, std::string_view lot);
/// Those that a person made, and those whose data name the person.
std::vector<EntryRecord> entries_naming_person(Reader& reader, std::string_view person);
/// All in a range.
std::vector<EntryRecord> entries_beside_runs(Reader& reader, EntryRange range);

}  // namespace probewright::db
