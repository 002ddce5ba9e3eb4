#include "db/queries/runs_of_serial.h"

namespace probewright::db {

std::vector<RunRecord> runs_of_serial(Reader& reader, std::string_view serial) {
  std::vector<RunRecord> runs;
  Row row = reader.begin("SELECT run FROM run_opened WHERE serial = ? ORDER BY run");
  for (row.values(serial); row.step();)
    if (auto record = run_record(reader, {row.integer(0)})) runs.push_back(*std::move(record));
  return runs;
}

}  // namespace probewright::db
