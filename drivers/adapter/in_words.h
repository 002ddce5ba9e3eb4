#pragma once
#include <span>
#include <string>
#include <vector>

#include "drivers/wire/frame.h"

namespace probewright::adapter {

/// One frame as a person reads it: "set drive #3545: red_uA 20000, infrared_uA 20000"; "reply to ...", "block ...",
/// "error reply ...". A payload that is not what WIRE.md says is told in hexadecimal.
std::string in_words(const wire::Frame& frame);

/// The frames of one direction, in words, as bytes come. Damaged ones are told as that.
class Listener {
 public:
  std::vector<std::string> hear(std::span<const std::byte> bytes);
  /// Whether the beginning of a frame is held.
  bool in_mid_message() const { return frames_.partial(); }

 private:
  wire::FrameReader frames_;
  std::uint64_t damaged_ = 0;
};

}  // namespace probewright::adapter
