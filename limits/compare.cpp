#include "limits/compare.h"

#include <algorithm>
#include <functional>

#include "limits/fixed_number.h"
#include "limits/words.h"
#include "station/base/numbers.h"

namespace probewright::limits {
namespace {

using Number = std::optional<double>;

std::string title(const Sheet& sheet) { return sheet.name + " revision " + std::to_string(sheet.revision); }

std::string_view use_words(const CheckRule& rule) {
  switch (rule.use) {
    case Use::judged:
      return "judged";
    case Use::watch:
      return "watched";
    case Use::record_only:
      break;
  }
  return "record only";
}

std::string shown(const Number& value, std::string_view unit) {
  if (!value) return "none";
  return unit.empty() ? shortest(*value) : shortest(*value) + " " + std::string{unit};
}

/// A rise that tightens a lower limit loosens an upper one.
Move if_rises(const Number& before, const Number& after, Move rise) {
  const Move fall = rise == Move::tighter ? Move::looser : Move::tighter;
  return *after > *before ? rise : fall;
}

Move limit_move(const Number& before, const Number& after, bool is_lower) {
  if (!before) return Move::tighter;  // a limit where none was
  if (!after) return Move::looser;
  return if_rises(before, after, is_lower ? Move::tighter : Move::looser);
}

std::string guard_words(const Guard& guard) {
  switch (guard.kind) {
    case Guard::Kind::none:
      break;
    case Guard::Kind::factor:
      return shortest(guard.amount) + " x U";
    case Guard::Kind::risk:
      return "risk " + shortest(fixed_number(100.0 * guard.amount)) + " %";
  }
  return "none";
}

class Comparison {
 public:
  explicit Comparison(std::vector<Change>& changes) : changes_(changes) {}

  void add(std::string subject, std::string what, std::string before, std::string after, Move move) {
    changes_.push_back({std::move(subject), std::move(what), std::move(before), std::move(after), move});
  }
  void text(const std::string& subject, const std::string& what, const std::string& before, const std::string& after,
            Move move = Move::neutral) {
    if (before != after) add(subject, what, before, after, move);
  }
  void limit(const CheckRule& rule, const std::string& what, const Number& before, const Number& after, bool is_lower) {
    if (before != after)
      add(rule.check, what, shown(before, unit(rule)), shown(after, unit(rule)), limit_move(before, after, is_lower));
  }
  void number(const std::string& subject, const std::string& what, const Number& before, const Number& after,
              std::string_view unit, Move rise) {
    if (before == after) return;
    const Move move =
        rise == Move::neutral || rise == Move::moved || !before || !after ? rise : if_rises(before, after, rise);
    add(subject, what, shown(before, unit), shown(after, unit), move);
  }
  static std::string unit(const CheckRule& rule) { return unit_words(*find_check(rule.check)); }

