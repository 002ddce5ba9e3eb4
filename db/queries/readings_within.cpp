#include "db/queries/readings_within.h"

namespace probewright::db {

void production_readings_within(Reader& reader, EntryRange range, std::string_view lot,
                                const std::function<void(const ChartedReading&)>& take) {
  Row row = reader.begin(
      "SELECT r.run, o.model, r.check_slug, r.unit, r.value, r.acceptance_lower, r.acceptance_upper, r.margin"
      " FROM run_closed AS c JOIN run_opened AS o ON o.run = c.run JOIN reading AS r ON r.run = c.run"
      " WHERE c.entry BETWEEN ?1 AND ?2 AND o.purpose = 'production' AND (?3 = '' OR o.lot = ?3)"
      " AND (r.acceptance_lower IS NOT NULL OR r.acceptance_upper IS NOT NULL) ORDER BY c.entry, r.place");
  for (row.values(range.first, range.last, lot); row.step();)
    take({{row.integer(0)},
          row.text_view(1),
          row.text_view(2),
          row.text_view(3),
          row.maybe_real(4),
          row.maybe_real(5),
          row.maybe_real(6),
          row.maybe_real(7)});
}

}  // namespace probewright::db
