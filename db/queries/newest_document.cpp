#include "db/queries/newest_document.h"

namespace probewright::db {

std::optional<DocumentRecord> newest_document(Reader& reader, std::string_view kind) {
  Digest digest{};
  {
    Row row = reader.begin("SELECT digest FROM document WHERE kind = ? ORDER BY entry DESC LIMIT 1");
    if (!row.values(kind).step()) return std::nullopt;
    digest = row.digest(0);
  }
  return document_by_digest(reader, digest);
}

}  // namespace probewright::db
