#include "db/queries/sign_in.h"

namespace probewright::db {

std::optional<EntryRecord> sign_in_before(Reader& reader, std::string_view person, std::int64_t entry) {
  std::int64_t number = 0;
  {
    Row row = reader.begin(
        "SELECT number FROM entry WHERE kind = 'sign_in' AND number < ? AND json_extract(body, '$.data.person') = ?"
        " ORDER BY number DESC LIMIT 1");
    if (!row.values(entry, person).step()) return std::nullopt;
    number = row.integer(0);
  }
  auto found = entries(reader, number, number);
  if (found.empty()) return std::nullopt;
  return std::move(found.front());
}

}  // namespace probewright::db
