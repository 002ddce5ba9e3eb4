#pragma once
#include <string_view>

#include "db/reader.h"

namespace probewright::db {

/// How far a lot is, in serials: a serial counts once, by its production runs in this lot.
struct LotProgress {
  int tested = 0;  ///< with a verdict, pass or fail
  int passed = 0;
  bool operator==(const LotProgress&) const = default;
};

/// Throws db::Error.
LotProgress lot_progress(Reader& reader, std::string_view lot);

}  // namespace probewright::db
