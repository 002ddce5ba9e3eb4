#pragma once
#include <cstdint>
#include <functional>
#include <string>
#include <string_view>
#include <vector>

#include "db/reader.h"
#include "db/store.h"
#include "station/base/times.h"

namespace probewright::db {

/// Which captured bytes may go. Digests, readings and verdicts always stay.
struct RetentionRules {
  UtcTime closed_before;  ///< the record period's end: only runs that were closed before it
  int keep_one_in = 0;  ///< keep the captures of 1 serial in so many, chosen by is_kept; 0: keep none beyond the period
};

/// Whether the captures of a serial are kept for good by "1 in n": the first 8 bytes of the SHA-256 over the serial, as
/// a big-endian number, leave no remainder. The same serials on every station and in every year; nobody can choose
/// them.
bool is_kept(std::string_view serial, int one_in);

/// What the rules take away and what they leave, counted in runs that still have captured bytes.
struct PrunePlan {
  std::vector<std::int64_t> captures;  ///< whose bytes may go, rising
  std::int64_t runs = 0;               ///< that lose their captures
  std::int64_t bytes = 0;              ///< stored bytes that go
  std::int64_t in_period = 0;          ///< runs left alone: closed after `closed_before`, or still open
  std::int64_t chosen = 0;             ///< by 1 in n
  std::int64_t lot_open = 0;           ///< their lot was not closed
  std::int64_t held = 0;               ///< a hold lies on the serial, the lot, the nest or a document of the run
};
/// Throws db::Error.
PrunePlan plan_prune(Reader& reader, const RetentionRules& rules);

/// Does what the plan says, in entries of at most 1000 captures each, and gives the space back to the disk (the file
/// becomes smaller). `progress` is called with how many captures of how many are done. Returns how many went.
/// Errors: those of Store::commit.
Result<std::int64_t> prune(Store& store, const PrunePlan& plan, std::string_view who, std::string_view reason,
                           const std::function<void(std::int64_t, std::int64_t)>& progress = {});

}  // namespace probewright::db
