#include <algorithm>
#include <cmath>
#include <regex>
#include <set>

#include "station/base/catalogue.h"
#include "station/base/numbers.h"
#include "station/base/strict_yaml.h"
#include "station/measure/document_fields.h"
#include "station/measure/evaluate.h"
#include "station/measure/model.h"
#include "station/measure/saturation_reader.h"

namespace probewright::measure {
namespace {

using fields::Range;
constexpr std::string_view out_of_range = "model_out_of_range";

/// Digits with weights 3, 1, 3, 1 ... from the one before the last; the last makes the sum a multiple of ten
/// (GS1 General Specifications, "Check digit calculations").
bool is_gtin(std::string_view text) {
  const std::size_t n = text.size();
  if (n != 8 && (n < 12 || n > 14)) return false;
  int sum = 0;
  for (std::size_t i = 0; i < n; ++i) {
    if (text[i] < '0' || text[i] > '9') return false;
    sum += (text[i] - '0') * ((n - i) % 2 == 0 ? 3 : 1);
  }
  return sum % 10 == 0;
}

void read_gtin(yaml::Map& map, Model& model, yaml::Faults& faults) {
  const auto gtin = fields::maybe_text(map, "gtin", faults);
  if (!gtin) return;
  model.gtin = *gtin;
  if (!is_gtin(model.gtin)) faults.add(fields::place_of(map, "gtin"), "model_bad_gtin", {{"gtin", model.gtin}});
}

void read_head(yaml::Map& map, Model& model, yaml::Faults& faults) {
  model.name = fields::text(map, "model", faults);
  model.revision = static_cast<int>(fields::integer(map, "revision", {1, 1e6}, out_of_range, faults));
  model.reason = fields::text(map, "reason", faults);
  model.description = fields::text(map, "description", faults);
  model.serial_pattern = fields::text(map, "serial pattern", faults);
  try {
    const std::regex pattern{model.serial_pattern};
    if (model.serial_pattern.size() > 200) throw std::regex_error{std::regex_constants::error_complexity};
  } catch (const std::regex_error&) {
    faults.add(fields::place_of(map, "serial pattern"), "model_bad_pattern", {{"pattern", model.serial_pattern}});
  }
  read_gtin(map, model, faults);
}

Wiring read_wiring(yaml::Map& map, yaml::Faults& faults) {
  const std::string word = fields::text(map, "wiring", faults);
  if (word.empty() || word == "separate") return Wiring::separate;
  if (word == "common") return Wiring::common;
  if (word == "antiparallel") return Wiring::antiparallel;
  faults.add(fields::place_of(map, "wiring"), "model_unknown_word",
             {{"key", "wiring"}, {"word", word}, {"words", "separate, common, antiparallel"}});
  return Wiring::separate;
}

void read_led(yaml::Map& leds, Band band, Model& model, yaml::Faults& faults) {
  auto map = fields::map(leds, slug(band), faults);
  if (!map) return;
  model.drive_mA.of(band) = fields::quantity(*map, "drive", "mA", {0.1, 50.0}, out_of_range, faults);
  model.quarter_drive_mA.of(band) = model.drive_mA.of(band) / 4.0;
  if (model.drive_mA.of(band) > model.ceiling_mA)
    faults.add(fields::place_of(*map, "drive"), "model_drive_above_ceiling",
               {{"drive", shortest(model.drive_mA.of(band))}, {"ceiling", shortest(model.ceiling_mA)}});
  map->finish(faults);
}

void read_leds(yaml::Map& map, Model& model, yaml::Faults& faults) {
  auto leds = fields::map(map, "leds", faults);
  if (!leds) return;
  model.wiring = read_wiring(*leds, faults);
  model.ceiling_mA = fields::quantity(*leds, "ceiling", "mA", {0.1, 50.0}, out_of_range, faults);
  read_led(*leds, Band::red, model, faults);
  read_led(*leds, Band::infrared, model, faults);
  model.slot_s = fields::quantity(*leds, "slot", "s", {100e-6, 2e-3}, out_of_range, faults);
  model.warmup_s = fields::quantity(*leds, "warm-up", "s", {0.0, 60.0}, out_of_range, faults);
  model.pulses_after_s = model.warmup_s;
  if (const auto after = leds->maybe("pulses after")) {
    model.pulses_after_s = after->quantity("s", faults).value_or(model.warmup_s);
    if (!(model.pulses_after_s >= 0.0) || model.pulses_after_s > model.warmup_s)
      faults.add(after->place(), out_of_range,
                 {{"key", "pulses after"},
                  {"value", shortest(model.pulses_after_s)},
                  {"least", "0"},
                  {"most", "the warm-up, " + shortest(model.warmup_s)}});
  }
  model.reverse_bias_V = fields::quantity(*leds, "reverse bias", "V", {0.0, 5.0}, out_of_range, faults);
  leds->finish(faults);
}

void read_set_points(yaml::Map& map, Model& model, yaml::Faults& faults) {
  const auto list = fields::list(map, "set points", faults);
  if (!list) return;
  for (const yaml::Value& item : list->items()) {
    auto entry = item.map(faults);
    if (!entry) continue;
    SetPoint point;
    point.ratio = fields::number(*entry, "ratio", {0.1, 4.0}, out_of_range, faults);
    point.depth.red = fields::quantity(*entry, "red", "%", {0.05, 10.0}, out_of_range, faults) / 100.0;
    point.depth.infrared = fields::quantity(*entry, "infrared", "%", {0.05, 10.0}, out_of_range, faults) / 100.0;
    entry->finish(faults);
    if (std::abs(point.depth.red / point.depth.infrared - point.ratio) > 1e-6)
      faults.add(item.place(), "model_set_point_ratio",
                 {{"ratio", shortest(point.ratio)}, {"quotient", fixed(point.depth.red / point.depth.infrared, 4)}});
    if (!model.set_points.empty() && point.ratio <= model.set_points.back().ratio)
      faults.add(item.place(), "model_not_rising", {{"what", "set points"}});
    model.set_points.push_back(point);
  }
}

void read_modulator(yaml::Map& map, Model& model, yaml::Faults& faults) {
  auto part = fields::map(map, "modulator", faults);
  if (!part) return;
  model.modulator_Hz = fields::number(*part, "rate_Hz", {0.5, 10.0}, out_of_range, faults);
  model.pulse_capture_s = fields::quantity(*part, "capture", "s", {0.2, 60.0}, out_of_range, faults);
  if (model.modulator_Hz * model.pulse_capture_s < 2.0)
    faults.add(fields::place_of(*part, "capture"), "model_capture_short",
               {{"periods", fixed(model.modulator_Hz * model.pulse_capture_s, 2)}});
  read_set_points(*part, model, faults);
  part->finish(faults);
}

void read_spectrometer(yaml::Map& map, Model& model, yaml::Faults& faults) {
  auto part = fields::map(map, "spectrometer", faults);
  if (!part) return;
  constexpr Range exposure{0.001, 2.0};
  model.exposure_min_s = fields::quantity(*part, "shortest exposure", "s", exposure, out_of_range, faults);
  model.exposure_max_s = fields::quantity(*part, "longest exposure", "s", exposure, out_of_range, faults);
  const Range between{std::min(model.exposure_min_s, model.exposure_max_s), model.exposure_max_s};
  model.exposure_start_s = fields::quantity(*part, "first exposure", "s", between, out_of_range, faults);
  model.exposure_target = fields::quantity(*part, "target", "%", {15.0, 85.0}, out_of_range, faults) / 100.0;
  model.frames = static_cast<int>(fields::integer(*part, "frames", {1, 64}, out_of_range, faults));
  part->finish(faults);
}

void read_adapter_times(yaml::Map& map, Model& model, yaml::Faults& faults) {
  if (auto part = fields::map(map, "dark current", faults)) {
    model.dark_bias_V = fields::quantity(*part, "bias", "V", {0.0, 5.0}, out_of_range, faults);
    model.dark_time_s = fields::quantity(*part, "averaged", "s", {0.02, 1.0}, out_of_range, faults);
    part->finish(faults);
  }
  if (auto part = fields::map(map, "mains pick-up", faults)) {
    model.mains_time_s = fields::quantity(*part, "averaged", "s", {0.02, 1.0}, out_of_range, faults);
    part->finish(faults);
  }
}

void read_bins(yaml::Map& id, Model& model, yaml::Faults& faults) {
  constexpr double least_apart = 1.15;
  auto bins = fields::map(id, "bins", faults);
  if (!bins) return;
  for (const auto& item : bins->items()) {
    auto map = item.value.map(faults);
    if (!map) continue;
    Bin bin{item.key, 0.0, {}};
    bin.coded_ohm = fields::quantity(*map, "resistor", "ohm", {10.0, 1e6}, out_of_range, faults);
    bin.nominal_nm.red = fields::quantity(*map, "red", "nm", {605.0, 785.0}, out_of_range, faults);
    bin.nominal_nm.infrared = fields::quantity(*map, "infrared", "nm", {800.0, 1045.0}, out_of_range, faults);
    map->finish(faults);
    if (!model.bins.empty()) {
      const Bin& before = model.bins.back();
      if (bin.coded_ohm <= before.coded_ohm)
        faults.add(item.place, "model_not_rising", {{"what", "coded resistances of the bins"}});
      else if (bin.coded_ohm < least_apart * before.coded_ohm)
        faults.add(item.place, "model_bins_too_close",
                   {{"bin", bin.name},
                    {"other", before.name},
                    {"percent", fixed(100.0 * (bin.coded_ohm / before.coded_ohm - 1.0), 1)}});
    }
    model.bins.push_back(bin);
  }
}

void read_id(yaml::Map& map, Model& model, yaml::Faults& faults) {
  auto id = fields::map(map, "id", faults);
  if (!id) return;
  if (const std::string kind = fields::text(*id, "kind", faults); !kind.empty() && kind != "resistor")
    faults.add(fields::place_of(*id, "kind"), "model_id_kind", {{"kind", kind}});
  read_bins(*id, model, faults);
  id->finish(faults);
}

/// "centroid: {nm_per_K: 0.14, u: 0.015}"; `times` brings the file's unit to the field's.
void read_coefficient(yaml::Map& band, std::string_view key, std::string_view unit_key, double times, double& value,
                      double& u, yaml::Faults& faults) {
  auto map = fields::map(band, key, faults);
  if (!map) return;
  value = times * fields::number(*map, unit_key, {-20.0, 20.0}, out_of_range, faults);
  u = times * fields::number(*map, "u", {0.0, 20.0}, out_of_range, faults);
  map->finish(faults);
}

void read_temperature(yaml::Map& map, Model& model, yaml::Faults& faults) {
  auto part = fields::map(map, "temperature", faults);
  if (!part) return;
  TemperatureModel& t = model.temperature;
  t.temperature_u_K = fields::quantity(*part, "u", "K", {0.0, 10.0}, out_of_range, faults);
  for (const Band band : {Band::red, Band::infrared}) {
    auto lines = fields::map(*part, slug(band), faults);
    if (!lines) continue;
    read_coefficient(*lines, "centroid", "nm_per_K", 1.0, t.centroid_nm_per_K.of(band), t.centroid_nm_per_K_u.of(band),
                     faults);
    read_coefficient(*lines, "width", "nm_per_K", 1.0, t.width_nm_per_K.of(band), t.width_nm_per_K_u.of(band), faults);
    read_coefficient(*lines, "voltage", "mV_per_K", 1e-3, t.voltage_V_per_K.of(band), t.voltage_V_per_K_u.of(band),
                     faults);
    read_coefficient(*lines, "light", "percent_per_K", 1.0, t.light_percent_per_K.of(band),
                     t.light_percent_per_K_u.of(band), faults);
    lines->finish(faults);
  }
  if (auto dark = fields::map(*part, "dark current", faults)) {
    t.dark_doubling_K = fields::number(*dark, "doubling_K", {3.0, 30.0}, out_of_range, faults);
    t.dark_doubling_K_u = fields::number(*dark, "u", {0.0, 10.0}, out_of_range, faults);
    dark->finish(faults);
  }
  part->finish(faults);
}

/// The check that a slug names and that evaluate() can make, or a fault.
/// The section under a key that may be left out.
std::optional<yaml::Map> maybe_map(yaml::Map& map, std::string_view key, yaml::Faults& faults) {
  const auto value = map.maybe(key);
  return value ? value->map(faults) : std::nullopt;
}

/// What only some checks need.
void read_optional_sections(yaml::Map& map, Model& model, yaml::Faults& faults) {
  if (auto part = maybe_map(map, "ambient light", faults)) {
    AmbientPlan plan;
    plan.lamp_level = fields::quantity(*part, "lamp", "%", {1.0, 100.0}, out_of_range, faults) / 100.0;
    plan.flicker_Hz = fields::number(*part, "flicker_Hz", {0.0, 120.0}, out_of_range, faults);
    if (plan.flicker_Hz != 0.0 && plan.flicker_Hz != 100.0 && plan.flicker_Hz != 120.0)
      faults.add(fields::place_of(*part, "flicker_Hz"), "model_unknown_word",
                 {{"key", "flicker_Hz"}, {"word", shortest(plan.flicker_Hz)}, {"words", "0, 100, 120"}});
    plan.capture_s = fields::quantity(*part, "capture", "s", {0.05, 10.0}, out_of_range, faults);
    part->finish(faults);
    model.ambient = plan;
  }
  if (auto part = maybe_map(map, "closed path", faults)) {
    model.closed_path = ClosedPathPlan{fields::quantity(*part, "capture", "s", {0.05, 10.0}, out_of_range, faults)};
    part->finish(faults);
  }
  if (auto part = maybe_map(map, "cross-talk", faults)) {
    model.alone_slots = AloneSlotsPlan{fields::quantity(*part, "capture", "s", {0.05, 10.0}, out_of_range, faults)};
    part->finish(faults);
  }
  if (auto part = maybe_map(map, "saturation", faults)) model.saturation = read_saturation(*part, faults);
}

const Check* made_check(const std::string& check, yaml::Place place, yaml::Faults& faults) {
  const Check* found = find_check(check);
  const auto made = evaluated_checks();
  if (found == nullptr) {
    std::vector<std::string> slugs;
    for (const Check& c : catalogue()) slugs.emplace_back(c.slug);
    const std::string nearest = yaml::nearest_word(check, slugs);
    if (nearest.empty())
      faults.add(place, "model_unknown_check", {{"check", check}});
    else
      faults.add(place, "model_unknown_check_near", {{"check", check}, {"nearest", nearest}});
  } else if (std::find(made.begin(), made.end(), check) == made.end()) {
    faults.add(place, "model_check_not_made", {{"check", check}});
    return nullptr;
  }
  return found;
}

Scope read_scope(yaml::Map& map, yaml::Faults& faults) {
  const std::string word = fields::text(map, "scope", faults);
  if (word == "common") return Scope::common;
  if (!word.empty() && word != "per probe")
    faults.add(fields::place_of(map, "scope"), "model_unknown_word",
               {{"key", "scope"}, {"word", word}, {"words", "common, per probe"}});
  return Scope::per_probe;
}

BudgetItem read_budget_item(const yaml::Map::Item& item, std::string_view unit, yaml::Faults& faults) {
  BudgetItem out;
  out.name = item.key;
  auto map = item.value.map(faults);
  if (!map) return out;
  const auto absolute = map->maybe("u"), relative = map->maybe("relative");
  if (absolute) out.absolute = absolute->quantity(unit, faults).value_or(0.0);
  if (relative) out.relative = relative->quantity("%", faults).value_or(0.0) / 100.0;
  if (!absolute && !relative) faults.add(item.place, "model_budget_empty", {{"name", item.key}});
  if (out.absolute < 0.0 || out.relative < 0.0 || out.relative > 1.0)
    faults.add(item.place, out_of_range,
               {{"key", item.key},
                {"value", shortest(std::min(out.absolute, out.relative))},
                {"least", "0"},
                {"most", "100 %"}});
  out.scope = read_scope(*map, faults);
  map->finish(faults);
  return out;
}

void read_budgets(yaml::Map& map, Model& model, yaml::Faults& faults) {
  auto part = fields::map(map, "uncertainty", faults);
  if (!part) return;
  for (const auto& item : part->items()) {
    const Check* check = made_check(item.key, item.place, faults);
    auto entries = item.value.map(faults);
    if (!entries || check == nullptr) continue;
    Budget budget{item.key, {}};
    for (const auto& entry : entries->items()) budget.items.push_back(read_budget_item(entry, check->unit, faults));
    model.budgets.push_back(std::move(budget));
  }
}

/// The nominal ratio that a ratio check needs ("ratio_deviation_1p0" needs 1.0).
std::optional<double> ratio_of_check(std::string_view check) {
  constexpr std::string_view prefix = "ratio_deviation_";
  if (!check.starts_with(prefix)) return std::nullopt;
  std::string digits{check.substr(prefix.size())};
  std::replace(digits.begin(), digits.end(), 'p', '.');
  return parse_double(digits);
}

const SetPoint* find_set_point(const Model& model, double ratio) {
  const auto found = std::find_if(model.set_points.begin(), model.set_points.end(),
                                  [&](const SetPoint& p) { return std::abs(p.ratio - ratio) < 1e-6; });
  return found == model.set_points.end() ? nullptr : &*found;
}

/// Set points without which a check cannot be computed.
std::size_t least_set_points(std::string_view check) {
  if (check == "ratio_nonlinearity") return 3;
  if (check == "ratio_slope" || check == "ratio_offset") return 2;
  if (check == "slot_crosstalk") return 0;
  const Check* known = find_check(check);
  return known != nullptr && (known->needs & needs_pulses) != 0 ? 1 : 0;
}

/// Whether a check is computed from all set points of the model.
bool takes_all_set_points(std::string_view check) {
  return check == "ratio_nonlinearity" || check == "ratio_slope" || check == "ratio_offset" ||
         check == "red_modulation_deviation" || check == "infrared_modulation_deviation";
}

void check_routine_entry(const Model& model, const std::string& check, yaml::Place place, yaml::Faults& faults) {
  if (const auto ratio = ratio_of_check(check); ratio && find_set_point(model, *ratio) == nullptr)
    faults.add(place, "model_set_point_missing", {{"check", check}, {"ratio", shortest(*ratio)}});
  if (carries_uncertainty(check) && model.budget(check) == nullptr)
    faults.add(place, "model_budget_missing", {{"check", check}});
  const Check* known = find_check(check);
  if (known != nullptr && (known->needs & needs_coded_bin) != 0 && model.bins.empty())
    faults.add(place, "model_bins_missing", {{"check", check}});
  const auto need_section = [&](bool there, const char* section) {
    if (!there) faults.add(place, "model_section_missing", {{"check", check}, {"section", section}});
  };
  if (check == "ambient_uptake") need_section(model.ambient.has_value(), "ambient light");
  if (check == "closed_path_light") need_section(model.closed_path.has_value(), "closed path");
  if (check == "slot_crosstalk") need_section(model.alone_slots.has_value(), "cross-talk");
  if (check.starts_with("saturation_error_")) need_section(model.saturation.has_value(), "saturation");
  if (const std::size_t least = least_set_points(check); model.set_points.size() < least)
    faults.add(place, "model_set_points_few", {{"check", check}, {"count", std::to_string(least)}});
  // A saturation error takes its uncertainty from those of the centroids.
  if (check.starts_with("saturation_error_"))
    for (const char* centroid : {"red_centroid", "infrared_centroid"})
      if (model.budget(centroid) == nullptr) faults.add(place, "model_budget_missing", {{"check", centroid}});
}

void read_routine(yaml::Map& map, Model& model, yaml::Faults& faults) {
  const auto list = fields::list(map, "routine", faults);
  if (!list) return;
  std::set<std::string> seen;
  int before = -1;
  for (const yaml::Value& item : list->items()) {
    const auto check = item.text(faults);
    if (!check || made_check(*check, item.place(), faults) == nullptr) continue;
    const int index = check_index(*check);
    if (!seen.insert(*check).second)
      faults.add(item.place(), "model_check_twice", {{"check", *check}});
    else if (index < before)
      faults.add(item.place(), "model_check_order", {{"check", *check}});
    before = std::max(before, index);
    check_routine_entry(model, *check, item.place(), faults);
    model.routine.push_back(*check);
  }
  if (model.routine.empty()) faults.add(fields::place_of(map, "routine"), "model_routine_empty");
}

}  // namespace

std::string_view slug(Scope scope) { return scope == Scope::common ? "common" : "per_probe"; }

int Model::pulse_cycles() const { return cycles_for(pulse_capture_s); }

int Model::cycles_for(double capture_s) const {
  constexpr int block = 32;
  const int blocks = static_cast<int>(std::ceil(capture_s / cycle_s() / block - 1e-9));
  return block * std::max(1, blocks);
}

const SetPoint* Model::level_set_point() const {
  const auto apart = [](const SetPoint& p) { return std::abs(std::log(p.ratio)); };
  const auto nearest = std::min_element(set_points.begin(), set_points.end(),
                                        [&](const SetPoint& a, const SetPoint& b) { return apart(a) < apart(b); });
  return nearest == set_points.end() ? nullptr : &*nearest;
}

bool Model::has_check(std::string_view check) const {
  return std::find(routine.begin(), routine.end(), check) != routine.end();
}

unsigned Model::needs() const {
  unsigned all = 0;
  for (const std::string& slug : routine)
    if (const Check* check = find_check(slug)) all |= check->needs;
  return all;
}

std::vector<SetPoint> Model::needed_set_points() const {
  std::vector<SetPoint> needed;
  for (const SetPoint& point : set_points) {
    const bool wanted = std::any_of(routine.begin(), routine.end(), [&](const std::string& check) {
      if (takes_all_set_points(check)) return true;
      if (const auto ratio = ratio_of_check(check)) return std::abs(*ratio - point.ratio) < 1e-6;
      return least_set_points(check) > 0 && &point == level_set_point();
    });
    if (wanted) needed.push_back(point);
  }
  return needed;
}

std::vector<SetPoint> Model::set_points_in_order() const {
  std::vector<SetPoint> ordered = needed_set_points();
  const SetPoint* level = level_set_point();
  std::stable_partition(ordered.begin(), ordered.end(),
                        [&](const SetPoint& point) { return level == nullptr || point.ratio != level->ratio; });
  return ordered;
}

bool Model::wants_red_alone() const { return (needs() & needs_spectra) != 0; }

const Budget* Model::budget(std::string_view check) const {
  const auto found = std::find_if(budgets.begin(), budgets.end(), [&](const Budget& b) { return b.check == check; });
  return found == budgets.end() ? nullptr : &*found;
}

ResultOrFaults<Model> read_model(std::string_view text, std::string_view file) {
  yaml::Faults faults{std::string{file}};
  const auto document = yaml::Document::read(text, faults);
  if (!document) return faults.take();
  auto map = document->root().map(faults);
  if (!map) return faults.take();
  Model model;
  read_head(*map, model, faults);
  read_leds(*map, model, faults);
  read_modulator(*map, model, faults);
  read_spectrometer(*map, model, faults);
  read_adapter_times(*map, model, faults);
  read_id(*map, model, faults);
  read_temperature(*map, model, faults);
  read_optional_sections(*map, model, faults);
  read_budgets(*map, model, faults);
  read_routine(*map, model, faults);
  map->finish(faults);
  if (!faults.empty()) return faults.take();
  return model;
}

Problems attach_haemoglobin(Model& model, std::string_view table_text, std::string_view file) {
  if (!model.saturation) return {};
  auto table = read_extinction(table_text, file);
  if (!table) return table.error();
  constexpr double from_nm = line_window(Band::red).from_nm, to_nm = secondary_window.to_nm;
  if (table->from_nm() > from_nm || table->to_nm() < to_nm)
    return {{"model_table_short",
             file,
             {{"from", shortest(table->from_nm())},
              {"to", shortest(table->to_nm())},
              {"wanted_from", shortest(from_nm)},
              {"wanted_to", shortest(to_nm)}}}};
  model.saturation->haemoglobin = std::move(*table);
  return {};
}

}  // namespace probewright::measure
