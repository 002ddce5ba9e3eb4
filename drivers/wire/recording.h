#pragma once
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "station/base/digest.h"
#include "station/base/result.h"
#include "station/base/times.h"

namespace probewright::wire {

/// One thing that happened on a device's line, as the station saw it.
struct WireEvent {
  enum class Kind {
    opened,      ///< the port was opened; words: its name
    not_opened,  ///< it could not be; words: why
    sent,        ///< bytes to the device
    received,    ///< bytes from the device
    lost,        ///< the port is gone; words: why
  };
  Duration at{0};  ///< since the recording began
  Kind kind = Kind::opened;
  Bytes bytes{};
  std::string words{};
  bool operator==(const WireEvent&) const = default;
};

/// All that happened on one line, in order.
struct LineRecording {
  std::string device;  ///< "nest1-phantom"
  std::vector<WireEvent> events;
  bool operator==(const LineRecording&) const = default;
};

/// The text of one file of a recording (RECORDING.md). Control characters in words become blanks.
std::string line_text(const WireEvent& event);
std::string recording_text(const LineRecording& recording);
/// Reads it back, strictly. Errors: recording_malformed (line and reason).
Result<LineRecording> parse_recording(std::string_view text, std::string_view where);

/// What happened from `from` on and before `to`. Times stay as they are.
LineRecording cut(const LineRecording& recording, Duration from, Duration to);

/// "12.345678901": seconds with nine digits after the point.
std::string seconds_text(Duration at);

/// A refusal to open as words of an event, and back; nothing where the words hold none.
std::string words_of_problem(const Problem& problem);
std::optional<Problem> problem_in_words(std::string_view words);

}  // namespace probewright::wire
