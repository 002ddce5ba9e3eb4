#pragma once
#include <boost/asio/awaitable.hpp>
#include <memory>
#include <string>
#include <vector>

#include "db/rows.h"
#include "station/measure/capture_format.h"
#include "station/sequence/capture_book.h"
#include "station/sequence/configuration.h"
#include "station/sequence/ledger_writer.h"
#include "station/sequence/line_types.h"

namespace probewright::sequence {

/// Who or what ended a run; the rule of pass, fail and void hangs on it.
enum class EndedBy { completion, person_or_probe, device };
struct Ending {
  EndedBy by = EndedBy::completion;
  std::string cause = "completed";  ///< slug
  std::string words;                ///< one sentence; empty for a completed run
};

/// Pass, fail or void. Completed: by the sheet. A stop by a person or the probe: void as long as no reading lies
/// outside its acceptance limits, else fail, so that nobody can test until it passes. A device: void.
RunVerdict verdict_of(EndedBy by, bool sheet_passes, bool any_outside);

/// The documents that one run stands on. They outlive the run.
struct RunDocuments {
  const Documented<StationFile>& station;
  const Documented<measure::Model>& model;
  const Documented<limits::Sheet>& sheet;
  const Documented<measure::PhantomCertificate>& phantom;
  const Documented<measure::AdapterCertificate>& adapter;
  const Documented<limits::diagnosis::Rules>* diagnosis = nullptr;  ///< none: no likely cause is named
  measure::Certificates certificates() const { return {phantom.value, adapter.value}; }
};

/// Keeps the record of one run: its opening entry, captures and readings as they are made, its closing entry.
/// Line thread only. All that it says to the ledger is said in order; the closing entry awaits all of it.
class RunBook : public CaptureBook {
 public:
  RunBook(LedgerWriter& ledger, const RunDocuments& documents);

  /// Puts the opening entry and the documents that the ledger lacks on disk. Throws ProblemError; then no device
  /// command may follow.
  asio::awaitable<void> open(db::RunOpened opening);
  void add(measure::AnyCapture capture) override;
  /// Kept for the outcome.
  void note(RunStep step) override { steps_.push_back(std::move(step)); }
  /// Evaluates what is there, judges what is new and hands both to the ledger. Throws ProblemError when the ledger is
  /// in trouble: the run cannot be recorded.
  void stage_done() override;
  /// Puts the rest and the closing entry on disk, then gives the outcome. Throws ProblemError: no verdict.
  asio::awaitable<RunOutcome> close(Ending ending, Body bench);

  std::int64_t run() const { return run_.value; }
  /// Whether a judged reading so far lies outside its acceptance limits.
  bool any_outside() const;
  const std::vector<JudgedReading>& readings() const { return readings_; }
  /// What has been captured in stages that went through.
  const measure::Captures& captures() const { return captures_; }

 private:
  std::vector<JudgedReading> fresh_readings(bool last);
  JudgedReading judged(const measure::Reading& reading) const;
  /// Whether a hard fault left this check without a reading.
  bool blocked(const std::string& check) const;
  RunOutcome outcome_of(const Ending& ending) const;
  LikelyCause likely_cause() const;

  LedgerWriter& ledger_;
  RunDocuments documents_;
  measure::Certificates certificates_;
  measure::Captures captures_;
  std::vector<measure::AnyCapture> stage_;  ///< of the stage that goes on
  std::vector<JudgedReading> readings_;
  std::vector<RunStep> steps_;
  db::RunOpened opening_;
  db::RunId run_;
  /// Touched by the ledger's jobs only, which run one after the other.
  std::shared_ptr<bool> stage_lost_ = std::make_shared<bool>(false);
};

/// The row that the ledger keeps of a judged reading.
db::ReadingRow ledger_row(const JudgedReading& judged);

}  // namespace probewright::sequence
