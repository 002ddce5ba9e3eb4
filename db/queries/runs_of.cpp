#include "db/queries/runs_of.h"

namespace probewright::db {
namespace {

std::vector<RunBrief> briefs_of(Reader& reader, const char* sql, std::string_view key) {
  std::vector<RunId> runs;
  Row row = reader.begin(sql);
  for (row.values(key); row.step();) runs.push_back({row.integer(0)});
  return run_briefs(reader, runs);
}

}  // namespace

std::vector<RunBrief> runs_of_lot(Reader& reader, std::string_view lot) {
  return briefs_of(reader, "SELECT run FROM run_opened WHERE lot = ? ORDER BY run", lot);
}

std::vector<RunBrief> runs_of_operator(Reader& reader, std::string_view person) {
  return briefs_of(reader, "SELECT run FROM run_opened WHERE operator = ? ORDER BY run", person);
}

}  // namespace probewright::db
