#include "db/queries/runs_within.h"

namespace probewright::db {
namespace {

std::vector<RunId> numbers_in(Row& row) {
  std::vector<RunId> runs;
  while (row.step()) runs.push_back({row.integer(0)});
  return runs;
}

}  // namespace

std::vector<RunBrief> runs_closed_within(Reader& reader, EntryRange range, std::string_view lot) {
  Row row = reader.begin(
      "SELECT c.run FROM run_closed AS c JOIN run_opened AS o ON o.run = c.run"
      " WHERE c.entry BETWEEN ?1 AND ?2 AND (?3 = '' OR o.lot = ?3) ORDER BY c.entry");
  return run_briefs(reader, numbers_in(row.values(range.first, range.last, lot)));
}

std::vector<RunBrief> runs_left_open(Reader& reader, EntryRange range, std::string_view lot) {
  Row row = reader.begin(
      "SELECT o.run FROM run_opened AS o LEFT JOIN run_closed AS c ON c.run = o.run"
      " WHERE o.run BETWEEN ?1 AND ?2 AND (?3 = '' OR o.lot = ?3) AND (c.entry IS NULL OR c.entry > ?2) ORDER BY "
      "o.run");
  return run_briefs(reader, numbers_in(row.values(range.first, range.last, lot)));
}

std::vector<RunBrief> runs_opened_within(Reader& reader, EntryRange range) {
  Row row = reader.begin("SELECT run FROM run_opened WHERE run BETWEEN ?1 AND ?2 ORDER BY run");
  return run_briefs(reader, numbers_in(row.values(range.first, range.last)));
}

}  // namespace probewright::db
