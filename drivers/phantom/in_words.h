#pragma once
#include <span>
#include <string>
#include <vector>

#include "drivers/wire/line_reader.h"

namespace probewright::phantom {

/// One line of the phantom's protocol as a person reads it: its text without the checksum, whether that was right, and
/// a spectrum in a few words instead of its block.
std::string in_words(const std::string& line);

/// The lines of one direction, in words, as bytes come. Empty ones are left out.
class Listener {
 public:
  std::vector<std::string> hear(std::span<const std::byte> bytes);
  bool in_mid_message() const { return lines_.partial(); }

 private:
  wire::LineReader lines_{8192, wire::LineReader::Blocks::inside};
  std::uint64_t overlong_ = 0;
};

}  // namespace probewright::phantom
