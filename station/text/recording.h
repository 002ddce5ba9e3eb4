#pragma once
#include <limits>
#include <string>

#include "station/text/console.h"

namespace probewright::text {

/// A part of a recording: seconds since it began.
struct RecordingPart {
  double from_s = 0.0;
  double to_s = std::numeric_limits<double>::infinity();
};

struct RecordingShowOptions {
  std::string folder;
  std::string device;  ///< "nest1-phantom"; empty: all, in the order of time
  RecordingPart part;
};
/// `recording show`: its messages as a page of text. Exit status: 0, 2 refused input.
int recording_show(const RecordingShowOptions& options, Console& console);

struct RecordingCutOptions {
  std::string folder;
  std::string into;  ///< a new folder
  RecordingPart part;
};
/// `recording cut`: a part of a recording as a recording of its own. Exit status: 0, 2 refused input.
int recording_cut(const RecordingCutOptions& options, Console& console);

}  // namespace probewright::text
