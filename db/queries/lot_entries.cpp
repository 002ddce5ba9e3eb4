#include "db/queries/lot_entries.h"

namespace probewright::db {

std::vector<EntryRecord> lot_entries(Reader& reader, std::string_view lot) {
  std::vector<std::int64_t> numbers;
  {
    Row row = reader.begin(
        "SELECT number FROM entry WHERE kind >= 'lot_' AND kind < 'lot`' AND json_extract(body, '$.data.lot') = ?"
        " ORDER BY number");
    for (row.values(lot); row.step();) numbers.push_back(row.integer(0));
  }
  std::vector<EntryRecord> found;
  for (const std::int64_t number : numbers)
    for (EntryRecord& entry : entries(reader, number, number)) found.push_back(std::move(entry));
  return found;
}

}  // namespace probewright::db
