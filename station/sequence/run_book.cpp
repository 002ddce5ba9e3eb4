#include "station/sequence/run_book.h"

#include <algorithm>
#include <set>

#include "limits/diagnosis/diagnose.h"
#include "station/base/catalogue.h"
#include "station/measure/evaluate.h"

namespace probewright::sequence {
namespace {

db::DocumentRow ledger_document(const DocumentText& document) {
  return {document.kind, document.name, document.revision > 0 ? std::to_string(document.revision) : std::string{},
          document.text, "station"};
}

/// Documents in the order of their roles in the opening entry.
std::vector<std::pair<std::string, const DocumentText*>> roles(const RunDocuments& documents) {
  std::vector<std::pair<std::string, const DocumentText*>> all{{"station", &documents.station.document},
                                                               {"model", &documents.model.document},
                                                               {"sheet", &documents.sheet.document},
                                                               {"phantom certificate", &documents.phantom.document},
                                                               {"adapter certificate", &documents.adapter.document}};
  if (documents.diagnosis) all.emplace_back("diagnosis", &documents.diagnosis->document);
  for (const DocumentText& part : documents.model.parts) all.emplace_back(part.kind, &part);
  return all;
}

bool outside(const JudgedReading& judged) {
  using limits::Outcome;
  const Outcome outcome = judged.judgement.outcome;
  return judged.judgement.judged() && (outcome == Outcome::not_ok || outcome == Outcome::too_close);
}

/// "not_captured" and what a hard fault blocked may still change; everything else stands.
bool final_now(const measure::Reading& reading) {
  return reading.value || !(reading.none_reason == "not_captured" || reading.none_reason.starts_with("blocked_by:"));
}

std::string_view ledger_word(limits::Outcome outcome) {
  using enum limits::Outcome;
  switch (outcome) {
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
      return "record";
  }
  return "record";
}

}  // namespace

RunVerdict verdict_of(EndedBy by, bool sheet_passes, bool any_outside) {
  switch (by) {
    case EndedBy::completion:
      return sheet_passes ? RunVerdict::pass : RunVerdict::fail;
    case EndedBy::person_or_probe:
      return any_outside ? RunVerdict::fail : RunVerdict::void_run;
    case EndedBy::device:
      return RunVerdict::void_run;
  }
  return RunVerdict::void_run;
}

RunBook::RunBook(LedgerWriter& ledger, const RunDocuments& documents)
    : ledger_(ledger), documents_(documents), certificates_(documents.certificates()) {}

asio::awaitable<void> RunBook::open(db::RunOpened opening) {
  std::vector<db::DocumentRow> rows;
  for (const auto& [role, document] : roles(documents_)) {
    rows.push_back(ledger_document(*document));
    opening.documents.push_back({role, document->digest});
  }
  opening_ = std::move(opening);
  co_await ledger_.commit([this, rows](db::Change& change) {
    for (const auto& row : rows) change.add_document(row);
    run_ = change.open_run(opening_);
  });
}

void RunBook::add(measure::AnyCapture capture) { stage_.push_back(std::move(capture)); }

JudgedReading RunBook::judged(const measure::Reading& reading) const {
  return {reading, limits::judge(documents_.sheet.value, reading.check, reading.value,
                                 reading.expanded_uncertainty.value_or(0.0), reading.none_reason)};
}

std::vector<JudgedReading> RunBook::fresh_readings(bool last) {
  if (readings_.size() == documents_.model.value.routine.size()) return {};
  std::set<std::string, std::less<>> known;
  for (const auto& old : readings_) known.insert(old.reading.check);
  std::vector<JudgedReading> fresh;
  for (const auto& reading : measure::evaluate(documents_.model.value, certificates_, captures_))
    if (!known.contains(reading.check) && (last || final_now(reading))) fresh.push_back(judged(reading));
  readings_.insert(readings_.end(), fresh.begin(), fresh.end());
  return fresh;
}

namespace {

/// Captures and readings of one stage as the ledger takes them.
struct Stage {
  std::vector<std::pair<std::string, Bytes>> captures;
  std::vector<db::ReadingRow> readings;

