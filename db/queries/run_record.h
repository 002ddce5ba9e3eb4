#pragma once
#include <optional>
#include <string>
#include <vector>

#include "db/reader.h"
#include "db/rows.h"
#include "station/base/times.h"

namespace probewright::db {

/// A document as a run names it.
struct NamedDocument {
  std::string role, kind, name, revision;
  Digest digest{};
};

/// What is kept of a capture beside its bytes (capture_bytes.h).
struct CaptureRecord {
  std::int64_t number = 0;
  std::string kind, set_label, packing;
  std::int64_t decoded_size = 0, stored_size = 0;
  Digest decoded_digest{}, stored_digest{};
  bool pruned = false;
};

/// How a run ended.
struct ClosingRecord {
  std::int64_t entry = 0;
  UtcTime closed_at;
  std::string verdict, cause, cause_words;
  std::vector<std::string> failing;
  bool provisional = false;
  Digest proof{};
  Digest hash{};  ///< of the closing entry
  Body bench;     ///< state of the bench
};

/// A run with all that hangs on it.
struct RunRecord {
  RunId run;
  UtcTime opened_at;
  RunOpened opened;                      ///< as it was opened
  std::vector<NamedDocument> documents;  ///< the same documents, with their names
  std::optional<ClosingRecord> closing;  ///< nothing: the run is open
  std::vector<ReadingRow> readings;      ///< in catalogue order
  std::vector<CaptureRecord> captures;   ///< in the order made
};

/// One run, or nothing. Throws db::Error; ProblemError time_malformed, body_malformed for a damaged ledger.
std::optional<RunRecord> run_record(Reader& reader, RunId run);

}  // namespace probewright::db
