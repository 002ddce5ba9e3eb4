#pragma once
#include <string>

#include "station/text/choices.h"
#include "station/text/console.h"

namespace probewright::text {

struct ReplayOptions {
  Build build;
  std::string folder;  ///< of the recording
};

/// `replay`: makes a recorded run again from the bytes of its recording, with the documents that lie in it and a ledger
/// in memory, and compares verdict and readings with the recorded ones.
/// Exit status: 0 the same, to the last digit; 1 not; 2 refused input (no recording, cut, other documents).
int replay(const ReplayOptions& options, Console& console);

}  // namespace probewright::text
