#include "limits/reader/parts.h"
#include "station/base/numbers.h"
#include "station/base/units.h"

// What the sheet says of the line rather than of a reading: retests, and when a nest stops by itself.
namespace probewright::limits::reader {
namespace {

std::optional<int> whole_number(const Value& value, int from, int to, std::string_view key, Faults& faults) {
  const auto number = value.integer(faults);
  if (!number) return {};
  if (*number >= from && *number <= to) return static_cast<int>(*number);
  faults.add(value.place(), "sheet_out_of_range",
             {{"key", std::string{key}},
              {"text", as_written(value)},
              {"from", std::to_string(from)},
              {"to", std::to_string(to)}});
  return {};
}

struct YieldRule {
  double percent;
  long long of_last;
};

/// "85 % of last 50"
std::optional<YieldRule> parse_yield_rule(std::string_view text) {
  constexpr std::string_view between = " of last ";
  const auto at = text.find(between);
  if (at == std::string_view::npos) return {};
  const auto share = parse_quantity(text.substr(0, at));
  const auto last = parse_integer(text.substr(at + between.size()));
  if (!share || share->unit != "%" || !last) return {};
  return YieldRule{share->value, *last};
}

void read_yield_rule(const Value& value, StopWhen& stop, Faults& faults) {
  const auto text = value.text(faults);
  if (!text) return;
  const auto rule = parse_yield_rule(*text);
  const bool sane =
      rule && rule->percent > 0.0 && rule->percent <= 100.0 && rule->of_last >= 2 && rule->of_last <= 100000;
  if (!sane) return faults.add(value.place(), "sheet_yield_rule", {{"text", *text}});
  stop.yield_below_percent = rule->percent;
  stop.of_last = static_cast<int>(rule->of_last);
}

}  // namespace

Retest read_retest(const Value& value, Faults& faults) {
  Retest retest;
  auto map = value.map(faults);
  if (!map) return retest;
  if (const auto tries = map->need("tries", faults))
    retest.tries = whole_number(*tries, 0, 5, "tries", faults).value_or(0);
  if (const auto after = map->maybe("after")) {
    retest.after_s = amount(*after, "s", faults).value_or(0.0);
    if (retest.after_s < 0.0 || retest.after_s > 86400.0)
      faults.add(after->place(), "sheet_out_of_range",
                 {{"key", "after"}, {"text", as_written(*after)}, {"from", "0 s"}, {"to", "24 h"}});
  }
  map->finish(faults);
  return retest;
}

StopWhen read_stop_when(const Value& value, Faults& faults) {
  StopWhen stop;
  auto map = value.map(faults);
  if (!map) return stop;
  if (const auto fails = map->maybe("fails in a row"))
    stop.fails_in_a_row = whole_number(*fails, 1, 1000, "fails in a row", faults);
  if (const auto yield = map->maybe("yield below")) read_yield_rule(*yield, stop, faults);
  map->finish(faults);
  return stop;
}

}  // namespace probewright::limits::reader
