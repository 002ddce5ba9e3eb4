#pragma once
#include <string>
#include <string_view>
#include <vector>

#include "station/text/console.h"

namespace probewright::text {

/// A block of lines at the bottom of a terminal that is drawn over and over while something goes on. Lines are cut to
/// the terminal's width, so the block is as high as it has lines. Only where the console's stream is a terminal;
/// elsewhere nothing is drawn, and say() prints plainly. One thread at a time; the console must outlive it.
class LiveBlock {
 public:
  enum class On { out, err };
  LiveBlock(Console& console, On stream);
  LiveBlock(const LiveBlock&) = delete;
  LiveBlock& operator=(const LiveBlock&) = delete;
  ~LiveBlock();

  bool live() const { return live_; }
  /// Draws the block anew; prints nothing when it would look the same.
  void draw(const std::vector<std::string>& lines);
  /// A line that stays, above the block.
  void say(std::string_view line);
  /// Takes the block away.
  void remove();

 private:
  void erase();
  void put();
  std::ostream& stream_;
  int descriptor_;
  bool live_;
  std::vector<std::string> lines_, shown_;
};

/// The first `columns` characters of UTF-8 text.
std::string_view cut_to(std::string_view text, std::size_t columns);

}  // namespace probewright::text
