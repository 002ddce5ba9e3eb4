#pragma once
#include <string>

#include "station/base/canonical_json.h"
#include "station/sequence/configuration.h"
#include "station/sequence/recording_ports.h"
#include "station/text/single_run.h"

namespace probewright::text {

/// What `test --record` writes besides the lines, and `replay` reads (drivers/wire/RECORDING.md).

/// The header of a recorded run.
struct RecordedRun {
  RunOrder order;
  std::string station;
  UtcTime started;
  double speed = 1.0;
  std::uint64_t seed = 0;              ///< of all that the line leaves to chance
  std::uint16_t first_sequence = 0;    ///< the adapter's first frame, which follows from the seed
  std::string version, commit;         ///< of the program
  std::vector<std::string> documents;  ///< digests of all documents in its configuration, sorted
};
Body header_of(const RecordedRun& run);
/// Errors: recording_no_run.
Result<RecordedRun> run_in(const Body& header, std::string_view where);

/// Every document of a configuration with its path inside the configuration's folder.
std::vector<std::pair<std::string, const sequence::DocumentText*>> documents_of(
    const sequence::Configuration& configuration);
std::vector<std::string> digests_of(const sequence::Configuration& configuration);

/// The number that an adapter's frames begin with when the line draws from `seed`.
std::uint16_t first_sequence_of(std::uint64_t seed);

/// Lines of the outcome's JSON that say other things than that of a replay: numbers and hashes of ledger entries.
/// Empty: the same verdict and the same readings, to the last digit.
std::vector<std::string> differences(const std::string& recorded_json, const std::string& replayed_json);

}  // namespace probewright::text
