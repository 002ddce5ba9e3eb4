#include "db/queries/entries.h"

namespace probewright::db {

std::vector<EntryRecord> entries(Reader& reader, std::int64_t from, std::int64_t to, std::string_view kind) {
  std::vector<EntryRecord> found;
  Row row = reader.begin(
      "SELECT number, time, kind, who, body, hash FROM entry WHERE number BETWEEN ?1 AND ?2 AND (?3 = '' OR kind = ?3)"
      " ORDER BY number");
  for (row.values(from, to, kind); row.step();) {
    const Body body = parse_body(row.text_view(4), "entry " + row.text(0)).value();
    const Body* data = body.find("data");
    found.push_back({row.integer(0), parse_utc(row.text_view(1)).value(), row.text(2), row.text(3),
                     data ? *data : Body{}, row.digest(5)});
  }
  return found;
}

}  // namespace probewright::db
