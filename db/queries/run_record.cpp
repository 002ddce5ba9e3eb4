#include "db/queries/run_record.h"

namespace probewright::db {
namespace {

UtcTime time_at(const Row& row, int column) { return parse_utc(row.text_view(column)).value(); }

std::vector<NamedDocument> documents_of(Reader& reader, RunId run) {
  std::vector<NamedDocument> documents;
  Row row = reader.begin(
      "SELECT r.role, d.kind, d.name, d.revision, d.digest FROM run_document AS r"
      " JOIN document AS d ON d.digest = r.document WHERE r.run = ? ORDER BY r.place");
  for (row.values(run.value); row.step();)
    documents.push_back({row.text(0), row.text(1), row.text(2), row.text(3), row.digest(4)});
  return documents;
}

std::vector<RunDevice> devices_of(Reader& reader, RunId run) {
  std::vector<RunDevice> devices;
  Row row = reader.begin(
      "SELECT role, identity, firmware, certificate_number, certificate FROM run_device WHERE run = ? ORDER BY place");
  for (row.values(run.value); row.step();) {
    devices.push_back({row.text(0), row.text(1), row.text(2), row.text(3), std::nullopt});
    if (!row.is_null(4)) devices.back().certificate = row.digest(4);
  }
  return devices;
}

std::vector<ReadingRow> readings_of(Reader& reader, RunId run) {
  std::vector<ReadingRow> readings;
  Row row = reader.begin(
      "SELECT check_slug, value, none_reason, expanded_uncertainty, unit, lower_limit, upper_limit, acceptance_lower,"
      " acceptance_upper, margin, conformance_probability, ok, definition, cut_short FROM reading WHERE run = ?"
      " ORDER BY place");
  for (row.values(run.value); row.step();) {
    ReadingRow& reading = readings.emplace_back();
    reading.check = row.text(0);
    reading.value = row.maybe_real(1);
    reading.none_reason = row.text(2);
    reading.expanded_uncertainty = row.maybe_real(3);
    reading.unit = row.text(4);
    reading.lower = row.maybe_real(5);
    reading.upper = row.maybe_real(6);
    reading.acceptance_lower = row.maybe_real(7);
    reading.acceptance_upper = row.maybe_real(8);
    reading.margin = row.maybe_real(9);
    reading.conformance_probability = row.maybe_real(10);
    reading.ok = row.text(11);
    reading.definition = row.text(12);
    reading.cut_short = row.integer(13) != 0;
  }
  return readings;
}

std::vector<CaptureRecord> captures_of(Reader& reader, RunId run) {
  std::vector<CaptureRecord> captures;
  Row row = reader.begin(
      "SELECT c.number, c.kind, c.set_label, c.packing, c.decoded_size, c.stored_size, c.decoded_digest,"
      " c.stored_digest, p.capture IS NOT NULL FROM capture AS c LEFT JOIN pruned AS p ON p.capture = c.number"
      " WHERE c.run = ? ORDER BY c.number");
  for (row.values(run.value); row.step();)
    captures.push_back({row.integer(0), row.text(1), row.text(2), row.text(3), row.integer(4), row.integer(5),
                        row.digest(6), row.digest(7), row.integer(8) != 0});
  return captures;
}

std::optional<ClosingRecord> closing_of(Reader& reader, RunId run) {
  Row row = reader.begin(
      "SELECT c.entry, e.time, c.verdict, c.cause, c.cause_words, c.provisional, c.proof, e.hash, e.body"
      " FROM run_closed AS c JOIN entry AS e ON e.number = c.entry WHERE c.run = ?");
  if (!row.values(run.value).step()) return std::nullopt;
  ClosingRecord closing;
  closing.entry = row.integer(0);
  closing.closed_at = time_at(row, 1);
  closing.verdict = row.text(2);
  closing.cause = row.text(3);
  closing.cause_words = row.text(4);
  closing.provisional = row.integer(5) != 0;
  closing.proof = row.digest(6);
  closing.hash = row.digest(7);
  const Body body = parse_body(row.text_view(8), "entry " + row.text(0)).value();
  const Body* data = body.find("data");
  if (const Body* failing = data ? data->find("failing") : nullptr; failing && failing->array())
    for (const Body& check : *failing->array())
      if (check.string()) closing.failing.push_back(*check.string());
  if (const Body* bench = data ? data->find("bench") : nullptr) closing.bench = *bench;
  return closing;
}

std::optional<RunRecord> opening_of(Reader& reader, RunId run) {
  Row row = reader.begin(
      "SELECT e.time, o.serial, o.purpose, o.emulated, o.lot, o.model, o.nest, o.station, o.operator, o.try_number,"
      " o.software_version, o.software_commit, o.compiler, o.ambient_temperature_c FROM run_opened AS o"
      " JOIN entry AS e ON e.number = o.run WHERE o.run = ?");
  if (!row.values(run.value).step()) return std::nullopt;
  RunRecord record;
  record.run = run;
  record.opened_at = time_at(row, 0);
  record.opened.serial = row.text(1);
  record.opened.purpose = row.text(2);
  record.opened.emulated = row.integer(3) != 0;
  record.opened.lot = row.text(4);
  record.opened.model = row.text(5);
  record.opened.nest = static_cast<int>(row.integer(6));
  record.opened.station = row.text(7);
  record.opened.operator_name = row.text(8);
  record.opened.try_number = static_cast<int>(row.integer(9));
  record.opened.software_version = row.text(10);
  record.opened.software_commit = row.text(11);
  record.opened.compiler = row.text(12);
  record.opened.ambient_temperature_C = row.maybe_real(13);
  return record;
}

}  // namespace

std::optional<RunRecord> run_record(Reader& reader, RunId run) {
  auto record = opening_of(reader, run);
  if (!record) return std::nullopt;
  record->documents = documents_of(reader, run);
  for (const NamedDocument& document : record->documents)
    record->opened.documents.push_back({document.role, document.digest});
  record->opened.devices = devices_of(reader, run);
  record->closing = closing_of(reader, run);
  record->readings = readings_of(reader, run);
  record->captures = captures_of(reader, run);
  return record;
}

}  // namespace probewright::db
