#pragma once
#include <chrono>
#include <cstdint>
#include <string>
#include <string_view>

#include "station/base/result.h"

namespace probewright {

/// A moment in UTC, in microseconds since 1970-01-01. Order of events is by entry number, never by this.
struct UtcTime {
  std::int64_t microseconds = 0;
  auto operator<=>(const UtcTime&) const = default;
};

/// "2026-12-01T05:36:12.123456Z"
std::string to_text(UtcTime time);
/// Reads exactly the form of to_text (a fraction of 0 to 6 digits). Errors: time_malformed.
Result<UtcTime> parse_utc(std::string_view text);

using Duration = std::chrono::nanoseconds;
/// A moment of the steady clock; only differences mean anything.
struct SteadyTime {
  Duration since_start{0};
  auto operator<=>(const SteadyTime&) const = default;
};
inline SteadyTime operator+(SteadyTime time, Duration by) { return {time.since_start + by}; }
inline SteadyTime operator-(SteadyTime time, Duration by) { return {time.since_start - by}; }
inline Duration operator-(SteadyTime later, SteadyTime earlier) { return later.since_start - earlier.since_start; }

inline constexpr double seconds(Duration d) { return std::chrono::duration<double>(d).count(); }
inline Duration from_seconds(double s) {
  return std::chrono::duration_cast<Duration>(std::chrono::duration<double>(s));
}

}  // namespace probewright