 private:
  std::vector<Change>& changes_;
};

void compare_judged(const CheckRule& before, const CheckRule& after, Comparison& out) {
  out.limit(after, "lower limit", before.limits.lower, after.limits.lower, true);
  out.limit(after, "upper limit", before.limits.upper, after.limits.upper, false);
  // A larger declared U lets less certain readings count; what that does to the acceptance limits is said below.
  out.number(after.check, "U", before.expanded_uncertainty, after.expanded_uncertainty, Comparison::unit(after),
             Move::looser);
  if (before.guard != after.guard)
    out.add(after.check, "guard", guard_words(before.guard), guard_words(after.guard), Move::neutral);
  out.limit(after, "lower acceptance limit", before.acceptance.lower, after.acceptance.lower, true);
  out.limit(after, "upper acceptance limit", before.acceptance.upper, after.acceptance.upper, false);
  out.number(after.check, "typical value", before.typical, after.typical, Comparison::unit(after), Move::neutral);
}

Move use_move(const CheckRule& before, const CheckRule& after) {
  if (after.use == Use::judged) return Move::tighter;
  return before.use == Use::judged ? Move::looser : Move::neutral;
}

void compare_rules(const CheckRule& before, const CheckRule& after, Comparison& out) {
  if (before.use != after.use)
    return out.add(after.check, "use", std::string{use_words(before)}, std::string{use_words(after)},
                   use_move(before, after));
  if (after.use == Use::judged && !after.must_be_yes) compare_judged(before, after, out);
  if (after.use == Use::watch)
    out.number(after.check, "watch", before.watch_beyond, after.watch_beyond, Comparison::unit(after), Move::neutral);
  out.number(after.check, "temperature", before.at_degC, after.at_degC, "degC", Move::neutral);
}

void compare_checks(const Sheet& before, const Sheet& after, Comparison& out) {
  for (const Check& check : catalogue()) {
    const CheckRule *old_rule = before.find(check.slug), *new_rule = after.find(check.slug);
    const std::string slug{check.slug};
    if (old_rule && new_rule)
      compare_rules(*old_rule, *new_rule, out);
    else if (new_rule)
      out.add(slug, "use", "not named", std::string{use_words(*new_rule)},
              new_rule->use == Use::judged ? Move::tighter : Move::neutral);
    else if (old_rule)
      out.add(slug, "use", std::string{use_words(*old_rule)}, "not named",
              old_rule->use == Use::judged ? Move::looser : Move::neutral);
  }
}

std::string bin_words(const Bin& bin, std::string_view unit) {
  return shortest(bin.lower) + " to " + shown(bin.upper, unit) + ", nominal " + shown(bin.nominal, unit) + ", " +
         shown(bin.resistor_ohm, "ohm");
}

std::vector<std::pair<std::string, std::string>> named_bins(const Sheet& sheet) {
  std::vector<std::pair<std::string, std::string>> named;
  if (!sheet.bins) return named;
  const std::string unit = unit_words(*find_check(sheet.bins->by));
  for (const Bin& bin : sheet.bins->bins) named.emplace_back(bin.name, bin_words(bin, unit));
  return named;
}

void compare_bins(const Sheet& before, const Sheet& after, Comparison& out) {
  const auto olds = named_bins(before), news = named_bins(after);
  const auto find = [](const auto& bins, const std::string& name) {
    const auto found = std::find_if(bins.begin(), bins.end(), [&](const auto& b) { return b.first == name; });
    return found == bins.end() ? std::string{"none"} : found->second;
  };
  out.text("bins", "sorted by", before.bins ? before.bins->by : "none", after.bins ? after.bins->by : "none",
           Move::moved);
  for (const auto& [name, described] : olds) out.text("bin " + name, "bin", described, find(news, name), Move::moved);
  for (const auto& [name, described] : news)
    if (find(olds, name) == "none") out.add("bin " + name, "bin", "none", described, Move::moved);
}

std::string yield_words(const StopWhen& stop) {
  if (!stop.yield_below_percent) return "none";
  return shortest(*stop.yield_below_percent) + " % of last " + std::to_string(stop.of_last);
}

Move yield_move(const StopWhen& before, const StopWhen& after) {
  if (!before.yield_below_percent) return Move::tighter;
  if (!after.yield_below_percent) return Move::looser;
  if (before.of_last != after.of_last) return Move::moved;
  return if_rises(before.yield_below_percent, after.yield_below_percent, Move::tighter);
}

Number as_number(const std::optional<int>& value) { return value ? Number{*value} : Number{}; }

void compare_stop(const StopWhen& before, const StopWhen& after, Comparison& out) {
  if (before.fails_in_a_row != after.fails_in_a_row) {
    const Number old_value = as_number(before.fails_in_a_row), new_value = as_number(after.fails_in_a_row);
    out.add("stop when", "fails in a row", shown(old_value, ""), shown(new_value, ""),
            limit_move(old_value, new_value, false));
  }
  if (yield_words(before) != yield_words(after))
    out.add("stop when", "yield below", yield_words(before), yield_words(after), yield_move(before, after));
}

std::string model_words(const Sheet& sheet) { return sheet.for_model ? "sha256 " + to_hex(*sheet.for_model) : "none"; }

}  // namespace

std::string_view words(Move move) {
  switch (move) {
    case Move::tighter:
      return "tighter";
    case Move::looser:
      return "looser";
    case Move::moved:
      return "moved";
    case Move::neutral:
      break;
  }
  return "judges as before";
}

SheetDifference compare(const Sheet& before, const Sheet& after) {
  SheetDifference difference{title(before), title(after), {}};
  Comparison out{difference.changes};
  compare_checks(before, after, out);
  compare_bins(before, after, out);
  out.number("retest", "tries", before.retest.tries, after.retest.tries, "", Move::looser);
  out.number("retest", "rest", before.retest.after_s, after.retest.after_s, "s", Move::tighter);
  compare_stop(before.stop_when, after.stop_when, out);
  out.text("sheet", "model", before.name, after.name, Move::moved);
  out.text("sheet", "model digest", model_words(before), model_words(after));
  out.text("sheet", "reason", before.reason, after.reason);
  out.text("sheet", "decision", before.decision, after.decision);
  return difference;
}

std::string to_text(const SheetDifference& difference) {
  std::string text = difference.before_title + " to " + difference.after_title + "\n";
  if (difference.changes.empty()) return text + "  no difference\n";
  for (const Change& c : difference.changes)
    text += "  " + c.subject + ", " + c.what + ": " + c.before + " -> " + c.after + ", " + std::string{words(c.move)} +
            "\n";
  const auto count = [&](Move move) {
    return std::to_string(std::count_if(difference.changes.begin(), difference.changes.end(),
                                        [move](const Change& c) { return c.move == move; }));
  };
  return text + count(Move::tighter) + " tighter, " + count(Move::looser) + " looser, " + count(Move::moved) +
         " moved, " + count(Move::neutral) + " that judge as before\n";
}

}  // namespace probewright::limits
