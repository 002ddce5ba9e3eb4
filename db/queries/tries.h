#pragma once
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "db/reader.h"
#include "db/rows.h"
#include "station/base/times.h"

namespace probewright::db {

/// One try of a serial number: what it was for and how it ended.
struct Try {
  RunId run;
  std::string purpose;
  bool emulated = false;
  int try_number = 1;
  int nest = 1;
  std::string lot;
  UtcTime opened_at;
  std::optional<UtcTime> closed_at;  ///< nothing: still open
  std::string verdict;               ///< empty: still open
  std::string cause;
  bool provisional = false;
};

/// Every try of a serial number, oldest first; of one purpose, or of all where `purpose` is empty. Throws db::Error.
std::vector<Try> tries_of_serial(Reader& reader, std::string_view serial, std::string_view purpose = {});

}  // namespace probewright::db
