#include <algorithm>
#include <cmath>

#include "db/chain.h"
#include "db/hex.h"
#include "db/packing.h"
#include "db/projection.h"
#include "db/sha256.h"
#include "db/store.h"
#include "station/base/catalogue.h"
#include "station/base/numbers.h"

namespace probewright::db {
namespace {

[[noreturn]] void refuse(std::string_view id, std::string_view where,
                         std::initializer_list<std::pair<std::string, std::string>> arguments = {}) {
  throw ProblemError(Problem{id, where, arguments});
}

std::string name_of(RunId run) { return "run " + std::to_string(run.value); }

void bind_cell(Row& row, int place, const Cell& cell) {
  std::visit([&](const auto& value) { row.bind(place, value); }, cell);
}

/// Finite or refused; -0.0 becomes 0.0, so that equal numbers have equal bytes.
double stored(double value, std::string_view where, std::string_view column) {
  if (!std::isfinite(value)) refuse("reading_not_finite", where, {{"column", std::string{column}}});
  return value == 0.0 ? 0.0 : value;
}

std::optional<double> stored(const std::optional<double>& value, std::string_view where, std::string_view column) {
  if (!value) return std::nullopt;
  return stored(*value, where, column);
}

std::int64_t place_of(const ReadingRow& reading, const std::string& where) {
  const int place = check_index(reading.check);
  if (place < 0) refuse("reading_check_unknown", where, {{"check", reading.check}});
  if (reading.value.has_value() == !reading.none_reason.empty())
    refuse("reading_incomplete", where, {{"check", reading.check}});
  return place;
}

Body device_body(const RunDevice& device) {
  return Body::Object{{"certificate", device.certificate ? Body{to_hex(*device.certificate)} : Body{}},
                      {"certificate_number", device.certificate_number},
                      {"firmware", device.firmware},
                      {"identity", device.identity},
                      {"role", device.role}};
}

Body::Array words_body(const std::vector<std::string>& words) { return {words.begin(), words.end()}; }

}  // namespace

std::int64_t Change::append(std::string_view kind, std::string_view who, const Body& data,
                            const std::string& digested) {
  const EntryHead head{seal_.entry + 1, to_text(store_.clock_.utc_now()), std::string{kind}, std::string{who}};
  const std::string body = entry_body(head, data);
  const Digest hash = entry_hash(seal_.hash, body);
  store_.connection_.begin("INSERT INTO entry(number, time, kind, who, body, hash) VALUES (?, ?, ?, ?, ?, ?)")
      .values(head.number, head.time, head.kind, head.who, body, hash)
      .run();
  for (std::size_t i = 0; i < projected_tables().size(); ++i) {
    const ProjectedTable& table = projected_tables()[i];
    if (!makes_rows(table, kind)) continue;
    const auto rows = project(table, head.number, data, digested);
    if (!rows) throw std::logic_error("a body lacks what its table needs: " + std::string{table.table});
    for (const auto& cells : *rows) {
      Row row = store_.insert_projected_[i]->begin();
      for (std::size_t c = 0; c < cells.size(); ++c) bind_cell(row, static_cast<int>(c) + 1, cells[c]);
      row.run();
    }
  }
  seal_ = {head.number, hash};
  return head.number;
}

std::int64_t Change::add_entry(std::string_view kind, std::string_view who, const Body& data) {
  if (is_projected(kind) || kind == "ledger_begun")
    refuse("entry_kind_reserved", "entry", {{"kind", std::string{kind}}});
  return append(kind, who, data);
}

Reader Change::reader() { return Reader(store_.connection_); }

int Change::tries(std::string_view serial, std::string_view purpose) {
  Row row = store_.connection_.begin(
      "SELECT (SELECT count(*) FROM run_opened WHERE serial = ?1 AND purpose = ?2)"
      " + coalesce((SELECT tries FROM carried_try WHERE serial = ?1 AND purpose = ?2), 0)");
  row.values(serial, purpose).step();
  return static_cast<int>(row.integer(0));
}

void Change::need_document(const Digest& digest) {
  Row row = store_.connection_.begin("SELECT 1 FROM document WHERE digest = ?");
  if (!row.values(digest).step()) refuse("document_unknown", "document", {{"digest", to_hex(digest)}});
}

void Change::need_open(RunId run) {
  Row row = store_.connection_.begin(
      "SELECT c.run IS NOT NULL FROM run_opened AS o LEFT JOIN run_closed AS c ON c.run = o.run WHERE o.run = ?");
  if (!row.values(run.value).step()) refuse("run_unknown", name_of(run));
  if (row.integer(0) != 0) refuse("run_is_closed", name_of(run));
}

RunId Change::open_run(const RunOpened& opened) {
  if (opened.purpose == "production" && opened.emulated != store_.emulated())
    refuse("run_refused_emulated", opened.serial,
           {{"ledger", store_.emulated() ? "an emulated bench" : "a real bench"},
            {"run", opened.emulated ? "emulated" : "real"}});
  const int next_try = tries(opened.serial, opened.purpose) + 1;
  if (opened.try_number != 0 && opened.try_number != next_try)
    refuse("run_try_number", opened.serial,
           {{"told", std::to_string(opened.try_number)}, {"counted", std::to_string(next_try)}});
  Body::Array documents, devices;
  for (const RunDocument& document : opened.documents) {
    Row row = store_.connection_.begin("SELECT kind, name, revision FROM document WHERE digest = ?");
    if (!row.values(document.digest).step())
      refuse("document_unknown", document.role, {{"digest", to_hex(document.digest)}});
    documents.push_back(Body::Object{{"digest", to_hex(document.digest)},
                                     {"kind", row.text(0)},
                                     {"name", row.text(1)},
                                     {"revision", row.text(2)},
                                     {"role", document.role}});
  }
  for (const RunDevice& device : opened.devices) {
    if (device.certificate) need_document(*device.certificate);
    devices.push_back(device_body(device));
  }
  const auto temperature = stored(opened.ambient_temperature_C, opened.serial, "ambient_temperature_c");
  return {append("run_opened", opened.operator_name,
                 Body::Object{{"ambient_temperature_c", temperature ? Body{shortest(*temperature)} : Body{}},
                              {"compiler", opened.compiler},
                              {"devices", std::move(devices)},
                              {"documents", std::move(documents)},
                              {"emulated", opened.emulated},
                              {"lot", opened.lot},
                              {"model", opened.model},
                              {"nest", opened.nest},
                              {"operator", opened.operator_name},
                              {"purpose", opened.purpose},
                              {"serial", opened.serial},
                              {"software_commit", opened.software_commit},
                              {"software_version", opened.software_version},
                              {"station", opened.station},
                              {"try_number", next_try}})};
}

void Change::add_readings(RunId run, std::span<const ReadingRow> readings) {
  need_open(run);
  const std::string where = name_of(run);
  for (const ReadingRow& reading : readings) {
    const std::int64_t place = place_of(reading, where);
    const auto number = [&](const std::optional<double>& value) { return stored(value, where, reading.check); };
    store_.connection_
        .begin(
            "INSERT INTO reading(run, place, check_slug, value, none_reason, expanded_uncertainty, unit, lower_limit,"
            " upper_limit, acceptance_lower, acceptance_upper, margin, conformance_probability, ok, definition,"
            " cut_short) VALUES (?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?)")
        .values(run.value, place, reading.check, number(reading.value),
                reading.value ? std::nullopt : std::optional<std::string>{reading.none_reason},
                number(reading.expanded_uncertainty), reading.unit, number(reading.lower), number(reading.upper),
                number(reading.acceptance_lower), number(reading.acceptance_upper), number(reading.margin),
                number(reading.conformance_probability), reading.ok, reading.definition, reading.cut_short)
        .run();
  }
}

std::int64_t Change::add_capture(RunId run, std::string_view kind, std::string_view set_label,
                                 std::span<const std::byte> decoded) {
  need_open(run);
  if (decoded.size() > largest_capture)
    refuse("capture_too_large", name_of(run), {{"size", std::to_string(decoded.size())}});
  const Packed packed = pack(decoded);
  const std::int64_t number = 1 + [&] {
    Row newest = store_.connection_.begin("SELECT coalesce(max(number), 0) FROM capture");
    newest.step();
    return newest.integer(0);
  }();
  store_.connection_
      .begin(
          "INSERT INTO capture(number, run, kind, set_label, packing, decoded_size, stored_size, decoded_digest,"
          " stored_digest) VALUES (?, ?, ?, ?, ?, ?, ?, ?, ?)")
      .values(number, run.value, kind, set_label, packed.packing, static_cast<std::int64_t>(decoded.size()),
              static_cast<std::int64_t>(packed.stored.size()), sha256(decoded), sha256(packed.stored))
      .run();
  store_.connection_.begin("INSERT INTO capture_bytes(capture, bytes) VALUES (?, ?)")
      .values(number, std::span<const std::byte>{packed.stored})
      .run();
  return number;
}

namespace {

/// What the readings of a run say about its verdict.
struct Judged {
  int ok = 0, not_ok = 0, none = 0;
  std::vector<std::string> checks;
};

/// What speaks against the verdict, or empty.
std::string contradiction(const RunClosed& closed, const Judged& judged) {
  if (closed.verdict == "void") return closed.cause.empty() ? "a void names its cause" : "";
  if (closed.verdict == "pass") {
    if (!closed.failing.empty()) return "a pass has no failing check";
    if (judged.not_ok != 0) return "a reading is not ok";
    if (judged.none != 0) return "a judged check has no reading";
    return judged.ok == 0 ? "nothing was judged" : "";
  }
  if (closed.failing.empty()) return "a fail names its failing checks";
  for (const std::string& check : closed.failing)
    if (std::find(judged.checks.begin(), judged.checks.end(), check) == judged.checks.end())
      return "the failing check " + check + " has no reading";
  return "";
}

/// Digests the rows of a run; `each` sees every row that stands in the select.
template <class Each>
RowsDigest digest_rows(Connection& connection, const std::string& select, std::span<const DigestedColumn> columns,
                       RunId run, const Each& each) {
  RowsDigest digest(columns);
  Row row = connection.begin(select.c_str());
  for (row.values(run.value); row.step(); each(row))
    if (digest.add(row) >= 0) throw std::logic_error("a row of this run holds a type that cannot be there");
  return digest;
}

int column_of(std::span<const DigestedColumn> columns, std::string_view name) {
  const auto named = [name](const DigestedColumn& column) { return column.name == name; };
  return static_cast<int>(std::find_if(columns.begin(), columns.end(), named) - columns.begin());
}

/// Digests readings and notes what they say about the verdict.
RowsDigest digest_readings(Connection& connection, RunId run, Judged& judged) {
  const int slug = column_of(reading_columns(), "check_slug"), ok = column_of(reading_columns(), "ok");
  return digest_rows(connection, select_readings(), reading_columns(), run, [&](const Row& row) {
    judged.checks.push_back(row.text(slug));
    const std::string_view word = row.text_view(ok);
    judged.ok += word == "ok";
    judged.not_ok += word == "not_ok";
    judged.none += word == "none";
  });
}

}  // namespace

Seal Change::close_run(const RunClosed& closed) {
  need_open(closed.run);
  Judged judged;
  const RowsDigest readings = digest_readings(store_.connection_, closed.run, judged);
  if (const std::string against = contradiction(closed, judged); !against.empty())
    refuse("run_verdict_contradicts", name_of(closed.run), {{"verdict", closed.verdict}, {"against", against}});
  const RowsDigest captures =
      digest_rows(store_.connection_, select_captures(), capture_columns(), closed.run, [](const Row&) {});
  append("run_closed", closed.who,
         Body::Object{{"bench", closed.bench},
                      {"capture_column_tags", tags_text(captures.column_tags())},
                      {"capture_row_tags", tags_text(captures.row_tags())},
                      {"captures", static_cast<std::int64_t>(captures.rows())},
                      {"cause", closed.cause},
                      {"cause_words", closed.cause_words},
                      {"failing", words_body(closed.failing)},
                      {"proof", to_hex(run_proof(closed.run, readings, captures))},
                      {"provisional", closed.provisional},
                      {"reading_column_tags", tags_text(readings.column_tags())},
                      {"reading_row_tags", tags_text(readings.row_tags())},
                      {"readings", static_cast<std::int64_t>(readings.rows())},
                      {"run", closed.run.value},
                      {"verdict", closed.verdict}});
  return seal_;
}

Digest Change::add_document(const DocumentRow& document) {
  if (document.text.find('\0') != std::string::npos) refuse("document_not_text", document.name);
  const Digest digest = sha256(document.text);
  {
    Row row = store_.connection_.begin("SELECT kind, name, revision FROM document WHERE digest = ?");
    if (row.values(digest).step()) {
      if (row.text(0) == document.kind && row.text(1) == document.name && row.text(2) == document.revision)
        return digest;
      refuse("document_differs", document.name,
             {{"kind", row.text(0)}, {"name", row.text(1)}, {"revision", row.text(2)}});
    }
  }
  append("document", document.who,
         Body::Object{{"digest", to_hex(digest)},
                      {"kind", document.kind},
                      {"name", document.name},
                      {"revision", document.revision},
                      {"size", static_cast<std::int64_t>(document.text.size())}},
         document.text);
  return digest;
}

std::int64_t Change::add_signature(const SignatureRow& signature) {
  need_document(signature.document);
  {
    Row row = store_.connection_.begin("SELECT 1 FROM signature WHERE document = ? AND signer = ?");
    if (row.values(signature.document, signature.signer).step()) refuse("signature_twice", signature.signer);
  }
  return append("document_signed", signature.signer,
                Body::Object{{"document", to_hex(signature.document)},
                             {"meaning", signature.meaning},
                             {"public_key", signature.public_key},
                             {"role", signature.role},
                             {"signature", signature.signature},
                             {"signer", signature.signer}});
}

std::int64_t Change::set_state(const Digest& document, std::string_view state, UtcTime from, std::string_view who,
                               std::string_view reason) {
  need_document(document);
  if (from < store_.clock_.utc_now()) refuse("in_force_past", to_hex(document), {{"from", to_text(from)}});
  return append(
      "document_state", who,
      Body::Object{{"document", to_hex(document)}, {"from", to_text(from)}, {"reason", reason}, {"state", state}});
}

std::int64_t Change::put_in_force(const Digest& document, UtcTime from, std::string_view who, std::string_view reason) {
  need_document(document);
  {
    Row row = store_.connection_.begin(
        "SELECT 1 FROM signature AS a JOIN signature AS b ON b.document = a.document AND b.signer <> a.signer"
        " WHERE a.document = ? AND a.role = 'engineer' AND b.role = 'quality'");
    if (!row.values(document).step()) refuse("document_unsigned", to_hex(document));
  }
  return set_state(document, "in_force", from, who, reason);
}

std::int64_t Change::withdraw(const Digest& document, UtcTime from, std::string_view who, std::string_view reason) {
  return set_state(document, "withdrawn", from, who, reason);
}

std::int64_t Change::prune(std::span<const std::int64_t> captures, std::string_view who, std::string_view reason) {
  std::vector<std::int64_t> sorted(captures.begin(), captures.end());
  std::sort(sorted.begin(), sorted.end());
  sorted.erase(std::unique(sorted.begin(), sorted.end()), sorted.end());
  for (const std::int64_t capture : sorted) {
    Row row = store_.connection_.begin(
        "SELECT c.run IS NOT NULL FROM capture AS a LEFT JOIN run_closed AS c ON c.run = a.run WHERE a.number = ?");
    const std::string where = "capture " + std::to_string(capture);
    if (!row.values(capture).step()) refuse("capture_unknown", where);
    if (row.integer(0) == 0) refuse("run_is_open", where);
  }
  const std::int64_t entry =
      append("prune", who, Body::Object{{"captures", Body::Array(sorted.begin(), sorted.end())}, {"reason", reason}});
  for (const std::int64_t capture : sorted)
    store_.connection_.begin("DELETE FROM capture_bytes WHERE capture = ?").values(capture).run();
  return entry;
}

}  // namespace probewright::db
