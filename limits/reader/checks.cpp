#include <algorithm>

#include "limits/reader/parts.h"

namespace probewright::limits::reader {
namespace {

const std::vector<std::string>& every_slug() {
  static const std::vector<std::string> slugs = [] {
    std::vector<std::string> all;
    for (const Check& check : catalogue()) all.emplace_back(check.slug);
    return all;
  }();
  return slugs;
}

void unknown_check(const Map::Item& item, Faults& faults) {
  faults.add(item.place, "sheet_unknown_check",
             {{"check", item.key}, {"hint", hint(item.key, every_slug(), "see the list of checks")}});
}

CheckRule bare_rule(const Check& check, Use use) {
  CheckRule rule;
  rule.check = check.slug;
  rule.use = use;
  return rule;
}

std::optional<CheckRule> must_be_yes(const Check& check, const Value& value, Faults& faults) {
  if (check.dimension != Dimension::yes_no) {
    faults.add(value.place(), "sheet_not_a_yes_no_check",
               {{"check", std::string{check.slug}}, {"unit", std::string{check.unit}}});
    return {};
  }
  CheckRule rule = bare_rule(check, Use::judged);
  rule.must_be_yes = true;
  return rule;
}

std::optional<CheckRule> read_word(const Check& check, const Value& value, Faults& faults) {
  const std::string word = as_written(value);
  if (word == "record only") return bare_rule(check, Use::record_only);
  if (word == "must be yes") return must_be_yes(check, value, faults);
  faults.add(value.place(), "sheet_word_unknown",
             {{"check", std::string{check.slug}},
              {"text", word},
              {"hint", hint(word, {"record only", "must be yes"},
                            R"(write "record only", "must be yes" or a map with limits)")}});
  return {};
}

}  // namespace

std::optional<CheckRule> read_rule(const Check& check, yaml::Place key_place, const Value& value, Faults& faults) {
  if (value.is_scalar()) return read_word(check, value, faults);
  auto map = value.map(faults);
  if (!map) return {};
  if (check.dimension == Dimension::yes_no) {
    faults.add(value.place(), "sheet_yes_no_has_limits", {{"check", std::string{check.slug}}});
    return {};
  }
  if (map->maybe("watch")) return read_watched(check, *std::move(map), faults);
  return read_judged(check, key_place, *std::move(map), faults);
}

ReadChecks read_checks(const Value& value, Faults& faults) {
  ReadChecks read;
  auto& rules = read.rules;
  auto map = value.map(faults);
  if (!map) return read;
  bool judges = false;
  for (const Map::Item& item : map->items()) {
    const Check* check = find_check(item.key);
    if (!check) {
      unknown_check(item, faults);
      read.named.push_back(
          yaml::nearest_word(item.key, every_slug()));  // what was meant, so that nothing else complains
      judges = true;                                    // it may have been the judged one; one fault is enough
      continue;
    }
    read.named.push_back(item.key);
    auto rule = read_rule(*check, item.place, item.value, faults);
    judges = judges || !rule || rule->use == Use::judged;
    if (rule) rules.push_back(*std::move(rule));
  }
  if (!judges) faults.add(value.place(), "sheet_judges_nothing");
  std::sort(rules.begin(), rules.end(),
            [](const CheckRule& a, const CheckRule& b) { return check_index(a.check) < check_index(b.check); });
  return read;
}

}  // namespace probewright::limits::reader
