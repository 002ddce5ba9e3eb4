#include "station/trace/period.h"

#include <string>

namespace probewright::trace {
namespace {

constexpr std::int64_t us_per_s = 1'000'000;
constexpr std::int64_t day_s = 86'400;

UtcTime later(UtcTime time, std::int64_t by_s) { return {time.microseconds + by_s * us_per_s}; }

/// The first moment at which the zone's clock shows `local` ("2026-12-01 06:36:12") or more; `as_utc` is the same text
/// read as UTC. Offsets lie within a day of it, and the clock is compared as text, which is in order but for the hour
/// that autumn brings twice.
UtcTime first_moment(const Zone& zone, UtcTime as_utc, const std::string& local) {
  UtcTime best = later(as_utc, -zone.offset_s(later(as_utc, -day_s)));
  const UtcTime other = later(as_utc, -zone.offset_s(later(as_utc, day_s)));
  // Two offsets may hold around a change. The earlier moment counts where its clock shows the text.
  const UtcTime early = std::min(best, other), late = std::max(best, other);
  if (zone.local_text(early) == local) return early;
  if (zone.local_text(late) == local) return late;
  // Skipped: the moment of the change lies between the two.
  std::int64_t low = early.microseconds / us_per_s, high = late.microseconds / us_per_s;
  while (low < high) {
    const std::int64_t middle = low + (high - low) / 2;
    if (zone.local_text({middle * us_per_s}) < local)
      low = middle + 1;
    else
      high = middle;
  }
  return {low * us_per_s};
}

/// The text as if it were UTC, and in the form of local_text.
struct Typed {
  UtcTime as_utc;
  std::string local;
};
Result<Typed> typed(std::string_view text) {
  std::string full{text};
  if (full.size() == 10) full += " 00:00:00";
  if (full.size() == 16) full += ":00";
  const Problem malformed{"moment_malformed", "", {{"text", std::string{text}}}};
  if (full.size() != 19 || (full[10] != ' ' && full[10] != 'T')) return malformed;
  full[10] = 'T';
  const auto time = parse_utc(full + "Z");
  if (!time) return malformed;
  full[10] = ' ';
  return Typed{*time, full};
}

}  // namespace

Result<Period> day_in(const Zone& zone, std::string_view day) {
  const auto begin = typed(day);
  if (!begin || day.size() != 10) return Problem{"day_malformed", "", {{"text", std::string{day}}}};
  const UtcTime next = later(begin->as_utc, day_s);
  const std::string next_local = to_text(next).substr(0, 10) + " 00:00:00";
  return Period{first_moment(zone, begin->as_utc, begin->local), first_moment(zone, next, next_local)};
}

Result<UtcTime> moment_in(const Zone& zone, std::string_view text) {
  if (text.ends_with('Z')) {
    const auto utc = parse_utc(text);
    if (!utc) return Problem{"moment_malformed", "", {{"text", std::string{text}}}};
    return *utc;
  }
  const auto local = typed(text);
  if (!local) return local.error();
  return first_moment(zone, local->as_utc, local->local);
}

}  // namespace probewright::trace
