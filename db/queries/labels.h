#pragma once
#include <string>
#include <string_view>
#include <vector>

#include "db/reader.h"
#include "db/rows.h"
#include "station/base/times.h"

namespace probewright::db {

/// A label as its `label_made` entry tells it.
struct LabelRecord {
  std::int64_t entry = 0;
  UtcTime made_at;
  std::string who;
  RunId run;
  std::string serial;
  std::string kind;  ///< "pass", "fail"
  int copy = 1;
  std::string reason;  ///< of a reprint; empty for the first
  std::string code;    ///< what a reader gets from it
};

/// Labels of a serial, oldest first. Throws db::Error; ProblemError for a damaged ledger.
std::vector<LabelRecord> labels_of_serial(Reader& reader, std::string_view serial);

}  // namespace probewright::db
