#pragma once
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "db/reader.h"
#include "db/rows.h"
#include "station/base/times.h"

namespace probewright::db {

struct SignatureRecord {
  std::int64_t entry = 0;
  UtcTime signed_at;
  std::string signer, role, meaning, public_key, signature;
};

struct DocumentRecord {
  std::int64_t entry = 0;
  UtcTime first_used_at;
  std::string kind, name, revision, text;
  Digest digest{};
  std::vector<SignatureRecord> signatures;
};

/// A document by its digest, or nothing. Throws db::Error.
std::optional<DocumentRecord> document_by_digest(Reader& reader, const Digest& digest);
/// Every document of a kind and name that the ledger holds, oldest first.
std::vector<DocumentRecord> documents_named(Reader& reader, std::string_view kind, std::string_view name);
/// The document of a kind and name that was in force at a moment: the one put in force last by then and not withdrawn
/// by then; or nothing.
std::optional<DocumentRecord> document_in_force(Reader& reader, std::string_view kind, std::string_view name,
                                                UtcTime at);

}  // namespace probewright::db
