#pragma once
#include <cstdint>
#include <map>
#include <string>
#include <string_view>
#include <variant>
#include <vector>

#include "station/base/result.h"

namespace probewright {

/// The JSON of ledger bodies: objects, arrays, strings, integers below 2^53, true/false, null. No floating point, so
/// the canonical form of RFC 8785 needs no number rules. Keys are ASCII snake_case and come out sorted.
class Body {
 public:
  using Object = std::map<std::string, Body>;
  using Array = std::vector<Body>;
  Body() : value_(nullptr) {}
  Body(std::nullptr_t) : value_(nullptr) {}
  Body(bool b) : value_(b) {}
  Body(std::int64_t i) : value_(i) {}
  Body(int i) : value_(std::int64_t{i}) {}
  Body(std::string s) : value_(std::move(s)) {}
  Body(std::string_view s) : value_(std::string{s}) {}
  Body(const char* s) : value_(std::string{s}) {}
  Body(Object o) : value_(std::move(o)) {}
  Body(Array a) : value_(std::move(a)) {}

  const Object* object() const { return std::get_if<Object>(&value_); }
  Object* object() { return std::get_if<Object>(&value_); }
  const Array* array() const { return std::get_if<Array>(&value_); }
  const std::string* string() const { return std::get_if<std::string>(&value_); }
  const std::int64_t* integer() const { return std::get_if<std::int64_t>(&value_); }
  const bool* boolean() const { return std::get_if<bool>(&value_); }
  bool is_null() const { return std::holds_alternative<std::nullptr_t>(value_); }
  /// Member of an object, or nullptr.
  const Body* find(std::string_view key) const;
  /// Text or integer of a member, or the fallback.
  std::string text(std::string_view key, std::string_view fallback = {}) const;
  std::int64_t number(std::string_view key, std::int64_t fallback = 0) const;

  bool operator==(const Body&) const = default;

 private:
  std::variant<std::nullptr_t, bool, std::int64_t, std::string, Array, Object> value_;
};

/// Canonical bytes (RFC 8785 for this subset): no white space, keys sorted by UTF-16 code units (ASCII: by byte),
/// strings escaped minimally. Throws std::invalid_argument for an integer of 2^53 or more, a key that is not
/// ASCII snake_case, or invalid UTF-8: those are our own mistakes.
std::string canonical(const Body& body);
/// Reads canonical bytes back, strictly: anything not in canonical form is refused (body_malformed with the offset).
Result<Body> parse_body(std::string_view bytes, std::string_view where = {});

}  // namespace probewright
