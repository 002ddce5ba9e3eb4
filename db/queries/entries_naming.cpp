#include "db/queries/entries_naming.h"

// Entries of runs are nearly all of a ledger. Three stretches of the index on `kind` leave them out without a look at
// them.
#define BESIDE_RUNS "(kind < 'run_closed' OR (kind > 'run_closed' AND kind < 'run_opened') OR kind > 'run_opened')"

namespace probewright::db {
namespace {

std::vector<std::int64_t> numbers_in(Row& row) {
  std::vector<std::int64_t> numbers;
  while (row.step()) numbers.push_back(row.integer(0));
  return numbers;
}

std::vector<EntryRecord> records_of(Reader& reader, const std::vector<std::int64_t>& numbers) {
  std::vector<EntryRecord> found;
  for (const std::int64_t number : numbers)
    for (EntryRecord& entry : entries(reader, number, number)) found.push_back(std::move(entry));
  return found;
}

std::vector<EntryRecord> naming(Reader& reader, const char* sql, std::string_view key) {
  Row row = reader.begin(sql);
  return records_of(reader, numbers_in(row.values(key)));
}

}  // namespace

std::vector<EntryRecord> entries_naming_serial(Reader& reader, std::string_view serial) {
  return naming(reader,
                "SELECT number FROM entry WHERE " BESIDE_RUNS
                " AND json_extract(body, '$.data.serial') = ? ORDER BY number",
                serial);
}

std::vector<EntryRecord> entries_naming_lot(Reader& reader, std::string_view lot) {
  return naming(
      reader, "SELECT number FROM entry WHERE " BESIDE_RUNS " AND json_extract(body, '$.data.lot') = ? ORDER BY number",
      lot);
}

std::vector<EntryRecord> entries_naming_person(Reader& reader, std::string_view person) {
  return naming(reader,
                "SELECT number FROM entry WHERE " BESIDE_RUNS
                " AND (who = ?1 OR json_extract(body, '$.data.person') = ?1) ORDER BY number",
                person);
}

std::vector<EntryRecord> entries_beside_runs(Reader& reader, EntryRange range) {
  Row row = reader.begin(
      "SELECT number FROM entry WHERE number BETWEEN ?1 AND ?2 AND kind NOT IN ('run_opened', 'run_closed')"
      " ORDER BY number");
  return records_of(reader, numbers_in(row.values(range.first, range.last)));
}

}  // namespace probewright::db
