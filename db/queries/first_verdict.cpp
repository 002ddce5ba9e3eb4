#include "db/queries/first_verdict.h"

namespace probewright::db {

std::string first_production_verdict(Reader& reader, std::string_view serial) {
  Row row = reader.begin(
      "SELECT c.verdict FROM run_opened AS o JOIN run_closed AS c ON c.run = o.run"
      " WHERE o.serial = ? AND o.purpose = 'production' AND c.verdict <> 'void' ORDER BY c.entry LIMIT 1");
  return row.values(serial).step() ? row.text(0) : std::string{};
}

}  // namespace probewright::db
