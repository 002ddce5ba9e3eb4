#pragma once
#include <optional>
#include <string>
#include <vector>

#include "station/base/times.h"
#include "station/text/demo.h"
#include "station/text/demo_folder.h"

namespace probewright::text {

/// A run of the demonstration as it is told at the end.
struct DemoRun {
  std::size_t piece = 0;  ///< place in the lot
  sequence::RunOutcome outcome;
  std::string likely_cause;  ///< in words, from the ledger; empty: none was told
  std::optional<double> device_floor_s;
};

/// Everything that came of a demonstration.
struct DemoResult {
  DemoFolder folder;
  std::vector<DemoRun> runs;
  sequence::production::Work work;
  Duration took{};
  bool interrupted = false;
  std::int64_t seal_entry = 0;
  std::string seal;
  std::optional<int> labels;  ///< how many were made; nothing: none could be
  bool report = false;        ///< it stands in the folder
  Problems troubles;          ///< what could not be done
};

struct VerdictCounts {
  int passed = 0, failed = 0, voided = 0;
};
VerdictCounts counts_of(const std::vector<DemoRun>& runs);

/// For people; the last line is "N passed, N failed, N void".
std::string demo_text(const DemoOptions& options, const DemoParts& parts, const DemoResult& result);
/// The shape of FORMATS.md ("demo").
Json demo_json(const DemoResult& result, double speed);

}  // namespace probewright::text
