#include "station/trace/stored_run.h"

#include <algorithm>

#include "db/hex.h"
#include "db/queries/capture_bytes.h"
#include "db/queries/document.h"
#include "station/base/catalogue.h"
#include "station/measure/capture_format.h"
#include "station/measure/evaluate.h"

namespace probewright::trace {
namespace {

std::string name_of(const db::RunRecord& run) { return "run " + std::to_string(run.run.value); }

/// The document of one kind or role that a run names.
std::optional<Digest> named(const db::RunRecord& run, std::string_view role) {
  for (const db::NamedDocument& document : run.documents)
    if (document.role == role) return document.digest;
  return std::nullopt;
}

/// The certificate that a device carried; without one, the document of that role.
std::optional<Digest> certificate_of(const db::RunRecord& run, std::string_view device) {
  for (const db::RunDevice& each : run.opened.devices)
    if (each.role == device && each.certificate) return each.certificate;
  return named(run, std::string{device} + " certificate");
}

std::string joined(const Problems& faults) {
  std::string text;
  for (const Problem& fault : faults) text += (text.empty() ? "" : "; ") + fault.text();
  return text;
}

}  // namespace

Result<std::string> StoredDocuments::text_of(const Digest& digest, const std::string& role) {
  auto document = db::document_by_digest(reader_, digest);
  if (!document) return Problem{"stored_document_missing", to_hex(digest), {{"role", role}}};
  return std::move(document->text);
}

template <class Value, class Parse>
Result<std::shared_ptr<const Value>> StoredDocuments::parsed(std::map<Digest, std::shared_ptr<const Value>>& known,
                                                             const Digest& digest, const std::string& role,
                                                             Parse parse) {
  if (const auto found = known.find(digest); found != known.end()) return found->second;
  const auto text = text_of(digest, role);
  if (!text) return text.error();
  ResultOrFaults<Value> value = parse(*text, role);
  if (!value)
    return Problem{"stored_document_unreadable", to_hex(digest), {{"role", role}, {"reason", joined(value.error())}}};
  return known[digest] = std::make_shared<const Value>(std::move(*value));
}

Result<std::shared_ptr<const measure::Model>> StoredDocuments::model(const Digest& digest) {
  return parsed<measure::Model>(
      models_, digest, "model",
      [this](const std::string& text, const std::string& role) -> ResultOrFaults<measure::Model> {
        auto model = measure::read_model(text, role);
        if (!model || !model->saturation) return model;
        const auto table_digest = db::digest_from_hex(model->saturation->table_sha256);
        if (!table_digest) return model;
        const auto table = text_of(*table_digest, "haemoglobin table");
        if (!table) return Problems{table.error()};
        const Problems faults = measure::attach_haemoglobin(*model, *table, "haemoglobin table");
        if (!faults.empty()) return faults;
        return model;
      });
}

Result<RunBasis> StoredDocuments::basis_of(const db::RunRecord& run) {
  const auto missing = [&](const std::string& role) {
    return Problem{"stored_document_missing", name_of(run), {{"role", role}}};
  };
  const auto model_digest = named(run, "model"), sheet_digest = named(run, "sheet");
  const auto phantom_digest = certificate_of(run, "phantom"), adapter_digest = certificate_of(run, "adapter");
  if (!model_digest) return missing("model");
  if (!sheet_digest) return missing("sheet");
  if (!phantom_digest) return missing("phantom certificate");
  if (!adapter_digest) return missing("adapter certificate");
  RunBasis basis;
  auto model = this->model(*model_digest);
  if (!model) return model.error();
  auto sheet = parsed<limits::Sheet>(sheets_, *sheet_digest, "sheet", limits::read_sheet);
  if (!sheet) return sheet.error();
  auto phantom = parsed<measure::PhantomCertificate>(phantoms_, *phantom_digest, "phantom certificate",
                                                     measure::read_phantom_certificate);
  if (!phantom) return phantom.error();
  auto adapter = parsed<measure::AdapterCertificate>(adapters_, *adapter_digest, "adapter certificate",
                                                     measure::read_adapter_certificate);
  if (!adapter) return adapter.error();
  return RunBasis{*model, *sheet, *phantom, *adapter};
}

Result<measure::Captures> stored_captures(db::Reader& reader, const db::RunRecord& run) {
  if (run.captures.empty()) return Problem{"captures_not_kept", name_of(run)};
  measure::Captures captures;
  for (const db::CaptureRecord& capture : run.captures) {
    const auto bytes = db::capture_bytes(reader, capture.number);
    if (!bytes) return bytes.error();
    auto decoded = measure::decode(*bytes, name_of(run) + ", " + capture.kind);
    if (!decoded) return decoded.error();
    if (auto added = measure::add_capture(captures, std::move(*decoded)); !added) return added.error();
  }
  return captures;
}

std::string_view DerivedReading::word() const {
  using enum limits::Outcome;
  if (!judgement) return "record";
  switch (judgement->outcome) {
    case ok:
      return "ok";
    case not_ok:
    case too_close:
    case unusable:
      return "not_ok";
    case no_reading:
      return "none";
    case watch_ok:
    case watch_alert:
      return "watch";
    case recorded:
      break;
  }
  return "record";
}

std::vector<DerivedReading> judged(std::vector<measure::Reading> readings, const limits::Sheet& sheet) {
  std::vector<DerivedReading> derived;
  for (measure::Reading& reading : readings) {
    std::optional<limits::Judgement> judgement;
    if (sheet.find(reading.check))
      judgement = limits::judge(sheet, reading.check, reading.value, reading.expanded_uncertainty.value_or(0.0),
                                reading.none_reason);
    derived.push_back({std::move(reading), std::move(judgement)});
  }
  return derived;
}

namespace {

bool lies_outside(const DerivedReading& derived) {
  using limits::Outcome;
  return derived.judgement && derived.judgement->judged() &&
         (derived.judgement->outcome == Outcome::not_ok || derived.judgement->outcome == Outcome::too_close);
}

/// Told from the cause: a routine that went through ends "completed", or "limits" where the sheet fails it.
bool went_through(const db::RunRecord& stored) {
  return stored.closing && (stored.closing->cause == "completed" || stored.closing->cause == "limits" ||
                            (stored.closing->cause.empty() && stored.closing->verdict != "void"));
}

std::string verdict_of_broken_off(const db::RunRecord& stored, bool any_outside) {
  const bool was_outside =
      std::any_of(stored.readings.begin(), stored.readings.end(), [](const auto& row) { return row.ok == "not_ok"; });
  const bool by_device = stored.closing && stored.closing->verdict == "void" && was_outside;
  return any_outside && !by_device ? "fail" : "void";
}

}  // namespace

DerivedRun with_verdict(std::vector<DerivedReading> readings, const RunBasis& basis, const db::RunRecord& stored) {
  std::vector<limits::Judgement> judgements;
  for (const DerivedReading& each : readings)
    if (each.judgement) judgements.push_back(*each.judgement);
  const auto expected = limits::judged_checks(*basis.sheet, basis.model->routine);
  const limits::Verdict sheet = limits::overall(judgements, expected);
  const bool any_outside = std::any_of(readings.begin(), readings.end(), lies_outside);
  DerivedRun run{std::move(readings), "", sheet.not_ok};
  run.failing.insert(run.failing.end(), sheet.no_reading.begin(), sheet.no_reading.end());
  if (went_through(stored))
    run.verdict = sheet.pass ? "pass" : "fail";
  else
    run.verdict = verdict_of_broken_off(stored, any_outside);
  return run;
}

DerivedRun derive(const RunBasis& basis, const measure::Certificates& certificates, const measure::Captures& captures,
                  const db::RunRecord& stored) {
  return with_verdict(judged(measure::evaluate(*basis.model, certificates, captures), *basis.sheet), basis, stored);
}

}  // namespace probewright::trace
