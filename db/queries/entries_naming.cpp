#include "db/queries/entries_naming.h"

#include <algorithm>

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

/// A ledger of an earlier layout lacks the table of what entries are about: there every entry is looked at.
bool has_table(Reader& reader) {
  Row row = reader.begin("SELECT 1 FROM sqlite_schema WHERE type = 'table' AND name = 'entry_about'");
  return row.step();
}

std::vector<EntryRecord> naming(Reader& reader, std::string_view subject, std::string_view name) {
  if (has_table(reader)) {
    Row row = reader.begin("SELECT entry FROM entry_about WHERE subject = ? AND name = ? ORDER BY entry");
    return records_of(reader, numbers_in(row.values(subject, name)));
  }
  Row row = reader.begin(
      "SELECT number FROM entry WHERE kind NOT IN ('run_opened', 'run_closed')"
      " AND json_extract(body, '$.data.' || ?1) = ?2 ORDER BY number");
  return records_of(reader, numbers_in(row.values(subject, name)));
}

}  // namespace

std::vector<EntryRecord> entries_naming_serial(Reader& reader, std::string_view serial) {
  return naming(reader, "serial", serial);
}

std::vector<EntryRecord> entries_naming_lot(Reader& reader, std::string_view lot) { return naming(reader, "lot", lot); }

std::vector<EntryRecord> entries_naming_person(Reader& reader, std::string_view person) {
  std::vector<EntryRecord> found = naming(reader, "person", person);
  std::vector<std::int64_t> by;
  {
    Row row = reader.begin(
        "SELECT number FROM entry WHERE who = ? AND kind <> 'run_opened' AND kind <> 'run_closed' ORDER BY number");
    by = numbers_in(row.values(person));
  }
  for (EntryRecord& entry : records_of(reader, by)) found.push_back(std::move(entry));
  std::sort(found.begin(), found.end(), [](const auto& a, const auto& b) { return a.number < b.number; });
  const auto same = [](const EntryRecord& a, const EntryRecord& b) { return a.number == b.number; };
  found.erase(std::unique(found.begin(), found.end(), same), found.end());
  return found;
}

std::vector<EntryRecord> entries_beside_runs(Reader& reader, EntryRange range) {
  Row row = reader.begin(
      "SELECT number FROM entry WHERE number BETWEEN ?1 AND ?2 AND kind NOT IN ('run_opened', 'run_closed')"
      " ORDER BY number");
  return records_of(reader, numbers_in(row.values(range.first, range.last)));
}

}  // namespace probewright::db
