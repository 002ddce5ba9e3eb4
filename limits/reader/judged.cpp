#include <cmath>

#include "limits/acceptance.h"
#include "limits/fixed_number.h"
#include "limits/reader/parts.h"
#include "station/base/numbers.h"
#include "station/base/units.h"

namespace probewright::limits::reader {
namespace {

/// Reads one judged check, key by key; whatever could not be read leaves `whole_` false, and rules that need it are
/// not tried, so that one slip is one fault.
class JudgedReader {
 public:
  JudgedReader(const Check& check, yaml::Place key_place, Map map, Faults& faults)
      : check_(check), key_place_(key_place), map_(std::move(map)), faults_(faults) {
    rule_.check = check.slug;
    rule_.use = Use::judged;
  }
  std::optional<CheckRule> read();

 private:
  using Arguments = std::initializer_list<std::pair<std::string, std::string>>;

  void read_window();
  void read_lower_and_upper();
  void read_nominal(const std::optional<Value>& nominal, const std::optional<Value>& tolerance);
  void window_from_nominal(const Value& tolerance);
  void limits_in_order();
  void read_uncertainty();
  void read_guard();
  void read_factor(const Value& value);
  void read_risk(const Value& value);
  void set_acceptance();
  void read_typical();
  void typical_inside(const Value& value);
  void read_accept();
  void read_accepted(Map& accept, const char* key, std::optional<double>& computed);

  /// A value in the check's unit, or in % of the nominal value.
  std::optional<double> absolute_or_percent(const Value& value, std::string_view key);
  std::optional<double> above_zero(const Value& value, std::string_view key, std::optional<double> number);
  void fault(yaml::Place place, std::string_view id, Arguments arguments = {});
  std::string shown(double value) const { return with_unit(value, check_.unit); }

