#include "db/queries/open_runs.h"

namespace probewright::db {
namespace {

void count_readings(Reader& reader, OpenRun& run) {
  Row row = reader.begin("SELECT check_slug, ok FROM reading WHERE run = ? ORDER BY place");
  for (row.values(run.run.value); row.step(); ++run.readings)
    if (row.text_view(1) == "not_ok") run.not_ok.push_back(row.text(0));
}

}  // namespace

std::vector<OpenRun> open_runs(Reader& reader, std::string_view station) {
  std::vector<OpenRun> runs;
  Row row = reader.begin(
      "SELECT o.run, o.serial, o.purpose, o.model, o.lot, o.operator, o.emulated, o.nest, e.time FROM run_opened AS o"
      " JOIN entry AS e ON e.number = o.run"
      " WHERE (?1 = '' OR o.station = ?1) AND NOT EXISTS (SELECT 1 FROM run_closed AS c WHERE c.run = o.run)"
      " ORDER BY o.run");
  for (row.values(station); row.step();) {
    OpenRun& run = runs.emplace_back();
    run.run = {row.integer(0)};
    run.serial = row.text(1);
    run.purpose = row.text(2);
    run.model = row.text(3);
    run.lot = row.text(4);
    run.operator_name = row.text(5);
    run.emulated = row.integer(6) != 0;
    run.nest = static_cast<int>(row.integer(7));
    run.opened_at = parse_utc(row.text_view(8)).value();
    count_readings(reader, run);
  }
  return runs;
}

}  // namespace probewright::db
