#pragma once
#include <cstdint>
#include <optional>
#include <string_view>
#include <vector>

namespace probewright::db {

/// A body taken apart without copying anything, for walks over millions of entries. Only bodies in canonical form whose
/// strings are plain ASCII without escapes are taken; for any other, parse_body decides. Views live as long as the
/// bytes. One object is used again and again.
class Glance {
 public:
  enum class Kind : std::uint8_t { null, yes, no, integer, string, array, object };
  struct Node {
    Kind kind = Kind::null;
    std::string_view key;   ///< of a member
    std::string_view text;  ///< of a string or an integer
    std::uint32_t end = 0;  ///< place of the node after this one and all in it
  };

  /// False where the body is not of that simple kind.
  bool take(std::string_view bytes);

  const Node& at(std::uint32_t node) const { return nodes_[node]; }
  /// The first node in an object or array; at(node).end where it is empty.
  static std::uint32_t first(std::uint32_t node) { return node + 1; }
  /// A member of an object, or nothing.
  std::optional<std::uint32_t> find(std::uint32_t object, std::string_view key) const;
  /// The value of an integer node.
  static std::int64_t integer(const Node& node);

 private:
  bool value(std::string_view key);
  bool members(std::uint32_t node);
  bool items(std::uint32_t node);
  bool plain_string(std::string_view& text);
  bool plain_integer(std::string_view& text);
  bool word(std::string_view text);
  bool next_is(char c) { return at_ < bytes_.size() && bytes_[at_] == c; }
  bool skip(char c) { return next_is(c) && (++at_, true); }

  static constexpr int deepest = 16;
  std::string_view bytes_;
  std::size_t at_ = 0;
  int depth_ = 0;
  std::vector<Node> nodes_;
};

}  // namespace probewright::db
