#include "db/queries/document.h"

namespace probewright::db {
namespace {

/// That of the entry, or of the entry of an earlier volume that it repeats.
UtcTime time_of_signing(const Row& row) {
  const auto body = parse_body(row.text_view(7));
  const Body* data = body ? body->find("data") : nullptr;
  const Body* carried = data ? data->find("carried") : nullptr;
  return parse_utc(carried ? carried->text("time") : row.text(1)).value();
}

std::vector<SignatureRecord> signatures_of(Reader& reader, const Digest& digest) {
  std::vector<SignatureRecord> signatures;
  Row row = reader.begin(
      "SELECT s.entry, e.time, s.signer, s.role, s.meaning, s.public_key, s.signature, e.body FROM signature AS s"
      " JOIN entry AS e ON e.number = s.entry WHERE s.document = ? ORDER BY s.entry");
  for (row.values(digest); row.step();)
    signatures.push_back(
        {row.integer(0), time_of_signing(row), row.text(2), row.text(3), row.text(4), row.text(5), row.text(6)});
  return signatures;
}

}  // namespace

std::optional<DocumentRecord> document_by_digest(Reader& reader, const Digest& digest) {
  Row row = reader.begin(
      "SELECT d.entry, e.time, d.kind, d.name, d.revision, d.text FROM document AS d JOIN entry AS e ON e.number = "
      "d.entry"
      " WHERE d.digest = ?");
  if (!row.values(digest).step()) return std::nullopt;
  return DocumentRecord{
      row.integer(0), parse_utc(row.text_view(1)).value(), row.text(2), row.text(3), row.text(4), row.text(5),
      digest,         signatures_of(reader, digest)};
}

std::vector<DocumentRecord> documents_named(Reader& reader, std::string_view kind, std::string_view name) {
  std::vector<DocumentRecord> documents;
  Row row = reader.begin("SELECT digest FROM document WHERE kind = ? AND name = ? ORDER BY entry");
  for (row.values(kind, name); row.step();)
    if (auto document = document_by_digest(reader, row.digest(0))) documents.push_back(*std::move(document));
  return documents;
}

std::optional<DocumentRecord> document_in_force(Reader& reader, std::string_view kind, std::string_view name,
                                                UtcTime at) {
  Row row = reader.begin(
      "SELECT d.digest FROM document_state AS s JOIN document AS d ON d.digest = s.document"
      " WHERE d.kind = ?1 AND d.name = ?2 AND s.state = 'in_force' AND s.from_time <= ?3 AND NOT EXISTS"
      "  (SELECT 1 FROM document_state AS w WHERE w.document = s.document AND w.state = 'withdrawn'"
      "   AND w.entry > s.entry AND w.from_time <= ?3)"
      " ORDER BY s.from_time DESC, s.entry DESC LIMIT 1");
  if (!row.values(kind, name, to_text(at)).step()) return std::nullopt;
  return document_by_digest(reader, row.digest(0));
}

}  // namespace probewright::db
