#pragma once
#include <cstddef>
#include <cstdint>
#include <deque>
#include <optional>
#include <span>
#include <string>

namespace probewright::wire {

/// Gathers bytes that come in pieces and yields whole lines without their LF. A line that grows beyond `max_bytes`
/// is dropped up to its LF and counted.
///
/// Answers of the phantom hold blocks, whose bytes may be LF: with `Blocks::inside` an LF within a definite-length
/// block (outside quotes) belongs to the line. A damaged block header can swallow what follows, up to max_bytes; the
/// reader's owner then has its deadline, and clear().
class LineReader {
 public:
  enum class Blocks { none, inside };
  explicit LineReader(std::size_t max_bytes, Blocks blocks = Blocks::none) : max_bytes_(max_bytes), blocks_(blocks) {}

  /// Takes all of `bytes`; the lines that they complete wait for next().
  void feed(std::span<const std::byte> bytes);
  /// The oldest line that nobody took; with Blocks::none a CR before the LF is dropped.
  std::optional<std::string> next();
  /// How many lines were dropped as too long.
  std::uint64_t overlong() const { return overlong_; }
  /// Whether bytes of an unfinished line are held.
  bool partial() const { return !held_.empty() || dropping_; }
  /// Forgets the unfinished line and the lines that nobody took; the count stays.
  void clear();

 private:
  enum class Place { plain, quoted, after_hash, block_length, block_content };
  void take(char c);
  void follow(char c);
  void finish();

  std::size_t max_bytes_;
  Blocks blocks_;
  std::string held_;
  bool dropping_ = false;
  Place place_ = Place::plain;
  char quote_ = '"';
  int digits_left_ = 0;
  std::size_t block_left_ = 0;
  std::deque<std::string> ready_;
  std::uint64_t overlong_ = 0;
};

}  // namespace probewright::wire
