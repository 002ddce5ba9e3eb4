#pragma once
#include <optional>
#include <string_view>

#include "db/queries/entries.h"

namespace probewright::db {

/// The newest `sign_in` entry of a person before an entry, or nothing. Throws as entries.
std::optional<EntryRecord> sign_in_before(Reader& reader, std::string_view person, std::int64_t entry);

}  // namespace probewright::db
