#include <algorithm>

#include "limits/diagnosis/reader_parts.h"
#include "station/base/catalogue.h"

namespace probewright::limits::diagnosis {
namespace {

using namespace reader;

int read_revision(Map& map, Faults& faults) {
  const auto value = map.need("revision", faults);
  const auto number = value ? value->integer(faults) : std::nullopt;
  if (!number) return 0;
  return static_cast<int>(bounded(*value, "revision", 1.0, 1e6, faults));
}

double need_share(Map& map, std::string_view key, Faults& faults) {
  const auto value = map.need(key, faults);
  return value ? share(*value, key, faults) : 0.0;
}

/// The shares, and how well figures are known where a cause does not say.
Method read_method(const Value& value, double& within, Faults& faults) {
  Method method;
  auto map = value.map(faults);
  if (!map) return method;
  within = need_share(*map, "figures hold within", faults);
  method.stray_reading = need_share(*map, "stray reading", faults);
  method.second_fault = need_share(*map, "second fault", faults);
  method.unknown_fault = need_share(*map, "unknown fault", faults);
  method.unknown_moves = need_share(*map, "unknown moves", faults);
  map->finish(faults);
  return method;
}

const std::vector<std::string>& every_check() {
  static const std::vector<std::string> slugs = [] {
    std::vector<std::string> all;
    for (const Check& check : catalogue()) all.emplace_back(check.slug);
    return all;
  }();
  return slugs;
}

/// A scale of its own: both numbers, in the check's unit.
std::optional<UsedCheck::Scale> read_scale(Map& map, const Check& check, Faults& faults) {
  const auto typical = map.maybe("typical"), tolerance = map.maybe("tolerance");
  if (!typical && !tolerance) return {};
  if (!typical || !tolerance) {
    faults.add(map.place(), "rules_half_a_scale", {{"check", std::string{check.slug}}});
    return {};
  }
  const auto middle = typical->quantity(check.unit, faults), width = tolerance->quantity(check.unit, faults);
  if (!middle || !width) return {};
  if (!(*width > 0.0)) faults.add(tolerance->place(), "rules_tolerance", {{"check", std::string{check.slug}}});
  return UsedCheck::Scale{*middle, *width};
}

UsedCheck read_used(const Map::Item& item, std::size_t stage, Faults& faults) {
  constexpr double most_usual = 100.0, least_spread = 1e-4;
  UsedCheck used;
  used.check = item.key, used.stage = stage;
  const Check* check = find_check(item.key);
  if (!check)
    faults.add(item.place, "rules_unknown_check", {{"text", item.key}, {"hint", hint(item.key, every_check())}});
  auto map = item.value.map(faults);
  if (!map) return used;
  if (const auto value = map->need("usual", faults))
    used.usual = bounded(*value, "usual", -most_usual, most_usual, faults);
  if (const auto value = map->need("spread", faults))
    used.spread = bounded(*value, "spread", least_spread, most_usual, faults);
  if (const auto value = map->maybe("weight")) used.weight = bounded(*value, "weight", 0.01, 1.0, faults);
  if (check)
    used.scale = read_scale(*map, *check, faults);
  else  // in which unit is not known
    static_cast<void>(map->maybe("typical")), static_cast<void>(map->maybe("tolerance"));
  map->finish(faults);
  return used;
}

void read_stage(const Map::Item& item, Rules& rules, Faults& faults) {
  const std::size_t stage = rules.stages.size();
  rules.stages.push_back(item.key);
  auto map = item.value.map(faults);
  if (!map) return;
  for (const Map::Item& one : map->items()) {
    if (const UsedCheck* first = rules.check(one.key))
      faults.add(one.place, "rules_check_twice", {{"check", one.key}, {"stage", rules.stages[first->stage]}});
    rules.checks.push_back(read_used(one, stage, faults));
  }
}

Names names_of(const Rules& rules, const std::vector<Map::Item>& causes) {
  Names names;
  for (const UsedCheck& used : rules.checks) names.checks.push_back(used.check);
  names.stages = rules.stages;
  for (const Map::Item& cause : causes) names.causes.push_back(cause.key);
  return names;
}

void read_causes(const Value& value, double within, Rules& rules, Faults& faults) {
  auto map = value.map(faults);
  if (!map) return;
  const auto items = map->items();
  const Names names = names_of(rules, items);
  for (const Map::Item& item : items) rules.causes.push_back(read_cause(item, names, within, faults));
  if (items.empty()) faults.add(value.place(), "rules_no_cause");
}

void read_body(Map& map, Rules& rules, Faults& faults) {
  double within = 0.2;
  if (const auto method = map.need("method", faults)) rules.method = read_method(*method, within, faults);
  if (const auto stages = map.need("stages", faults))
    if (auto each = stages->map(faults))
      for (const Map::Item& item : each->items()) read_stage(item, rules, faults);
  if (const auto causes = map.need("causes", faults)) read_causes(*causes, within, rules, faults);
}

}  // namespace

const Cause* Rules::find(std::string_view slug) const {
  const auto found = std::find_if(causes.begin(), causes.end(), [slug](const Cause& c) { return c.slug == slug; });
  return found == causes.end() ? nullptr : &*found;
}

const UsedCheck* Rules::check(std::string_view slug) const {
  const auto found = std::find_if(checks.begin(), checks.end(), [slug](const UsedCheck& u) { return u.check == slug; });
  return found == checks.end() ? nullptr : &*found;
}

ResultOrFaults<Rules> read_rules(std::string_view text, std::string_view file) {
  Faults faults{std::string{file}};
  Rules rules;
  rules.file = file;
  const auto document = yaml::Document::read(text, faults);
  if (!document) return faults.take();
  if (auto map = document->root().map(faults)) {
    rules.name = need_text(*map, "diagnosis", faults);
    rules.revision = read_revision(*map, faults);
    rules.reason = need_text(*map, "reason", faults);
    read_body(*map, rules, faults);
    map->finish(faults);
  }
  if (!faults.empty()) return faults.take();
  return rules;
}

}  // namespace probewright::limits::diagnosis
