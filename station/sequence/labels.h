#pragma once
#include <optional>
#include <string>
#include <string_view>

#include "db/reader.h"
#include "db/rows.h"
#include "db/store.h"
#include "station/base/zone.h"

// A label in the ledger: which run may have one, what stands on it, and its entry. The entry goes first: a label is
// made only when the ledger says so.
namespace probewright::sequence {

enum class LabelKind { pass, fail };
std::string_view slug(LabelKind kind);  ///< "pass", "fail"

/// All that a label says of its run; what pages need to draw it, as plain texts.
struct LabelFacts {
  std::int64_t run = 0;
  LabelKind kind = LabelKind::pass;
  std::string verdict, purpose;  ///< of the run
  bool emulated = false;
  std::string model, serial, lot;
  std::string production_date;  ///< day of the verdict in the plant's zone, "2026-12-01"
  std::string gtin;             ///< of the model, as the run used it; empty: none
  std::string internal_code;    ///< of a fail label: the run's number, "RUN-123"
  int copy = 1;                 ///< which print of this run's label it would be; 2 and more: a reprint
};

/// What the next label of a closed production run says. Its model is read from the ledger, as the run used it.
/// Errors: run_unknown, label_run_open, label_not_production, label_void, label_not_last (the serial was tested again
/// in production). Throws db::Error.
Result<LabelFacts> label_facts(db::Reader& reader, db::RunId run, const Zone& zone);
/// The same for the last production run of a serial. Errors: also label_no_run.
Result<LabelFacts> label_facts_of_serial(db::Reader& reader, std::string_view serial, const Zone& zone);

/// What the ledger is told of a label.
struct LabelEntry {
  db::RunId run;
  LabelKind kind = LabelKind::pass;
  int copy = 1;
  std::string code;             ///< what a reader gets from it; an element string of GS1 keeps its separators
  std::string reason;           ///< of a reprint
  std::string who = "station";  ///< the person who asked for it, or "station"
};

/// Adds the entry `label_made`, and checks once more, inside the transaction, that this run may have this label: data
/// holds code, copy, kind, lot, model, reason, run, serial. Returns its number. The label's files count from then on.
/// Ledger thread only. Throws ProblemError: as label_facts, and label_not_passed (a pass label for a run that did not
/// pass), label_not_failed, label_copy_taken (copy is not the next), label_reason_missing (a reprint without a reason),
/// label_no_code.
std::int64_t make_label_entry(db::Change& change, const LabelEntry& label);

}  // namespace probewright::sequence
