#pragma once
#include <cstdint>
#include <functional>
#include <optional>
#include <stop_token>
#include <string>
#include <vector>

#include "db/rows.h"
#include "station/base/result.h"

namespace probewright::trace {

/// Which closed runs to make again: one, those of a serial or a lot, or all.
struct RederiveScope {
  std::optional<db::RunId> run;
  std::string serial, lot;  ///< at most one; neither, and no run: everything
};

struct RederiveOptions {
  int threads = 0;  ///< 0: as many as the machine has
  /// Called now and then, in the calling thread, with how many runs of how many are done.
  std::function<void(std::int64_t done, std::int64_t total)> progress;
  std::stop_token stop;
  std::size_t most_listed = 1000;  ///< runs that are told one by one
};

/// How a stored reading and the one that comes out now compare.
enum class Agreement {
  bitwise,       ///< value, uncertainty, margin, probability, reason and outcome are the same to the last bit
  close,         ///< the same outcome; numbers within 1e-12 of their size: another processor family
  differs,       ///< another number
  one_sided,     ///< a value on one side only, or another reason for none, or a reading on one side only
  other_outcome  ///< another outcome
};
std::string_view slug(Agreement agreement);

/// One reading that is not bitwise the same.
struct ReadingDifference {
  std::string check, unit;
  Agreement agreement = Agreement::differs;
  std::optional<double> stored, derived;
  std::optional<double> in_U;         ///< |derived - stored| over the stored expanded uncertainty
  std::string stored_ok, derived_ok;  ///< ok, not_ok, watch, record, none; empty: no reading
  std::string stored_none, derived_none;
  bool other_method = false;  ///< the definitions differ: another version of the method or its parameters
};

/// A run that does not come out bitwise the same.
struct RunAgreement {
  db::RunId run;
  std::string serial, lot, commit;              ///< commit: of the program that made it
  std::string stored_verdict, derived_verdict;  ///< derived: empty where it could not be made again
  std::vector<ReadingDifference> differences;
  std::optional<Problem> problem;  ///< why it could not be made again
};

/// One row of the table of agreement.
struct CheckAgreement {
  std::string check, unit;
  std::int64_t compared = 0, bitwise = 0, close = 0, differing = 0;  ///< differing: all that is neither of the two
  double largest_in_U = 0.0;                                         ///< of all differences
  double largest = 0.0;                                              ///< in `unit`
  db::RunId largest_run;
};

struct RederiveReport {
  db::Seal seal;
  std::int64_t runs = 0;          ///< asked for
  std::int64_t derived = 0;       ///< made again
  std::int64_t same_verdict = 0;  ///< of those
  std::int64_t not_derived = 0;   ///< captures not kept, or a document missing
  std::int64_t bitwise_runs = 0;  ///< every reading bitwise, and the verdict
  std::int64_t same_build = 0;    ///< made by the very commit that this program is
  std::int64_t readings = 0, bitwise = 0, close = 0, differing = 0;
  std::vector<CheckAgreement> checks;  ///< in catalogue order
  std::vector<RunAgreement> listed;    ///< by rising run
  bool stopped = false;                ///< the figures are of the runs up to then
  /// Every run that could be made again has the same verdict and its readings bitwise or within 1e-12.
  bool agrees() const { return derived == same_verdict && differing == 0; }
};

/// Makes runs again from their stored captures and documents through measure::evaluate and the limit sheet, on several
/// threads, each with its own connection; the result does not depend on their number. `commit` is that of this program.
/// Errors: those of opening the ledger; run_not_closed (the one run asked for is not there or not closed).
Result<RederiveReport> rederive(const std::string& ledger, const RederiveScope& scope, const std::string& commit,
                                const RederiveOptions& options = {});

}  // namespace probewright::trace
