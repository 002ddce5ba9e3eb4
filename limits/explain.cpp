#include "limits/explain.h"

#include <algorithm>

#include "limits/acceptance.h"
#include "limits/fixed_number.h"
#include "limits/words.h"
#include "station/base/numbers.h"

namespace probewright::limits {
namespace {

std::string joined(double value, const std::string& unit) {
  return unit.empty() ? shortest(value) : shortest(value) + " " + unit;
}

/// A number of the sheet as it stands, no digit dropped. What "%" is of is said once a line.
std::string whole(double value, const CheckLine& line) { return joined(value, short_unit(*find_check(line.check))); }

std::string of_what(const CheckLine& line) {
  const std::string of{find_check(line.check)->of};
  return of.empty() ? of : " of " + of;
}

std::string window(const Limits& limits, const CheckLine& line) {
  if (limits.two_sided()) return shortest(*limits.lower) + " to " + whole(*limits.upper, line);
  if (limits.upper) return "up to " + whole(*limits.upper, line);
  return "from " + whole(*limits.lower, line) + " up";
}

std::string guard_words(const Guard& guard, const CheckLine& line) {
  switch (guard.kind) {
    case Guard::Kind::none:
      return "no guard band";
    case Guard::Kind::factor:
      return "guard " + shortest(guard.amount) + " x U";
    case Guard::Kind::risk:
      return "guard " + whole(line.guard_band, line) + " for a risk of " +
             shortest(fixed_number(100.0 * guard.amount)) + " %";
  }
  return {};
}

std::string judged_words(const CheckRule& rule, const CheckLine& line) {
  if (rule.must_be_yes) return "judged, must be yes";
  std::string words = "judged, " + window(line.limits, line) + of_what(line) + "; U " +
                      whole(line.expanded_uncertainty, line) + ", " + guard_words(rule.guard, line) + "; accepted " +
                      window(line.acceptance, line) + ", where at least " +
                      fixed(100.0 * *line.conformance_at_acceptance, 1) + " % conform";
  if (rule.typical) words += "; typical " + whole(*rule.typical, line);
  if (rule.at_degC) words += "; at " + shortest(*rule.at_degC) + " degC";
  return words;
}

std::string words_of(const CheckRule& rule, const CheckLine& line) {
  switch (rule.use) {
    case Use::judged:
      return judged_words(rule, line);
    case Use::watch:
      return "watched, alert when further from 0 than " + whole(*rule.watch_beyond, line);
    case Use::record_only:
      break;
  }
  return "record only";
}

void add_judged_numbers(const CheckRule& rule, CheckLine& line) {
  line.expanded_uncertainty = rule.expanded_uncertainty;
  line.guard_band = fixed_number(guard_band(rule.guard, rule.expanded_uncertainty));
  line.conformance_at_acceptance = conformance_at_acceptance(rule.limits, rule.acceptance, rule.expanded_uncertainty);
}

std::string bins_note(const Bins& bins) {
  const std::string unit = unit_words(*find_check(bins.by));
  std::string note = "bins by " + bins.by + ":";
  for (const Bin& bin : bins.bins)
    note += " " + bin.name + " " + shortest(bin.lower) + " to " + shortest(bin.upper) + " " + unit + " (" +
            shortest(bin.resistor_ohm) + " ohm)";
  return note;
}

std::string retest_note(const Retest& retest) {
  if (retest.tries == 0) return "no retest";
  return std::to_string(retest.tries) + (retest.tries == 1 ? " retest" : " retests") + " after " +
         shortest(retest.after_s) + " s";
}

std::string stop_note(const StopWhen& stop) {
  std::string note;
  if (stop.fails_in_a_row) note = std::to_string(*stop.fails_in_a_row) + " fails in a row";
  if (stop.yield_below_percent)
    note += (note.empty() ? "" : " or ") + std::string{"a yield below "} + shortest(*stop.yield_below_percent) +
            " % of the last " + std::to_string(stop.of_last);
  return note.empty() ? "a nest does not stop by itself" : "a nest stops at " + note;
}

void fill(SheetReport& report, Sheet sheet) {
  for (const CheckRule& rule : sheet.checks) report.lines.push_back(explain(rule));
  if (sheet.bins) report.notes.push_back(bins_note(*sheet.bins));
  report.notes.push_back(retest_note(sheet.retest));
  report.notes.push_back(stop_note(sheet.stop_when));
  report.warnings = sheet.warnings;
  report.sheet = std::move(sheet);
}

std::string count(std::size_t n, std::string_view thing) {
  return std::to_string(n) + " " + std::string{thing} + (n == 1 ? "" : "s");
}

std::string fault_text(const SheetReport& report) {
  std::string text;
  for (const Problem& fault : report.faults) text += fault.text() + "\n";
  return text + report.file + ": " + count(report.faults.size(), "fault") + ", the sheet cannot be used\n";
}

}  // namespace

CheckLine explain(const CheckRule& rule) {
  const Check& check = *find_check(rule.check);
  CheckLine line;
  line.check = rule.check;
  line.shown_as = check.shown_as;
  line.unit = unit_words(check);
  line.use = rule.use;
  line.limits = rule.limits;
  line.acceptance = rule.acceptance;
  if (rule.use == Use::judged && !rule.must_be_yes) add_judged_numbers(rule, line);
  line.words = words_of(rule, line);
  return line;
}

SheetReport explain(std::string_view text, std::string_view file) {
  SheetReport report;
  report.file = file;
  auto sheet = read_sheet(text, file);
  if (sheet)
    fill(report, *std::move(sheet));
  else
    report.faults = sheet.error();
  return report;
}

std::string to_text(const SheetReport& report) {
  if (!report.usable()) return fault_text(report);
  const Sheet& sheet = *report.sheet;
  std::string text = sheet.name + " revision " + std::to_string(sheet.revision) + ": " + sheet.reason + "\n";
  std::size_t widest = 0;
  for (const CheckLine& line : report.lines) widest = std::max(widest, line.check.size());
  for (const CheckLine& line : report.lines)
    text += "  " + line.check + std::string(widest - line.check.size() + 2, ' ') + line.words + "\n";
  for (const std::string& note : report.notes) text += "  " + note + "\n";
  for (const Problem& warning : report.warnings) text += "note: " + warning.text() + "\n";
  return text + report.file + ": " + count(sheet.checks.size(), "check") + ", no fault\n";
}

}  // namespace probewright::limits
