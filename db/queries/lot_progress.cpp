#include "db/queries/lot_progress.h"

namespace probewright::db {

LotProgress lot_progress(Reader& reader, std::string_view lot) {
  Row row = reader.begin(
      "SELECT count(DISTINCT CASE WHEN c.verdict IN ('pass', 'fail') THEN o.serial END),"
      " count(DISTINCT CASE WHEN c.verdict = 'pass' THEN o.serial END)"
      " FROM run_opened AS o JOIN run_closed AS c ON c.run = o.run WHERE o.lot = ?1 AND o.purpose = 'production'");
  row.values(lot);
  row.step();
  return {static_cast<int>(row.integer(0)), static_cast<int>(row.integer(1))};
}

}  // namespace probewright::db
