#pragma once
#include <string>
#include <string_view>

#include "db/store.h"
#include "station/text/choices.h"
#include "station/text/console.h"

namespace probewright::text {

/// Options for a store that a command appends with: no lease (a line may have it), never a new file.
db::StoreOptions appending(const std::string& ledger, const Build& build);

/// Adds an entry to a ledger beside its line. A copy (db::is_copy) is never written; a closed volume and a file that
/// may not be written cannot be. Whoever waits is told why nothing was recorded. Returns whether it was.
bool note_in_ledger(const std::string& ledger, const Build& build, std::string_view kind, std::string_view who,
                    const Body& data, Console& console);

}  // namespace probewright::text
