#pragma once
#include <string_view>

#include "station/base/result.h"
#include "station/base/times.h"
#include "station/base/zone.h"

namespace probewright::trace {

/// From `from` up to, but without, `to`.
struct Period {
  UtcTime from, to;
  bool operator==(const Period&) const = default;
};

/// The day ("2026-12-01") as the zone has it, from its first moment to the first of the next: 23, 24 or 25 hours.
/// Errors: day_malformed.
Result<Period> day_in(const Zone& zone, std::string_view day);

/// A moment that a person typed: "2026-12-01T05:36:12Z" is UTC; "2026-12-01 06:36", "2026-12-01 06:36:12" and
/// "2026-12-01" (its first moment) go by the zone. A time that the clock skips in spring is the moment of the change.
/// A time that it has twice in autumn is the earlier one. Errors: moment_malformed.
Result<UtcTime> moment_in(const Zone& zone, std::string_view text);

}  // namespace probewright::trace
