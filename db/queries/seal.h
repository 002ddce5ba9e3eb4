#pragma once
#include <optional>

#include "db/reader.h"
#include "db/rows.h"
#include "station/base/times.h"

namespace probewright::db {

/// The newest entry and its hash; entry 0 for a ledger without any. Throws db::Error.
Seal newest_seal(Reader& reader);
/// The hash of one entry, or nothing where it is not there.
std::optional<Seal> seal_at(Reader& reader, std::int64_t entry);
/// When the newest entry was made, or nothing.
std::optional<UtcTime> newest_entry_time(Reader& reader);

}  // namespace probewright::db
