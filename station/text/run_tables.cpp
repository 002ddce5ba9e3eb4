#include "station/text/run_tables.h"

#include <ostream>

#include "station/base/numbers.h"

namespace probewright::text {
namespace {

std::string maybe(const std::optional<double>& value) { return value ? shortest(*value) : ""; }
std::string flag(bool value) { return value ? "1" : "0"; }

std::string joined(const std::vector<std::string>& words) {
  std::string text;
  for (const std::string& word : words) text += (text.empty() ? "" : " ") + word;
  return text;
}

const db::RunDevice& device(const db::RunRecord& run, std::string_view role) {
  static const db::RunDevice none{};
  for (const db::RunDevice& each : run.opened.devices)
    if (each.role == role) return each;
  return none;
}

}  // namespace

std::string csv_line(const std::vector<std::string>& cells) {
  std::string line;
  for (std::size_t i = 0; i < cells.size(); ++i) {
    if (i > 0) line += ',';
    const std::string& cell = cells[i];
    if (cell.find_first_of(",\"\r\n") == std::string::npos) {
      line += cell;
      continue;
    }
    line += '"';
    for (const char c : cell) line += c == '"' ? std::string{"\"\""} : std::string(1, c);
    line += '"';
  }
  return line + "\r\n";
}

void write_runs_head(std::ostream& out) {
  out << csv_line({"run",
                   "opened_at",
                   "closed_at",
                   "closing_entry",
                   "serial",
                   "purpose",
                   "emulated",
                   "lot",
                   "model",
                   "station",
                   "nest",
                   "operator",
                   "try",
                   "verdict",
                   "cause",
                   "cause_words",
                   "failing",
                   "provisional",
                   "readings",
                   "captures",
                   "proof",
                   "ambient_temperature_C",
                   "phantom",
                   "phantom_certificate",
                   "adapter",
                   "adapter_certificate",
                   "software_version",
                   "software_commit"});
}

void write_run_line(std::ostream& out, const db::RunRecord& run) {
  const db::RunOpened& o = run.opened;
  const auto closing = run.closing.value_or(db::ClosingRecord{});
  const bool closed = run.closing.has_value();
  const db::RunDevice &phantom = device(run, "phantom"), &adapter = device(run, "adapter");
  out << csv_line({std::to_string(run.run.value),
                   to_text(run.opened_at),
                   closed ? to_text(closing.closed_at) : "",
                   closed ? std::to_string(closing.entry) : "",
                   o.serial,
                   o.purpose,
                   flag(o.emulated),
                   o.lot,
                   o.model,
                   o.station,
                   std::to_string(o.nest),
                   o.operator_name,
                   std::to_string(o.try_number),
                   closing.verdict,
                   closing.cause,
                   closing.cause_words,
                   joined(closing.failing),
                   flag(closing.provisional),
                   std::to_string(run.readings.size()),
                   std::to_string(run.captures.size()),
                   closed ? to_hex(closing.proof) : "",
                   maybe(o.ambient_temperature_C),
                   phantom.identity,
                   phantom.certificate_number,
                   adapter.identity,
                   adapter.certificate_number,
                   o.software_version,
                   o.software_commit});
}

void write_readings_head(std::ostream& out) {
  out << csv_line({"run", "serial", "lot", "opened_at", "check", "value", "unit", "expanded_uncertainty", "none_reason",
                   "lower", "upper", "acceptance_lower", "acceptance_upper", "margin", "conformance_probability", "ok",
                   "definition", "cut_short"});
}

void write_reading_lines(std::ostream& out, const db::RunRecord& run) {
  for (const db::ReadingRow& r : run.readings)
    out << csv_line({std::to_string(run.run.value), run.opened.serial, run.opened.lot, to_text(run.opened_at), r.check,
                     maybe(r.value), r.unit, maybe(r.expanded_uncertainty), r.none_reason, maybe(r.lower),
                     maybe(r.upper), maybe(r.acceptance_lower), maybe(r.acceptance_upper), maybe(r.margin),
                     maybe(r.conformance_probability), r.ok, r.definition, flag(r.cut_short)});
}

}  // namespace probewright::text
