#pragma once
#include "db/reader.h"
#include "db/rows.h"

namespace probewright::db {

/// The decoded bytes of a capture, checked against both digests. Throws db::Error.
/// Errors: capture_unknown, capture_pruned, capture_damaged.
Result<Bytes> capture_bytes(Reader& reader, std::int64_t capture);

}  // namespace probewright::db
