#include "drivers/emulated/scenario.h"

#include <algorithm>
#include <array>

#include "station/base/files.h"
#include "station/base/numbers.h"
#include "station/base/strict_yaml.h"

namespace probewright::emulated {
namespace {

using enum BenchFault;

/// What a fault can be told besides where: which keys it has.
struct Row {
  BenchFault fault;
  std::string_view slug;
  enum class Where { line, talk, device, adapter_capture, nest, phantom_nest, room } where;
  bool lasts;  ///< has a length (`for`)
};
using enum Row::Where;

constexpr std::array rows = std::to_array<Row>({
    {byte_lost, "byte_lost", line, false},
    {byte_changed, "byte_changed", line, false},
    {byte_doubled, "byte_doubled", line, false},
    {bytes_paused, "bytes_paused", line, false},
    {bytes_split, "bytes_split", line, false},
    {noise_bytes, "noise_bytes", line, false},
    {reply_late, "reply_late", talk, false},
    {reply_missing, "reply_missing", talk, false},
    {restart, "restart", device, false},
    {restart_in_capture, "restart_in_capture", device, false},
    {cable_pulled, "cable_pulled", device, true},
    {wrong_certificate, "wrong_certificate", device, true},
    {lid_opened, "lid_opened", nest, true},
    {band_drift, "band_drift", nest, true},
    {set_point_error, "set_point_error", nest, true},
    {gain_error, "gain_error", nest, true},
    {wrong_temperature, "wrong_temperature", nest, true},
    {mains_flicker, "mains_flicker", nest, true},
    {warm_room, "warm_room", room, true},
});

constexpr auto faults_in_order = [] {
  std::array<BenchFault, rows.size()> faults{};
  for (std::size_t i = 0; i < rows.size(); ++i) faults[i] = rows[i].fault;
  return faults;
}();

const Row& row_of(BenchFault fault) { return rows[static_cast<std::size_t>(fault)]; }

/// Reads the map of one fault.
class FaultReader {
 public:
  FaultReader(yaml::Map map, const Row& row, yaml::Faults& faults) : map_(std::move(map)), row_(row), faults_(faults) {}

  ScenarioFault read() {
    fault_.fault = row_.fault;
    read_where();
    read_when();
    read_size();
    map_.finish(faults_);
    return fault_;
  }

 private:
  void read_where() {
    if (row_.where == room) return;
    const bool of_device = row_.where != nest;
    if (auto value = map_.maybe("nest")) fault_.nest = number_of_nest(*value);
    if (!of_device) return;
    if (auto value = map_.maybe("device")) read_device(*value);
    if (row_.where != line) return;
    auto way = map_.maybe("way");
    if (!way) return;
    const auto word = way->text(faults_);
    if (word == "to") fault_.way = Way::to_device;
    if (word == "from") fault_.way = Way::from_device;
    if (word && !fault_.way) bound(*way, "to (the device) or from (it)");
  }

  std::optional<int> number_of_nest(const yaml::Value& value) {
    const auto number = value.integer(faults_);
    if (!number) return std::nullopt;
    if (*number >= 1 && *number <= 16) return static_cast<int>(*number);
    bound(value, "1 to 16");
    return std::nullopt;
  }

  /// "nest1-phantom", or "phantom" of whatever nest is named beside it.
  void read_device(const yaml::Value& value) {
    const auto word = value.text(faults_);
    if (!word) return;
    if (*word == "phantom") {
      fault_.device = DeviceKind::phantom;
    } else if (*word == "adapter") {
      fault_.device = DeviceKind::adapter;
    } else if (const auto id = parse_device(*word); id && !fault_.nest) {
      fault_.nest = id->nest;
      fault_.device = id->kind;
    } else {
      faults_.add(value.place(), "scenario_device", {{"text", *word}});
    }
  }

