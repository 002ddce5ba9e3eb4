#pragma once
#include <optional>
#include <string>
#include <vector>

#include "db/queries/entry_range.h"
#include "db/queries/run_brief.h"
#include "db/reader.h"
#include "db/rows.h"
#include "station/base/zone.h"
#include "station/trace/period.h"

// What a shift did, from its ledger alone. A run belongs to the shift in which its closing entry was written. Only
// production runs count in numbers of probes, yields, checks and nests; runs of other purposes are told apart.
namespace probewright::trace {

struct ShiftQuestion {
  std::optional<Period> period;           ///< by time; else
  std::optional<db::EntryRange> entries;  ///< by entries; else the whole ledger
  std::string lot;                        ///< of one lot only; empty: of all
  Zone zone;                              ///< of the plant: whose hours and days are counted
};

/// Probes by their last production verdict in the shift.
struct ShiftCounts {
  int passed = 0;
  int failed = 0;
  int voided = 0;             ///< had void runs only
  int passed_first_time = 0;  ///< of those with a verdict: the first one that the ledger has of them was a pass
  int tested() const { return passed + failed + voided; }
  int judged() const { return passed + failed; }
  bool operator==(const ShiftCounts&) const = default;
};

/// Runs by verdict: a probe tested again counts again.
struct RunCounts {
  int passed = 0, failed = 0, voided = 0;
  int all() const { return passed + failed + voided; }
  bool operator==(const RunCounts&) const = default;
};

struct FailingCheckFacts {
  std::string check;  ///< slug
  int runs = 0;       ///< failed production runs that name it
  /// The commonest likely cause of those runs, and in words; empty where none was told. The first one where two are
  /// equally common.
  std::string likely_cause, likely_cause_words;
  int runs_with_that_cause = 0;
};

struct NestFacts {
  int nest = 0;
  RunCounts runs;
  std::optional<double> mean_cycle_s, longest_cycle_s;  ///< of the runs with a verdict that tell their cycle
  std::string commonest_failing_check;                  ///< slug; may be empty
};

struct PersonFacts {
  std::string name, role;  ///< role as signed in; empty where the ledger has no sign-in
  int runs = 0;            ///< that the person operated, of all purposes
};

struct LotFacts {
  std::string lot, model;
  std::string sheet_revisions;           ///< of the shift's runs, "4" or "4, 5"
  std::optional<std::int64_t> quantity;  ///< as the lot was opened with
  bool closed = false;                   ///< a closing entry was there when the ledger was read
  RunCounts runs;
};

struct PurposeFacts {
  std::string purpose;
  RunCounts runs;
};

/// Production runs that ended in one hour, or one day where the shift is longer than two, of the plant's zone.
struct Stretch {
  std::string begin;  ///< "2026-12-01 06:00", "2026-12-01"
  RunCounts runs;
};

/// One check of one model over the shift's production runs that judged it by numbers.
struct CheckSeries {
  std::string model, check, unit;
  std::vector<std::int64_t> runs;
  std::vector<std::optional<double>> values;  ///< nothing: no reading in that run
  std::optional<double> lower, upper;         ///< acceptance limits of the last run
  bool limits_changed = false;                ///< within the shift
  /// The margin that one run in ten falls below: what decides how near a check is to its limits. A single wild probe
  /// does not move it.
  double low_margin = 0.0;
};

struct ShiftFacts {
  std::string station;
  bool emulated = false;  ///< any run was
  std::string lot;        ///< that was asked for
  UtcTime from, to;       ///< as asked for; else of the first and last entry
  db::EntryRange entries;
  ShiftCounts probes;
  RunCounts runs;                          ///< production
  int left_open = 0;                       ///< runs of any purpose that had begun and not ended
  int sent_to_rework = 0;                  ///< failed production runs whose closing entry names a rework instruction
  std::vector<FailingCheckFacts> failing;  ///< commonest first
  std::vector<NestFacts> nests;            ///< by number
  std::vector<PersonFacts> people;         ///< in the order in which they appear
  std::vector<LotFacts> lots;
  std::vector<PurposeFacts> other_purposes;
  std::vector<Stretch> stretches;
  std::vector<CheckSeries> series;  ///< nearest to its limits first
  db::Seal seal;                    ///< of the ledger when it was read
};

/// Counts a shift, in one state of the ledger. A shift without runs has zeros and empty lists.
/// Throws db::Error; ProblemError for a damaged ledger.
ShiftFacts shift_facts(db::Reader& reader, const ShiftQuestion& question);

/// First-pass yield: probes whose first production verdict was a pass over probes with a production verdict; nothing
/// where there is none.
std::optional<double> first_pass_yield(const ShiftCounts& probes);

/// Seconds from the first device command to the verdict, as the closing entry tells them.
std::optional<double> cycle_s_of(const db::RunBrief& run);

}  // namespace probewright::trace
