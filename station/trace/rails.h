#pragma once
#include <optional>
#include <string>

#include "db/rows.h"
#include "station/trace/history.h"

namespace probewright::trace {

/// A judged reading on the scale that all checks share: the acceptance limits stand at -1 and +1, the middle between
/// them at 0. Of a check with one limit the sheet's typical value stands at 0.
struct RailMark {
  std::string check;
  double position = 0.0;
  double guard_below = 0.0, guard_above = 0.0;  ///< guard strips outside -1 and +1, on the same scale
  double whisker = 0.0;                         ///< expanded uncertainty on the same scale; 0: not known
  double margin = 0.0;
  bool has_lower = false, has_upper = false;
  Standing standing = Standing::ok;
};

/// Where a reading stands, or nothing: it was not judged by numbers, or has no value.
std::optional<RailMark> rail_mark(const db::ReadingRow& reading);

}  // namespace probewright::trace
