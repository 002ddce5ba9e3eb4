#include "station/trace/rails.h"

#include <cmath>

namespace probewright::trace {
namespace {

/// What one unit of the scale is, in the reading's unit; 0: it cannot be told (one limit, and the reading on it).
double scale_of(const db::ReadingRow& reading) {
  if (reading.acceptance_lower && reading.acceptance_upper)
    return 0.5 * (*reading.acceptance_upper - *reading.acceptance_lower);
  const double inside = reading.acceptance_upper ? *reading.acceptance_upper - *reading.value
                                                 : *reading.value - *reading.acceptance_lower;
  return *reading.margin == 0.0 ? 0.0 : std::abs(inside / *reading.margin);
}

}  // namespace

std::optional<RailMark> rail_mark(const db::ReadingRow& reading) {
  if (!reading.value || !reading.margin || (!reading.acceptance_lower && !reading.acceptance_upper))
    return std::nullopt;
  RailMark mark;
  mark.check = reading.check;
  mark.margin = *reading.margin;
  mark.standing = standing_of(reading);
  mark.has_lower = reading.acceptance_lower.has_value();
  mark.has_upper = reading.acceptance_upper.has_value();
  const double scale = scale_of(reading);
  if (mark.has_lower && mark.has_upper)
    mark.position =
        scale > 0.0 ? (*reading.value - 0.5 * (*reading.acceptance_lower + *reading.acceptance_upper)) / scale : 0.0;
  else
    mark.position = mark.has_upper ? 1.0 - mark.margin : mark.margin - 1.0;
  if (!(scale > 0.0)) return mark;
  if (mark.has_lower && reading.lower) mark.guard_below = (*reading.acceptance_lower - *reading.lower) / scale;
  if (mark.has_upper && reading.upper) mark.guard_above = (*reading.upper - *reading.acceptance_upper) / scale;
  mark.whisker = reading.expanded_uncertainty.value_or(0.0) / scale;
  return mark;
}

}  // namespace probewright::trace
