#pragma once
#include <map>
#include <string>

#include "drivers/emulated/truth.h"
#include "station/base/result.h"

namespace probewright::emulated {

/// Writes truth_json() to `path` in one step: readers see the old file or the new one, never a part.
/// Errors: bench_truth_unwritable.
Result<void> write_truth_file(const std::string& path, std::uint64_t seed, const std::map<std::string, Truth>& probes);

}  // namespace probewright::emulated
