#include "limits/reader/parts.h"

namespace probewright::limits::reader {

// `watch: 1.4 nm` is a magnitude: an alert when the reading is further from zero. What belongs to a judged check has no
// meaning here, and is said so rather than passed over.
std::optional<CheckRule> read_watched(const Check& check, Map map, Faults& faults) {
  CheckRule rule;
  rule.check = check.slug;
  rule.use = Use::watch;
  const Value beyond = *map.maybe("watch");
  rule.watch_beyond = amount(beyond, check.unit, faults);
  if (rule.watch_beyond && !(*rule.watch_beyond > 0.0))
    faults.add(beyond.place(), "sheet_not_above_zero",
               {{"check", rule.check}, {"key", "watch"}, {"text", as_written(beyond)}});
  rule.at_degC = read_at(map, faults);
  for (const char* key : {"lower", "upper", "nominal", "tolerance", "U", "guard", "typical", "accept"})
    if (const auto value = map.maybe(key))
      faults.add(value->place(), "sheet_watch_is_not_judged", {{"check", rule.check}, {"key", key}});
  map.finish(faults);
  return rule;
}

}  // namespace probewright::limits::reader