  const Check& check_;
  yaml::Place key_place_;
  Map map_;
  Faults& faults_;
  CheckRule rule_;
  yaml::Place upper_place_;
  bool whole_ = true;
};

void JudgedReader::fault(yaml::Place place, std::string_view id, Arguments arguments) {
  whole_ = false;
  faults_.add(place, id, arguments);
}

std::optional<double> JudgedReader::above_zero(const Value& value, std::string_view key, std::optional<double> number) {
  if (!number) {
    whole_ = false;
    return {};
  }
  if (*number > 0.0) return number;
  fault(value.place(), "sheet_not_above_zero",
        {{"check", rule_.check}, {"key", std::string{key}}, {"text", as_written(value)}});
  return {};
}

/// "2 %" where the check itself is not in %: part of the nominal value.
bool is_percent_of_something(const Value& value, const Check& check) {
  if (check.unit == "%" || !value.is_scalar()) return false;
  const auto quantity = parse_quantity(as_written(value));
  return quantity && quantity->unit == "%";
}

std::optional<double> JudgedReader::absolute_or_percent(const Value& value, std::string_view key) {
  if (!is_percent_of_something(value, check_)) return above_zero(value, key, amount(value, check_.unit, faults_));
  const auto percent = above_zero(value, key, amount(value, "%", faults_));
  if (!percent) return {};
  if (rule_.nominal && rule_.nominal->value != 0.0)
    return fixed_number(std::abs(rule_.nominal->value) * *percent / 100.0);
  fault(value.place(), "sheet_percent_of_nothing",
        {{"check", rule_.check}, {"key", std::string{key}}, {"text", as_written(value)}});
  return {};
}

void JudgedReader::read_lower_and_upper() {
  if (const auto lower = map_.maybe("lower")) {
    rule_.limits.lower = amount(*lower, check_.unit, faults_);
    whole_ = whole_ && rule_.limits.lower;
  }
  if (const auto upper = map_.maybe("upper")) {
    upper_place_ = upper->place();
    rule_.limits.upper = amount(*upper, check_.unit, faults_);
    whole_ = whole_ && rule_.limits.upper;
  }
}

void JudgedReader::window_from_nominal(const Value& tolerance) {
  const auto half = absolute_or_percent(tolerance, "tolerance");
  if (!half) return;
  rule_.nominal->in_percent = is_percent_of_something(tolerance, check_);
  rule_.nominal->tolerance = rule_.nominal->in_percent ? amount(tolerance, "%", faults_).value_or(0.0) : *half;
  rule_.limits.lower = fixed_number(rule_.nominal->value - *half);
  rule_.limits.upper = fixed_number(rule_.nominal->value + *half);
}

void JudgedReader::read_nominal(const std::optional<Value>& nominal, const std::optional<Value>& tolerance) {
  if (!nominal || !tolerance) {
    const bool no_nominal = !nominal;
    fault(key_place_, "sheet_half_a_window",
          {{"check", rule_.check},
           {"there", no_nominal ? "tolerance" : "nominal"},
           {"missing", no_nominal ? "nominal" : "tolerance"}});
    return;
  }
  const auto middle = amount(*nominal, check_.unit, faults_);
  if (!middle) {
    whole_ = false;
    return;
  }
  rule_.nominal = Nominal{.value = *middle};
  window_from_nominal(*tolerance);
}

void JudgedReader::read_window() {
  read_lower_and_upper();
  const bool has_limit = map_.maybe("lower") || map_.maybe("upper");
  const auto nominal = map_.maybe("nominal"), tolerance = map_.maybe("tolerance");
  if (has_limit && (nominal || tolerance))
    return fault((nominal ? nominal : tolerance)->place(), "sheet_two_windows", {{"check", rule_.check}});
  if (nominal || tolerance) return read_nominal(nominal, tolerance);
  if (!has_limit) fault(key_place_, "sheet_no_limit", {{"check", rule_.check}});
}

void JudgedReader::limits_in_order() {
  const Limits& limits = rule_.limits;
  if (rule_.nominal || !limits.two_sided() || *limits.lower < *limits.upper) return;
  fault(upper_place_, "sheet_limits_reversed",
        {{"check", rule_.check}, {"lower", shown(*limits.lower)}, {"upper", shown(*limits.upper)}});
}

void JudgedReader::read_uncertainty() {
  const auto value = map_.maybe("U");
  if (!value) return fault(key_place_, "sheet_no_uncertainty", {{"check", rule_.check}});
  // Without a window that could be read, "% of nominal" cannot be told from a slip: only the number is looked at.
  if (is_percent_of_something(*value, check_) && !rule_.nominal && !whole_) return;
  rule_.expanded_uncertainty = absolute_or_percent(*value, "U").value_or(0.0);
}

void JudgedReader::read_factor(const Value& value) {
  const auto factor = value.number(faults_);
  if (!factor) {
    whole_ = false;
    return;
  }
  if (*factor < 0.0)
    return fault(value.place(), "sheet_guard_negative", {{"check", rule_.check}, {"text", as_written(value)}});
  if (*factor > 0.0) rule_.guard = {Guard::Kind::factor, fixed_number(*factor)};
}

void JudgedReader::read_risk(const Value& value) {
  auto map = value.map(faults_);
  const auto risk = map ? map->need("risk", faults_) : std::nullopt;
  if (map) map->finish(faults_);
  const auto percent = risk ? amount(*risk, "%", faults_) : std::nullopt;
  if (!percent) {
    whole_ = false;
    return;
  }
  if (!(*percent >= 0.0001 && *percent < 50.0))
    return fault(risk->place(), "sheet_risk_out_of_range", {{"check", rule_.check}, {"text", as_written(*risk)}});
  rule_.guard = {Guard::Kind::risk, fixed_number(*percent / 100.0)};
}

void JudgedReader::read_guard() {
  const auto value = map_.maybe("guard");
  if (!value) return;
  if (value->is_map())
    read_risk(*value);
  else
    read_factor(*value);
}

void JudgedReader::set_acceptance() {
  if (!whole_) return;
  rule_.acceptance = acceptance_limits(rule_.limits, rule_.guard, rule_.expanded_uncertainty);
  if (!rule_.acceptance.two_sided() || *rule_.acceptance.lower < *rule_.acceptance.upper) return;
  const auto guard = map_.maybe("guard");
  fault(guard ? guard->place() : key_place_, "sheet_guard_too_wide",
        {{"check", rule_.check},
         {"band", shown(fixed_number(guard_band(rule_.guard, rule_.expanded_uncertainty)))},
         {"lower", shown(*rule_.limits.lower)},
         {"upper", shown(*rule_.limits.upper)}});
}

void JudgedReader::typical_inside(const Value& value) {
  const bool inside =
      rule_.acceptance.upper ? *rule_.typical < *rule_.acceptance.upper : *rule_.typical > *rule_.acceptance.lower;
  if (inside) return;
  const double limit = rule_.acceptance.upper ? *rule_.acceptance.upper : *rule_.acceptance.lower;
  fault(value.place(), "sheet_typical_outside",
        {{"check", rule_.check}, {"text", as_written(value)}, {"limit", shown(limit)}});
}

void JudgedReader::read_typical() {
  const auto value = map_.maybe("typical");
  if (value) {
    rule_.typical = amount(*value, check_.unit, faults_);
    whole_ = whole_ && rule_.typical;
  }
  if (!whole_) return;
  if (value && rule_.limits.two_sided())
    return fault(value->place(), "sheet_typical_not_used", {{"check", rule_.check}});
  if (rule_.limits.two_sided()) return;
  if (!value) return fault(key_place_, "sheet_no_typical", {{"check", rule_.check}});
  typical_inside(*value);
}

void JudgedReader::read_accepted(Map& accept, const char* key, std::optional<double>& computed) {
  const auto value = accept.maybe(key);
  const auto written = value ? amount(*value, check_.unit, faults_) : std::nullopt;
  if (value && !written) {
    whole_ = false;
    return;
  }
  if (!whole_ || (!written && !computed)) return;
  // The last of the ten digits may differ where another machine's logarithm does; the signed number counts.
  const double close = 1e-8 * rule_.expanded_uncertainty;
  if (written && computed && std::abs(*written - *computed) <= close) {
    computed = written;
    return;
  }
  fault(value ? value->place() : accept.place(), "sheet_accept_differs",
        {{"check", rule_.check},
         {"key", key},
         {"written", written ? shown(*written) : "missing"},
         {"computed", computed ? shown(*computed) : "none"}});
}

/// The signed form carries the acceptance limits; they must be those of the limits, U and guard beside them.
void JudgedReader::read_accept() {
  const auto value = map_.maybe("accept");
  if (!value) return;
  auto accept = value->map(faults_);
  if (!accept) {
    whole_ = false;
    return;
  }
  read_accepted(*accept, "lower", rule_.acceptance.lower);
  read_accepted(*accept, "upper", rule_.acceptance.upper);
  accept->finish(faults_);
}

std::optional<CheckRule> JudgedReader::read() {
  read_window();
  limits_in_order();
  read_uncertainty();
  read_guard();
  set_acceptance();
  read_typical();
  rule_.at_degC = read_at(map_, faults_);
  read_accept();
  map_.finish(faults_);
  if (!whole_) return {};
  return std::move(rule_);
}

}  // namespace

std::optional<CheckRule> read_judged(const Check& check, yaml::Place key_place, Map map, Faults& faults) {
  return JudgedReader{check, key_place, std::move(map), faults}.read();
}

}  // namespace probewright::limits::reader
