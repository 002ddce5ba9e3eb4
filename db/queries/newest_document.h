#pragma once
#include <optional>
#include <string_view>

#include "db/queries/document.h"

namespace probewright::db {

/// The document of a kind that came into the ledger last, or nothing. Throws as document_by_digest.
std::optional<DocumentRecord> newest_document(Reader& reader, std::string_view kind);

}  // namespace probewright::db
