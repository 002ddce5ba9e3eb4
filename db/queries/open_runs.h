#pragma once
#include <string>
#include <string_view>
#include <vector>

#include "db/reader.h"
#include "db/rows.h"
#include "station/base/times.h"

namespace probewright::db {

/// A run that was opened and never closed, with what decides whether it ends void or as a fail.
struct OpenRun {
  RunId run;
  std::string serial, purpose, model, lot, operator_name;
  bool emulated = false;
  int nest = 1;
  UtcTime opened_at;
  int readings = 0;                 ///< on the disk
  std::vector<std::string> not_ok;  ///< slugs of readings outside their acceptance limits
};

/// Open runs of a station, oldest first; of every station where `station` is empty. Throws db::Error.
std::vector<OpenRun> open_runs(Reader& reader, std::string_view station = {});

}  // namespace probewright::db