  void write(db::Change& change, db::RunId run) const {
    for (const auto& [kind, bytes] : captures) change.add_capture(run, kind, "", bytes);
    change.add_readings(run, readings);
  }
};

Stage stage_of(const std::vector<measure::AnyCapture>& captures, const std::vector<JudgedReading>& readings) {
  Stage stage;
  for (const auto& capture : captures) stage.captures.emplace_back(measure::capture_kind(capture), encode(capture));
  for (const auto& reading : readings) stage.readings.push_back(ledger_row(reading));
  return stage;
}

/// The closing entry tells the likely cause beside the state of the bench.
Body with_cause(Body bench, const LikelyCause& likely) {
  Body::Object& members = *bench.object();
  if (likely.sentences.empty()) return bench;
  members["likely_cause"] = likely.slug;
  members["likely_cause_words"] = likely.words;
  members["rework"] = likely.rework;
  members["diagnosis"] = likely.sentences;
  return bench;
}

}  // namespace

void RunBook::stage_done() {
  for (const measure::AnyCapture& capture : stage_)
    if (auto taken = measure::add_capture(captures_, capture); !taken) throw ProblemError(taken.error());
  const Stage stage = stage_of(stage_, fresh_readings(false));
  stage_.clear();
  ledger_.submit([stage, run = run_, lost = stage_lost_](db::Change& change) {
    *lost = true;  // until it went well
    stage.write(change, run);
    *lost = false;
  });
  if (ledger_.trouble()) throw ProblemError(*ledger_.trouble());
}

bool RunBook::any_outside() const { return std::any_of(readings_.begin(), readings_.end(), outside); }

bool RunBook::blocked(const std::string& check) const {
  return std::any_of(readings_.begin(), readings_.end(), [&](const JudgedReading& judged) {
    return judged.reading.check == check && judged.reading.none_reason.starts_with("blocked_by:");
  });
}

RunOutcome RunBook::outcome_of(const Ending& ending) const {
  std::vector<limits::Judgement> judgements;
  for (const auto& judged : readings_) judgements.push_back(judged.judgement);
  const auto expected = limits::judged_checks(documents_.sheet.value, documents_.model.value.routine);
  const limits::Verdict sheet = limits::overall(judgements, expected);

  RunOutcome outcome;
  outcome.run = run_.value;
  outcome.nest = opening_.nest;
  outcome.serial = opening_.serial;
  outcome.purpose = find_purpose(opening_.purpose).value_or(Purpose::engineering);
  outcome.emulated = opening_.emulated;
  outcome.verdict = verdict_of(ending.by, sheet.pass, any_outside());
  outcome.cause = ending.cause;
  outcome.cause_words = ending.words;
  outcome.failing = sheet.not_ok;
  // Readings that are missing decide a verdict only where the routine went through: else the cause did. What a hard
  // fault blocked is no failure of its own.
  if (ending.by == EndedBy::completion)
    for (const std::string& check : sheet.no_reading)
      if (!blocked(check)) outcome.failing.push_back(check);
  std::sort(outcome.failing.begin(), outcome.failing.end(),
            [](const std::string& a, const std::string& b) { return check_index(a) < check_index(b); });
  if (ending.by == EndedBy::completion && outcome.verdict == RunVerdict::fail) outcome.cause = "limits";
  outcome.steps = steps_;
  std::stable_sort(outcome.steps.begin(), outcome.steps.end(),
                   [](const RunStep& a, const RunStep& b) { return a.from < b.from; });
  outcome.readings = readings_;
  std::sort(outcome.readings.begin(), outcome.readings.end(), [](const JudgedReading& a, const JudgedReading& b) {
    return check_index(a.reading.check) < check_index(b.reading.check);
  });
  return outcome;
}

LikelyCause RunBook::likely_cause() const {
  if (!documents_.diagnosis) return {};
  std::vector<limits::diagnosis::JudgedValue> values;
  for (const JudgedReading& judged : readings_)
    values.push_back({judged.judgement, judged.reading.value, judged.reading.expanded_uncertainty.value_or(0.0)});
  const auto diagnosis = limits::diagnosis::likely_causes(documents_.diagnosis->value, documents_.sheet.value, values);
  LikelyCause likely;
  likely.sentences = diagnosis.words;
  likely.ask_reference = !diagnosis.ask_reference.empty();
  if (const auto* first = diagnosis.first()) {
    likely.slug = first->slug;
    likely.words = first->words;
    likely.rework = first->rework;
  }
  return likely;
}

asio::awaitable<RunOutcome> RunBook::close(Ending ending, Body bench) {
  const Stage stage = stage_of({}, fresh_readings(true));  // what a stage that never ended took is not to be trusted
  RunOutcome outcome = outcome_of(ending);
  db::RunClosed closing;
  closing.run = run_;
  closing.verdict = slug(outcome.verdict);
  closing.cause = outcome.cause;
  closing.cause_words = outcome.cause_words;
  closing.failing = outcome.failing;
  if (outcome.verdict == RunVerdict::fail) outcome.likely = likely_cause();
  closing.bench = with_cause(std::move(bench), outcome.likely);
  db::Seal seal;
  co_await ledger_.commit([&](db::Change& change) {
    if (*stage_lost_) throw ProblemError({"run_stage_lost", "ledger"});  // a closing entry would make it look whole
    stage.write(change, run_);
    seal = change.close_run(closing);
  });
  if (ledger_.trouble()) throw ProblemError(*ledger_.trouble());
  outcome.closing_entry = seal.entry;
  outcome.seal = seal.hash;
  co_return outcome;
}

db::ReadingRow ledger_row(const JudgedReading& judged) {
  const auto& [reading, judgement] = judged;
  db::ReadingRow row;
  row.check = reading.check;
  row.value = reading.value;
  row.none_reason = reading.none_reason;
  row.expanded_uncertainty = reading.expanded_uncertainty;
  row.unit = reading.unit;
  row.lower = judgement.limits.lower;
  row.upper = judgement.limits.upper;
  row.acceptance_lower = judgement.acceptance.lower;
  row.acceptance_upper = judgement.acceptance.upper;
  row.margin = judgement.margin;
  row.conformance_probability = judgement.conformance_probability;
  row.ok = ledger_word(judgement.outcome);
  row.definition = reading.definition;
  row.cut_short = reading.cut_short;
  return row;
}

}  // namespace probewright::sequence
