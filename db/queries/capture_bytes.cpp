#include "db/queries/capture_bytes.h"

#include "db/packing.h"
#include "db/sha256.h"

namespace probewright::db {

Result<Bytes> capture_bytes(Reader& reader, std::int64_t capture) {
  Row row = reader.begin(
      "SELECT c.packing, c.decoded_size, c.decoded_digest, c.stored_digest, b.bytes, p.capture FROM capture AS c"
      " LEFT JOIN capture_bytes AS b ON b.capture = c.number LEFT JOIN pruned AS p ON p.capture = c.number"
      " WHERE c.number = ?");
  const std::string where = "capture " + std::to_string(capture);
  const auto damaged = [&](const char* reason) { return Problem{"capture_damaged", where, {{"reason", reason}}}; };
  if (!row.values(capture).step()) return Problem{"capture_unknown", where};
  if (row.is_null(4)) return row.is_null(5) ? damaged("they are missing") : Problem{"capture_pruned", where};
  if (sha256(row.blob(4)) != row.digest(3)) return damaged("the stored bytes do not have the digest recorded");
  if (row.integer(1) < 0) return damaged("the size recorded is below zero");
  auto decoded = unpack(row.text_view(0), row.blob(4), static_cast<std::size_t>(row.integer(1)));
  if (decoded && sha256(*decoded) != row.digest(2)) return damaged("the decoded bytes do not have the digest recorded");
  return decoded;
}

}  // namespace probewright::db