  void read_when() {
    const bool bytes = row_.where == line && row_.fault != bytes_split && row_.fault != noise_bytes;
    const bool messages = row_.fault == bytes_split || row_.fault == noise_bytes || row_.where == talk;
    quantity("at", "s", 0.0, 1e7, fault_.at_s);
    if (bytes) rate("per_byte", 1.0, fault_.per_byte);
    if (messages) rate("per_reply", 1.0, fault_.per_reply);
    if (row_.where == device || row_.where == nest) rate("per_minute", 600.0, fault_.per_minute);
    const bool at_a_rate = fault_.per_byte + fault_.per_reply + fault_.per_minute > 0.0;
    if (at_a_rate) quantity("until", "s", fault_.at_s, 1e7, fault_.until_s);
    if (!at_a_rate && (bytes || messages)) whole("count", 1, 10000, fault_.count);
    if (!row_.lasts) return;
    double length_s = -1.0;
    quantity("for", "s", 0.001, 1e7, length_s);
    if (length_s > 0.0) fault_.for_s = length_s;
    if (fault_.per_minute > 0.0 && !fault_.for_s) faults_.add(map_.place(), "scenario_when");
  }

  void read_size() {
    switch (row_.fault) {
      case bytes_paused:
        return needed("by", "s", 0.0, 60.0, fault_.by_s);
      case bytes_split:
        fault_.by_s = 0.001;
        return quantity("by", "s", 0.0, 60.0, fault_.by_s);
      case noise_bytes:
        return whole("bytes", 1, 4096, fault_.bytes);
      case reply_late:
        return needed("by", "s", 0.0, 60.0, fault_.by_s);
      case restart_in_capture:
        fault_.by_s = 0.1;
        return quantity("after", "s", 0.0, 60.0, fault_.by_s);
      case wrong_certificate:
        if (auto value = map_.maybe("number")) fault_.certificate = value->text(faults_).value_or("");
        return;
      case band_drift:
      case set_point_error:
        percent("red", -50.0, 50.0, fault_.red);
        percent("infrared", -50.0, 50.0, fault_.infrared);
        return quantity("over", "s", 0.0, 1e6, fault_.over_s);
      case gain_error:
        need("by");
        percent("by", -50.0, 50.0, fault_.gain);
        return quantity("over", "s", 0.0, 1e6, fault_.over_s);
      case wrong_temperature:
        needed("by", "K", -30.0, 30.0, fault_.shown_K);
        return quantity("over", "s", 0.0, 1e6, fault_.over_s);
      case warm_room:
        needed("to", "degC", -20.0, 80.0, fault_.room_degC);
        return quantity("over", "s", 0.0, 1e6, fault_.over_s);
      case mains_flicker:
        return read_flicker();
      default:
        return;
    }
  }

  void read_flicker() {
    need("level");
    percent("level", 0.0, 1000.0, fault_.level);
    percent("depth", 0.0, 100.0, fault_.depth);
    auto harmonics = map_.maybe("harmonics");
    if (!harmonics) return;
    const auto list = harmonics->list(faults_);
    if (!list) return;
    for (const yaml::Value& value : list->items()) fault_.harmonics.push_back(share(value, 0.0, 100.0).value_or(0.0));
    if (fault_.harmonics.size() > 20) bound(*harmonics, "at most 20 of them");
  }

  void need(std::string_view key) { static_cast<void>(map_.need(key, faults_)); }

  void quantity(std::string_view key, std::string_view unit, double least, double most, double& into) {
    auto value = map_.maybe(key);
    if (!value) return;
    const auto found = value->quantity(unit, faults_);
    if (!found) return;
    if (*found >= least && *found <= most) {
      into = *found;
    } else {
      bound(*value, shortest(least) + " to " + shortest(most) + " " + std::string(unit));
    }
  }
  void needed(std::string_view key, std::string_view unit, double least, double most, double& into) {
    need(key);
    quantity(key, unit, least, most, into);
  }

  std::optional<double> share(const yaml::Value& value, double least, double most) {
    const auto found = value.quantity("%", faults_);
    if (!found) return std::nullopt;
    if (*found >= least && *found <= most) return 0.01 * *found;
    bound(value, shortest(least) + " to " + shortest(most) + " %");
    return std::nullopt;
  }
  void percent(std::string_view key, double least, double most, double& into) {
    if (auto value = map_.maybe(key)) into = share(*value, least, most).value_or(into);
  }

