#include "drivers/wire/line_reader.h"

namespace probewright::wire {

void LineReader::feed(std::span<const std::byte> bytes) {
  for (const std::byte byte : bytes) take(static_cast<char>(byte));
}

void LineReader::take(char c) {
  if (c == '\n' && place_ != Place::block_content) {
    finish();
    return;
  }
  if (dropping_) return;
  if (held_.size() == max_bytes_) {  // from here on only the LF counts, wherever the broken line believes to be
    held_.clear();
    dropping_ = true;
    place_ = Place::plain;
    ++overlong_;
    if (c == '\n') finish();
    return;
  }
  held_.push_back(c);
  if (blocks_ == Blocks::inside) follow(c);
}

void LineReader::follow(char c) {
  switch (place_) {
    case Place::plain:
      if (c == '"' || c == '\'') {
        place_ = Place::quoted;
        quote_ = c;
      } else if (c == '#') {
        place_ = Place::after_hash;
      }
      return;
    case Place::quoted:  // a doubled quote ends and begins again, which comes to the same
      if (c == quote_) place_ = Place::plain;
      return;
    case Place::after_hash:
      digits_left_ = c - '0';
      block_left_ = 0;
      place_ = c >= '1' && c <= '9' ? Place::block_length : Place::plain;
      return;
    case Place::block_length:
      if (c < '0' || c > '9') {
        place_ = Place::plain;
        return;
      }
      block_left_ = block_left_ * 10 + static_cast<std::size_t>(c - '0');
      if (--digits_left_ == 0) place_ = block_left_ > 0 ? Place::block_content : Place::plain;
      return;
    case Place::block_content:
      if (--block_left_ == 0) place_ = Place::plain;
      return;
  }
}

void LineReader::finish() {
  if (!dropping_) {
    // With blocks a CR may be the last byte of one.
    if (blocks_ == Blocks::none && held_.ends_with('\r')) held_.pop_back();
    ready_.push_back(std::move(held_));
  }
  held_.clear();
  dropping_ = false;
  place_ = Place::plain;
}

std::optional<std::string> LineReader::next() {
  if (ready_.empty()) return std::nullopt;
  std::string line = std::move(ready_.front());
  ready_.pop_front();
  return line;
}

void LineReader::clear() {
  held_.clear();
  ready_.clear();
  dropping_ = false;
  place_ = Place::plain;
}

}  // namespace probewright::wire
