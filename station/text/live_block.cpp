#include "station/text/live_block.h"

#include <sys/ioctl.h>
#include <unistd.h>

#include <algorithm>
#include <ostream>

namespace probewright::text {
namespace {

// ECMA-48: cursor up, and clear from the cursor to the end of the screen or line.
constexpr std::string_view up_one = "\x1b[A", clear_below = "\x1b[J", clear_line = "\x1b[K";
constexpr std::size_t usual_columns = 80;

std::size_t columns_of(int descriptor) {
  winsize size{};
  return ioctl(descriptor, TIOCGWINSZ, &size) == 0 && size.ws_col > 0 ? size.ws_col : usual_columns;
}

}  // namespace

std::string_view cut_to(std::string_view text, std::size_t columns) {
  std::size_t characters = 0;
  for (std::size_t at = 0; at < text.size(); ++at) {
    const bool begins = (static_cast<unsigned char>(text[at]) & 0xC0) != 0x80;
    if (begins && ++characters > columns) return text.substr(0, at);
  }
  return text;
}

LiveBlock::LiveBlock(Console& console, On stream)
    : stream_(stream == On::out ? console.out_ : console.err_),
      descriptor_(stream == On::out ? STDOUT_FILENO : STDERR_FILENO),
      live_(!console.json() &&
            (stream == On::out ? console.manner_.out_is_terminal : console.manner_.err_is_terminal)) {}

LiveBlock::~LiveBlock() { remove(); }

void LiveBlock::draw(const std::vector<std::string>& lines) {
  if (!live_) return;
  lines_ = lines;
  const std::size_t columns = columns_of(descriptor_);
  for (std::string& line : lines_) line = cut_to(line, columns - 1);
  if (lines_ == shown_) return;
  erase();
  put();
}

void LiveBlock::say(std::string_view line) {
  erase();
  stream_ << line << '\n';
  put();
}

void LiveBlock::remove() {
  erase();
  lines_.clear();
  stream_ << std::flush;
}

/// Back to the block's first line, and everything below gone.
void LiveBlock::erase() {
  if (shown_.empty()) return;
  for (std::size_t i = 1; i < shown_.size(); ++i) stream_ << up_one;
  stream_ << '\r' << clear_below;
  shown_.clear();
}

/// The cursor stays at the end of the last line.
void LiveBlock::put() {
  for (std::size_t i = 0; i < lines_.size(); ++i) stream_ << (i == 0 ? "" : "\n") << lines_[i] << clear_line;
  shown_ = lines_;
  stream_ << std::flush;
}

}  // namespace probewright::text
