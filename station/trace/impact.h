#pragma once
#include <cstdint>
#include <functional>
#include <optional>
#include <stop_token>
#include <string>
#include <variant>
#include <vector>

#include "db/rows.h"
#include "station/base/result.h"
#include "station/base/times.h"
#include "station/trace/drift.h"

namespace probewright::trace {

/// A certificate to hold in the place of the one that the runs stood on.
using CorrectedCertificate = std::variant<measure::PhantomCertificate, measure::AdapterCertificate>;

/// "This device was found so much off: which passed probes would have failed?"
struct ImpactQuestion {
  std::string device;  ///< number of its certificate, its identity, or its serial
  UtcTime since;       ///< runs opened from then on
  std::optional<UtcTime> until;
  std::variant<Drift, CorrectedCertificate> found;
  bool both_ways = false;  ///< the direction is not known: the worse of both counts (a drift only)
};

struct ImpactOptions {
  int threads = 0;
  std::function<void(std::int64_t done, std::int64_t total)> progress;
  std::stop_token stop;
};

/// How a row came about.
enum class ImpactBy {
  rederivation,  ///< from the run's own captures, with the corrected certificate
  sensitivity,   ///< from the stored readings, moved by what the correction does to runs of the model with captures
  unknown        ///< neither could be had
};
std::string_view slug(ImpactBy by);

/// One passed run.
struct ImpactRow {
  db::RunId run;
  UtcTime opened_at;
  std::string serial, lot, model, purpose;
  ImpactBy by = ImpactBy::unknown;
  bool fails = false;                ///< it would not have passed
  std::string check;                 ///< the judged check with the smallest margin now; empty: none is known
  std::optional<double> margin;      ///< of that check, now
  std::optional<double> was_margin;  ///< of the same check, as stored
  std::optional<double> value, was_value;
  std::string unit;
  std::vector<std::string> failing;  ///< all checks that are not ok now
  int from_runs = 0;                 ///< by sensitivity: how many runs with captures it was found from
  std::optional<Problem> problem;    ///< why it is unknown, or why there are no captures to re-derive from
  bool later_pass = false;           ///< the serial passed again later, in a run that is not among these
};

struct ImpactReport {
  db::Seal seal;
  std::vector<ImpactRow> rows;  ///< by margin, smallest first; unknown ones at the end
  std::int64_t fails = 0, rederived = 0, by_sensitivity = 0, unknown = 0;
  bool stopped = false;
};

/// Answers the question from one ledger. A re-derived row holds the run against its own sheet; so does one by
/// sensitivity: there the change of each reading is a straight line in the reading's value, by least squares over up
/// to 200 runs of the same model with captures (a constant where there are fewer than five), and only judged readings
/// with a value can move.
/// Errors: those of opening; impact_no_runs (no passed run of this device since then).
Result<ImpactReport> impact(const std::string& ledger, const ImpactQuestion& question,
                            const ImpactOptions& options = {});

}  // namespace probewright::trace
