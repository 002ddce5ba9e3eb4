#pragma once
#include <concepts>
#include <cstdint>
#include <optional>
#include <string>
#include <string_view>
#include <utility>
#include <variant>
#include <vector>

namespace probewright::text {

/// A JSON value on its way out (RFC 8259). Members come out in the order in which they were set.
class Json {
 public:
  static Json object() { return Json{Members{}}; }
  static Json array() { return Json{Items{}}; }

  Json(std::nullptr_t = nullptr) {}
  Json(bool value) : value_(value) {}
  template <std::integral T>
    requires(!std::same_as<T, bool>)
  Json(T value) : value_(static_cast<std::int64_t>(value)) {}
  Json(double value) : value_(value) {}  ///< not finite: null, since JSON has no such number
  Json(const char* value) : value_(std::string{value}) {}
  Json(std::string_view value) : value_(std::string{value}) {}
  Json(std::string value) : value_(std::move(value)) {}
  template <class T>
  Json(const std::optional<T>& value) {
    if (value) *this = Json(*value);
  }

  /// Adds a member to an object; the key must be new. Throws std::logic_error when this is no object.
  Json& set(std::string_view key, Json value);
  /// Adds an item to an array. Throws std::logic_error when this is no array.
  Json& add(Json value);

  /// Indented by two, with a line feed at the end. Numbers are the shortest text that reads back as the same double;
  /// bytes that are not UTF-8 become U+FFFD.
  std::string text() const;

 private:
  using Members = std::vector<std::pair<std::string, Json>>;
  using Items = std::vector<Json>;
  explicit Json(Members members) : value_(std::move(members)) {}
  explicit Json(Items items) : value_(std::move(items)) {}
  void write(std::string& out, int depth) const;
  void write_members(const Members& members, std::string& out, int depth) const;
  void write_items(const Items& items, std::string& out, int depth) const;

  std::variant<std::nullptr_t, bool, std::int64_t, double, std::string, Items, Members> value_;
};

}  // namespace probewright::text
