#include "db/queries/seal.h"

namespace probewright::db {

Seal newest_seal(Reader& reader) {
  Row row = reader.begin("SELECT number, hash FROM entry ORDER BY number DESC LIMIT 1");
  if (!row.step()) return {};
  return {row.integer(0), row.digest(1)};
}

std::optional<Seal> seal_at(Reader& reader, std::int64_t entry) {
  Row row = reader.begin("SELECT hash FROM entry WHERE number = ?");
  if (!row.values(entry).step()) return std::nullopt;
  return Seal{entry, row.digest(0)};
}

std::optional<UtcTime> newest_entry_time(Reader& reader) {
  Row row = reader.begin("SELECT time FROM entry ORDER BY number DESC LIMIT 1");
  if (!row.step()) return std::nullopt;
  const auto time = parse_utc(row.text_view(0));
  if (!time) return std::nullopt;
  return *time;
}

}  // namespace probewright::db
