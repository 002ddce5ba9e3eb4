#include "limits/signed_form.h"

#include <string_view>

#include "limits/fixed_number.h"
#include "station/base/catalogue.h"
#include "station/base/numbers.h"

namespace probewright::limits {
namespace {

/// A control character as YAML's \xNN.
std::string hexadecimal(char c) {
  constexpr std::string_view digits = "0123456789abcdef";
  const auto code = static_cast<unsigned char>(c);
  return {'\\', 'x', digits[code >> 4], digits[code & 15]};
}

/// A double-quoted YAML scalar.
std::string quoted(std::string_view text) {
  std::string out = "\"";
  for (const char c : text) {
    const auto code = static_cast<unsigned char>(c);
    if (code < 0x20 || code == 0x7f) {
      out += hexadecimal(c);
      continue;
    }
    if (c == '"' || c == '\\') out += '\\';
    out += c;
  }
  return out + "\"";
}

/// The parts of one flow map, "{a: 1, b: 2}".
class FlowMap {
 public:
  void add(std::string_view key, const std::string& value) {
    text_ += text_.empty() ? "" : ", ";
    text_ += std::string{key} + ": " + value;
  }
  std::string text() const { return "{" + text_ + "}"; }

 private:
  std::string text_;
};

std::string number(double value, std::string_view unit) {
  return unit == "1" ? shortest(value) : shortest(value) + " " + std::string{unit};
}

void add_limits(FlowMap& map, const Limits& limits, std::string_view unit) {
  if (limits.lower) map.add("lower", number(*limits.lower, unit));
  if (limits.upper) map.add("upper", number(*limits.upper, unit));
}

void add_window(FlowMap& map, const CheckRule& rule, std::string_view unit) {
  if (!rule.nominal) return add_limits(map, rule.limits, unit);
  map.add("nominal", number(rule.nominal->value, unit));
  map.add("tolerance", number(rule.nominal->tolerance, rule.nominal->in_percent ? "%" : unit));
}

std::string guard_text(const Guard& guard) {
  switch (guard.kind) {
    case Guard::Kind::none:
      break;
    case Guard::Kind::factor:
      return shortest(guard.amount);
    case Guard::Kind::risk:
      return "{risk: " + number(fixed_number(100.0 * guard.amount), "%") + "}";
  }
  return "0";
}

std::string judged_text(const CheckRule& rule, std::string_view unit) {
  if (rule.must_be_yes) return "must be yes";
  FlowMap map, accept;
  add_window(map, rule, unit);
  map.add("U", number(rule.expanded_uncertainty, unit));
  map.add("guard", guard_text(rule.guard));
  if (rule.typical) map.add("typical", number(*rule.typical, unit));
  if (rule.at_degC) map.add("at", number(*rule.at_degC, "degC"));
  add_limits(accept, rule.acceptance, unit);
  map.add("accept", accept.text());
  return map.text();
}

std::string watched_text(const CheckRule& rule, std::string_view unit) {
  FlowMap map;
  map.add("watch", number(*rule.watch_beyond, unit));
  if (rule.at_degC) map.add("at", number(*rule.at_degC, "degC"));
  return map.text();
}

std::string rule_text(const CheckRule& rule) {
  const std::string_view unit = find_check(rule.check)->unit;
  switch (rule.use) {
    case Use::judged:
      return judged_text(rule, unit);
    case Use::watch:
      return watched_text(rule, unit);
    case Use::record_only:
      break;
  }
  return "record only";
}

std::string bin_text(const Bin& bin, std::string_view unit) {
  FlowMap map;
  add_limits(map, {bin.lower, bin.upper}, unit);
  map.add("nominal", number(bin.nominal, unit));
  map.add("id resistor", number(bin.resistor_ohm, "ohm"));
  return map.text();
}

std::string bins_text(const Bins& bins) {
  const std::string_view unit = find_check(bins.by)->unit;
  std::string text = "bins:\n  by: " + bins.by + "\n";
  for (const Bin& bin : bins.bins) text += "  " + quoted(bin.name) + ": " + bin_text(bin, unit) + "\n";
  return text;
}

std::string retest_text(const Retest& retest) {
  FlowMap map;
  map.add("tries", std::to_string(retest.tries));
  map.add("after", number(retest.after_s, "s"));
  return "retest: " + map.text() + "\n";
}

std::string stop_text(const StopWhen& stop) {
  FlowMap map;
  if (stop.fails_in_a_row) map.add("fails in a row", std::to_string(*stop.fails_in_a_row));
  if (stop.yield_below_percent)
    map.add("yield below", number(*stop.yield_below_percent, "%") + " of last " + std::to_string(stop.of_last));
  return "stop when: " + map.text() + "\n";
}

std::string head_text(const Sheet& sheet) {
  std::string text = "sheet: " + quoted(sheet.name) + "\nrevision: " + std::to_string(sheet.revision) +
                     "\nreason: " + quoted(sheet.reason) + "\ndecision: " + quoted(sheet.decision) + "\n";
  if (sheet.for_model) text += "for model: sha256 " + to_hex(*sheet.for_model) + "\n";
  return text;
}

}  // namespace

std::string signed_form(const Sheet& sheet) {
  std::string text = head_text(sheet) + "checks:\n";
  for (const CheckRule& rule : sheet.checks) text += "  " + rule.check + ": " + rule_text(rule) + "\n";
  if (sheet.bins) text += bins_text(*sheet.bins);
  return text + retest_text(sheet.retest) + stop_text(sheet.stop_when);
}

}  // namespace probewright::limits
