#include "station/sequence/labels.h"

#include "db/queries/document.h"
#include "db/queries/labels.h"
#include "db/queries/run_record.h"
#include "db/queries/tries.h"
#include "station/measure/model.h"

namespace probewright::sequence {
namespace {

std::string name_of(db::RunId run) { return "run " + std::to_string(run.value); }

/// The last production run of a serial that was not refused before it began; 0: none.
std::int64_t last_production_run(db::Reader& reader, std::string_view serial) {
  const auto tries = db::tries_of_serial(reader, serial, "production");
  return tries.empty() ? 0 : tries.back().run.value;
}

/// Why a run has no label at all.
std::optional<Problem> without_label(db::Reader& reader, const db::RunRecord& run) {
  const std::string where = name_of(run.run);
  const std::string& serial = run.opened.serial;
  if (run.opened.purpose != "production")
    return Problem{"label_not_production", where, {{"purpose", run.opened.purpose}}};
  if (!run.closing)
    return Problem{"label_run_open", where, {{"run", std::to_string(run.run.value)}, {"serial", serial}}};
  if (last_production_run(reader, serial) != run.run.value)
    return Problem{"label_not_last", where, {{"run", std::to_string(run.run.value)}, {"serial", serial}}};
  if (run.closing->verdict == "void") return Problem{"label_void", where, {{"serial", serial}}};
  return std::nullopt;
}

/// The GTIN of the model that the run stood on; a model that this program cannot read any more has none.
std::string gtin_of(db::Reader& reader, const db::RunRecord& run) {
  for (const db::NamedDocument& named : run.documents) {
    if (named.role != "model") continue;
    const auto document = db::document_by_digest(reader, named.digest);
    if (!document) continue;
    if (const auto model = measure::read_model(document->text, named.name)) return model->gtin;
  }
  return {};
}

int next_copy(db::Reader& reader, const db::RunRecord& run) {
  int copies = 0;
  for (const db::LabelRecord& label : db::labels_of_serial(reader, run.opened.serial))
    if (label.run == run.run) ++copies;
  return copies + 1;
}

std::optional<Problem> wrong_kind(const db::RunRecord& run, LabelKind kind) {
  const std::string& verdict = run.closing->verdict;
  if (verdict == slug(kind)) return std::nullopt;
  return Problem{
      kind == LabelKind::pass ? "label_not_passed" : "label_not_failed", name_of(run.run), {{"verdict", verdict}}};
}

}  // namespace

std::string_view slug(LabelKind kind) { return kind == LabelKind::pass ? "pass" : "fail"; }

Result<LabelFacts> label_facts(db::Reader& reader, db::RunId id, const Zone& zone) {
  const auto run = db::run_record(reader, id);
  if (!run) return Problem{"run_unknown", name_of(id)};
  if (auto problem = without_label(reader, *run)) return *problem;
  LabelFacts facts;
  facts.run = id.value;
  facts.kind = run->closing->verdict == "pass" ? LabelKind::pass : LabelKind::fail;
  facts.verdict = run->closing->verdict;
  facts.purpose = run->opened.purpose;
  facts.emulated = run->opened.emulated;
  facts.model = run->opened.model;
  facts.serial = run->opened.serial;
  facts.lot = run->opened.lot;
  facts.production_date = zone.day(run->closing->closed_at);
  facts.gtin = gtin_of(reader, *run);
  facts.internal_code = "RUN-" + std::to_string(id.value);
  facts.copy = next_copy(reader, *run);
  return facts;
}

Result<LabelFacts> label_facts_of_serial(db::Reader& reader, std::string_view serial, const Zone& zone) {
  const std::int64_t run = last_production_run(reader, serial);
  if (run == 0) return Problem{"label_no_run", "", {{"serial", std::string{serial}}}};
  return label_facts(reader, {run}, zone);
}

std::int64_t make_label_entry(db::Change& change, const LabelEntry& label) {
  db::Reader reader = change.reader();
  const auto run = db::run_record(reader, label.run);
  if (!run) throw ProblemError({"run_unknown", name_of(label.run)});
  if (auto problem = without_label(reader, *run)) throw ProblemError(*problem);
  if (auto problem = wrong_kind(*run, label.kind)) throw ProblemError(*problem);
  const std::string number = std::to_string(label.run.value), copy = std::to_string(label.copy);
  const int wanted = next_copy(reader, *run);
  if (label.copy != wanted)
    throw ProblemError({"label_copy_taken",
                        name_of(label.run),
                        {{"run", number}, {"copy", copy}, {"wanted", std::to_string(wanted)}}});
  if (label.copy > 1 && label.reason.empty())
    throw ProblemError({"label_reason_missing", name_of(label.run), {{"run", number}, {"copy", copy}}});
  if (label.code.empty()) throw ProblemError({"label_no_code", name_of(label.run)});
  return change.add_entry("label_made", label.who,
                          Body::Object{{"code", label.code},
                                       {"copy", label.copy},
                                       {"kind", slug(label.kind)},
                                       {"lot", run->opened.lot},
                                       {"model", run->opened.model},
                                       {"reason", label.reason},
                                       {"run", label.run.value},
                                       {"serial", run->opened.serial}});
}

}  // namespace probewright::sequence
