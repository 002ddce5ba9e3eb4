#include "db/glance.h"

#include <charconv>

namespace probewright::db {

bool Glance::take(std::string_view bytes) {
  bytes_ = bytes;
  at_ = 0;
  depth_ = 0;
  nodes_.clear();
  return next_is('{') && value({}) && at_ == bytes_.size();
}

bool Glance::value(std::string_view key) {
  if (at_ >= bytes_.size() || ++depth_ > deepest) return false;
  const auto place = static_cast<std::uint32_t>(nodes_.size());
  nodes_.push_back({Kind::null, key, {}, 0});
  std::string_view text;
  bool good = false;
  Kind kind = Kind::null;
  switch (bytes_[at_]) {
    case '{':
      kind = Kind::object, good = members(place);
      break;
    case '[':
      kind = Kind::array, good = items(place);
      break;
    case '"':
      kind = Kind::string, good = plain_string(text);
      break;
    case 't':
      kind = Kind::yes, good = word("true");
      break;
    case 'f':
      kind = Kind::no, good = word("false");
      break;
    case 'n':
      good = word("null");
      break;
    default:
      kind = Kind::integer, good = plain_integer(text);
  }
  --depth_;
  nodes_[place].kind = kind;
  nodes_[place].text = text;
  nodes_[place].end = static_cast<std::uint32_t>(nodes_.size());
  return good;
}

/// Keys of a-z 0-9 _ only, each after the one before it.
bool Glance::members(std::uint32_t) {
  ++at_;
  if (skip('}')) return true;
  std::string_view before;
  do {
    std::string_view key;
    if (!plain_string(key) || key.empty() || key <= before || !skip(':')) return false;
    for (const char c : key)
      if (!((c >= 'a' && c <= 'z') || (c >= '0' && c <= '9') || c == '_')) return false;
    before = key;
    if (!value(key)) return false;
  } while (skip(','));
  return skip('}');
}

bool Glance::items(std::uint32_t) {
  ++at_;
  if (skip(']')) return true;
  do
    if (!value({})) return false;
  while (skip(','));
  return skip(']');
}

bool Glance::plain_string(std::string_view& text) {
  if (!skip('"')) return false;
  const std::size_t begin = at_;
  for (; at_ < bytes_.size(); ++at_) {
    const auto c = static_cast<unsigned char>(bytes_[at_]);
    if (c == '"') {
      text = bytes_.substr(begin, at_++ - begin);
      return true;
    }
    if (c < 0x20 || c > 0x7e || c == '\\') return false;
  }
  return false;
}

/// At most 15 digits: surely below 2^53.
bool Glance::plain_integer(std::string_view& text) {
  const std::size_t begin = at_;
  const bool negative = skip('-');
  const std::size_t digits = at_;
  while (at_ < bytes_.size() && bytes_[at_] >= '0' && bytes_[at_] <= '9') ++at_;
  const std::size_t count = at_ - digits;
  if (count == 0 || count > 15 || (bytes_[digits] == '0' && (count > 1 || negative))) return false;
  text = bytes_.substr(begin, at_ - begin);
  return true;
}

bool Glance::word(std::string_view text) {
  if (bytes_.substr(at_, text.size()) != text) return false;
  at_ += text.size();
  return true;
}

std::optional<std::uint32_t> Glance::find(std::uint32_t object, std::string_view key) const {
  for (std::uint32_t node = first(object); node < nodes_[object].end; node = nodes_[node].end)
    if (nodes_[node].key == key) return node;
  return std::nullopt;
}

std::int64_t Glance::integer(const Node& node) {
  std::int64_t value = 0;
  std::from_chars(node.text.data(), node.text.data() + node.text.size(), value);
  return value;
}

}  // namespace probewright::db
