#include "db/queries/tries.h"

namespace probewright::db {

std::vector<Try> tries_of_serial(Reader& reader, std::string_view serial, std::string_view purpose) {
  std::vector<Try> tries;
  Row row = reader.begin(
      "SELECT run, purpose, emulated, try_number, nest, lot, opened_at, verdict, cause, provisional, closed_at"
      " FROM run"
      " WHERE serial = ?1 AND (?2 = '' OR purpose = ?2) ORDER BY run");
  for (row.values(serial, purpose); row.step();) {
    std::optional<UtcTime> closed_at;
    if (const std::string time = row.text(10); !time.empty()) closed_at = parse_utc(time).value();
    tries.push_back({{row.integer(0)},
                     row.text(1),
                     row.integer(2) != 0,
                     static_cast<int>(row.integer(3)),
                     static_cast<int>(row.integer(4)),
                     row.text(5),
                     parse_utc(row.text_view(6)).value(),
                     closed_at,
                     row.text(7),
                     row.text(8),
                     row.integer(9) != 0});
  }
  return tries;
}

}  // namespace probewright::db