  void rate(std::string_view key, double most, double& into) {
    auto value = map_.maybe(key);
    if (!value) return;
    const auto found = value->number(faults_);
    if (!found) return;
    if (*found >= 0.0 && *found <= most) {
      into = *found;
    } else {
      bound(*value, "0 to " + shortest(most));
    }
  }

  void whole(std::string_view key, long long least, long long most, int& into) {
    auto value = map_.maybe(key);
    if (!value) return;
    const auto found = value->integer(faults_);
    if (!found) return;
    if (*found >= least && *found <= most) {
      into = static_cast<int>(*found);
    } else {
      bound(*value, std::to_string(least) + " to " + std::to_string(most));
    }
  }

  void bound(const yaml::Value& value, const std::string& wanted) {
    faults_.add(value.place(), "scenario_bound", {{"wanted", wanted}});
  }

  yaml::Map map_;
  const Row& row_;
  yaml::Faults& faults_;
  ScenarioFault fault_;
};

const Row* find_row(std::string_view slug) {
  const auto found = std::find_if(rows.begin(), rows.end(), [slug](const Row& row) { return row.slug == slug; });
  return found == rows.end() ? nullptr : &*found;
}

/// A map of one fault's name to what is said of it; nothing said is an empty map.
std::optional<ScenarioFault> read_fault(const yaml::Value& value, yaml::Faults& faults) {
  auto named = value.map(faults);
  if (!named) return std::nullopt;
  const auto items = named->items();
  if (items.size() != 1) {
    faults.add(value.place(), "scenario_one_fault");
    return std::nullopt;
  }
  const auto& [slug, place, body] = items.front();
  const Row* row = find_row(slug);
  if (row == nullptr) {
    std::vector<std::string> words;
    for (const Row& known : rows) words.emplace_back(known.slug);
    const std::string near = yaml::nearest_word(slug, words);
    faults.add(place, "scenario_unknown_fault",
               {{"fault", slug}, {"faults", near.empty() ? known_bench_faults() : near}});
    return std::nullopt;
  }
  auto map = body.map(faults);
  if (!map) return std::nullopt;
  return FaultReader{*std::move(map), *row, faults}.read();
}

}  // namespace

std::span<const BenchFault> all_bench_faults() { return faults_in_order; }

std::string_view slug_of(BenchFault fault) { return row_of(fault).slug; }

std::string known_bench_faults() {
  std::string all;
  for (const Row& row : rows) all += (all.empty() ? "" : ", ") + std::string(row.slug);
  return all;
}

ResultOrFaults<Scenario> read_scenario(std::string_view text, std::string_view file) {
  yaml::Faults faults{std::string{file}};
  Scenario scenario;
  auto document = yaml::Document::read(text, faults);
  if (!document) return faults.take();
  if (auto map = document->root().map(faults)) {
    if (auto name = map->need("scenario", faults)) scenario.name = name->text(faults).value_or("");
    if (auto seed = map->maybe("seed")) {
      const auto number = seed->integer(faults);
      if (number && *number >= 0) scenario.seed = static_cast<std::uint64_t>(*number);
      if (number && *number < 0) faults.add(seed->place(), "scenario_bound", {{"wanted", "0 or more"}});
    }
    if (auto value = map->need("faults", faults)) {
      if (const auto list = value->list(faults)) {
        for (const yaml::Value& item : list->items()) {
          if (auto fault = read_fault(item, faults)) scenario.faults.push_back(*std::move(fault));
        }
      }
    }
    map->finish(faults);
  }
  if (!faults.empty()) return faults.take();
  return scenario;
}

ResultOrFaults<Scenario> read_scenario_file(const std::string& path) {
  const auto text = read_file(path, yaml::Document::max_bytes);
  if (!text) return Problems{text.error()};
  return read_scenario(*text, path);
}

ResultOrFaults<ScenarioFault> read_scenario_fault(std::string_view text) {
  yaml::Faults faults{""};
  std::optional<ScenarioFault> fault;
  if (auto document = yaml::Document::read(text, faults)) fault = read_fault(document->root(), faults);
  if (!faults.empty()) return faults.take();
  return *fault;
}

}  // namespace probewright::emulated
