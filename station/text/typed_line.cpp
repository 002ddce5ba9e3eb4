#include "station/text/typed_line.h"

#include <termios.h>
#include <unistd.h>

#include <algorithm>

namespace probewright::text {
namespace {

constexpr char end_of_input = 4, backspace = 8, clear_all = 21, escape = 27, group_separator = 29, erase = 127;

}  // namespace

/// Control sequences of ECMA-48 begin with ESC [ and end with a character from @ to ~.
bool TypedLine::in_sequence(char c) {
  if (escape_ == Escape::none) {
    if (c == escape) escape_ = Escape::begun;
    return c == escape;
  }
  const bool goes_on = escape_ == Escape::begun ? c == '[' || c == 'O' : c < '@' || c > '~';
  escape_ = goes_on ? Escape::inside : Escape::none;
  return true;
}

/// One character of UTF-8.
void TypedLine::back() {
  while (!text_.empty() && (static_cast<unsigned char>(text_.back()) & 0xC0) == 0x80) text_.pop_back();
  if (!text_.empty()) text_.pop_back();
}

std::vector<std::string> TypedLine::feed(std::string_view bytes) {
  std::vector<std::string> lines;
  for (const char c : bytes) {
    if (in_sequence(c)) continue;
    if (c == '\n' || c == '\r') {
      lines.push_back(std::move(text_));
      text_.clear();
    } else if (c == erase || c == backspace) {
      back();
    } else if (c == clear_all) {
      text_.clear();
    } else if (c == end_of_input) {
      ended_ = ended_ || text_.empty();
    } else if (static_cast<unsigned char>(c) >= ' ' || c == '\t' || c == group_separator) {
      text_ += c;  // a scanner's group separator (ASCII 29) belongs to the code
    }
  }
  return lines;
}

std::string shown_typed(std::string_view text, const std::vector<std::string>& badges) {
  const bool may_be_a_badge =
      std::any_of(badges.begin(), badges.end(), [&](const std::string& badge) { return badge.starts_with(text); });
  return may_be_a_badge ? std::string(text.size(), '.') : std::string{text};
}

struct OwnEcho::Before {
  termios settings{};
};

OwnEcho::OwnEcho() {
  Before before;
  if (tcgetattr(STDIN_FILENO, &before.settings) != 0) return;
  before_ = std::make_unique<Before>(before);
  termios now = before.settings;
  now.c_lflag &= ~static_cast<tcflag_t>(ICANON | ECHO);
  now.c_cc[VMIN] = 1;
  now.c_cc[VTIME] = 0;
  tcsetattr(STDIN_FILENO, TCSANOW, &now);
}

OwnEcho::~OwnEcho() {
  if (before_) tcsetattr(STDIN_FILENO, TCSANOW, &before_->settings);
}

}  // namespace probewright::text
