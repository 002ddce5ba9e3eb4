#pragma once
#include <string>
#include <string_view>
#include <vector>

#include "db/reader.h"
#include "db/rows.h"
#include "station/base/times.h"

namespace probewright::db {

struct EntryRecord {
  std::int64_t number = 0;
  UtcTime time;
  std::string kind, who;
  Body data;
  Digest hash{};
};

/// Entries from number `from` to `to`, both included, oldest first; of one kind, or of all where `kind` is empty.
/// Throws db::Error; ProblemError time_malformed, body_malformed for a damaged ledger.
std::vector<EntryRecord> entries(Reader& reader, std::int64_t from, std::int64_t to, std::string_view kind = {});

}  // namespace probewright::db
