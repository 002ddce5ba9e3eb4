// How a tree is read: by name and kind, telling every fault.
#include "station/base/strict_yaml.h"

#include <algorithm>

#include "station/base/numbers.h"
#include "station/base/strict_yaml_node.h"
#include "station/base/words.h"

namespace probewright::yaml {

void Faults::add(Place place, std::string_view id,
                 std::initializer_list<std::pair<std::string, std::string>> arguments) {
  problems_.emplace_back(place, Problem{id, at(place), arguments});
}

void Faults::add(Place place, Problem problem) {
  problem.where = at(place);
  problems_.emplace_back(place, std::move(problem));
}

Problems Faults::take() {
  std::stable_sort(problems_.begin(), problems_.end(), [](const auto& a, const auto& b) {
    return std::pair{a.first.line, a.first.column} < std::pair{b.first.line, b.first.column};
  });
  Problems sorted;
  for (auto& [place, problem] : problems_) sorted.push_back(std::move(problem));
  problems_.clear();
  return sorted;
}

std::string Faults::at(Place place) const {
  return file_ + ":" + std::to_string(place.line) + ":" + std::to_string(place.column);
}

Place Value::place() const { return node_->place; }
bool Value::is_map() const { return node_->kind == Node::Kind::map; }
bool Value::is_list() const { return node_->kind == Node::Kind::list; }
bool Value::is_scalar() const { return node_->kind == Node::Kind::scalar; }

std::string_view Value::kind_in_words() const {
  switch (node_->kind) {
    case Node::Kind::null:
      return "nothing";
    case Node::Kind::scalar:
      return "a single value";
    case Node::Kind::list:
      return "a list";
    case Node::Kind::map:
      return "a map of keys";
    case Node::Kind::refused:
      break;
  }
  return "an alias";
}

void Value::tell_wrong_kind(std::string_view wanted, Faults& faults) const {
  if (node_->kind == Node::Kind::refused) return;  // told when it was read
  faults.add(place(), "yaml_wrong_kind", {{"wanted", std::string{wanted}}, {"found", std::string{kind_in_words()}}});
}

std::optional<std::string> Value::text(Faults& faults) const {
  if (is_scalar()) return node_->text;
  tell_wrong_kind("a single value", faults);
  return std::nullopt;
}

std::optional<double> Value::number(Faults& faults) const {
  const auto written = text(faults);
  if (!written) return std::nullopt;
  const auto quantity = parse_quantity(*written);  // it tells an infinite number from a malformed one
  if (quantity && quantity->unit.empty()) return quantity->value;
  faults.add(place(), quantity || quantity.error().id == "unit_unknown"
                          ? Problem{"number_malformed", "", {{"text", *written}}}
                          : quantity.error());
  return std::nullopt;
}

std::optional<long long> Value::integer(Faults& faults) const {
  const auto written = text(faults);
  if (!written) return std::nullopt;
  const auto value = parse_integer(*written);
  if (!value) faults.add(place(), "integer_malformed", {{"text", *written}});
  return value;
}

std::optional<bool> Value::yes_no(Faults& faults) const {
  const auto written = text(faults);
  if (!written) return std::nullopt;
  if (*written == "yes" || *written == "true") return true;
  if (*written == "no" || *written == "false") return false;
  faults.add(place(), "yaml_not_yes_no", {{"text", *written}});
  return std::nullopt;
}

std::optional<double> Value::quantity(std::string_view unit, Faults& faults) const {
  const auto written = text(faults);
  if (!written) return std::nullopt;
  const auto quantity = parse_quantity(*written);
  const auto value = quantity ? in_unit(*quantity, unit) : Result<double>{quantity.error()};
  if (value) return *value;
  faults.add(place(), value.error());
  return std::nullopt;
}

std::optional<Map> Value::map(Faults& faults) const {
  if (is_map()) return Map{node_};
  tell_wrong_kind("a map of keys", faults);
  return std::nullopt;
}

std::optional<List> Value::list(Faults& faults) const {
  if (is_list()) return List{node_};
  tell_wrong_kind("a list", faults);
  return std::nullopt;
}

Place Map::place() const { return node_->place; }

std::optional<Value> Map::need(std::string_view key, Faults& faults) {
  auto value = maybe(key);
  if (!value) faults.add(place(), "yaml_missing_key", {{"key", std::string{key}}});
  return value;
}

std::optional<Value> Map::maybe(std::string_view key) {
  asked_.emplace_back(key);
  const auto found = node_->index.find(key);
  if (found == node_->index.end()) return std::nullopt;
  return Value{node_->children[found->second].get()};
}

std::vector<Map::Item> Map::items() {
  std::vector<Item> all;
  for (std::size_t i = 0; i < node_->keys.size(); ++i) {
    all.push_back({node_->keys[i].text, node_->keys[i].place, Value{node_->children[i].get()}});
    asked_.push_back(node_->keys[i].text);
  }
  return all;
}

void Map::finish(Faults& faults) {
  std::sort(asked_.begin(), asked_.end());
  for (const Value::Node::Key& key : node_->keys) {
    if (std::binary_search(asked_.begin(), asked_.end(), key.text)) continue;
    const std::string nearest = nearest_word(key.text, asked_);
    if (nearest.empty())
      faults.add(key.place, "yaml_unknown_key", {{"key", key.text}});
    else
      faults.add(key.place, "yaml_unknown_key_near", {{"key", key.text}, {"nearest", nearest}});
  }
}

std::vector<Value> List::items() const {
  std::vector<Value> all;
  for (const auto& child : node_->children) all.push_back(Value{child.get()});
  return all;
}

std::string nearest_word(std::string_view word, const std::vector<std::string>& words) {
  const std::size_t bound = word.size() / 3;
  std::size_t best = bound + 1;
  std::string nearest;
  for (const std::string& candidate : words) {
    const std::size_t difference =
        candidate.size() > word.size() ? candidate.size() - word.size() : word.size() - candidate.size();
    if (difference >= best) continue;  // cannot win: spares the long comparison
    if (const std::size_t distance = edit_distance(word, candidate); distance < best)
      best = distance, nearest = candidate;
  }
  return nearest;
}

}  // namespace probewright::yaml
