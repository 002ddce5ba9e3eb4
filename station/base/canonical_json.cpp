#include "station/base/canonical_json.h"

#include <algorithm>
#include <charconv>
#include <stdexcept>

#include "station/base/utf8.h"

namespace probewright {
namespace {

constexpr std::int64_t bound = std::int64_t{1} << 53;  // RFC 8259 6, RFC 7493 2.2: exact in every reader from here down
constexpr int max_depth = 64;
constexpr char hex_digits[] = "0123456789abcdef";

bool is_key(std::string_view key) {
  return !key.empty() && std::all_of(key.begin(), key.end(), [](char c) {
    return (c >= 'a' && c <= 'z') || (c >= '0' && c <= '9') || c == '_';
  });
}

/// The letter after the backslash for a character that has a short escape, else 0 (RFC 8785 3.2.2.2).
char short_escape(char c) {
  switch (c) {
    case '"':
      return '"';
    case '\\':
      return '\\';
    case '\b':
      return 'b';
    case '\t':
      return 't';
    case '\n':
      return 'n';
    case '\f':
      return 'f';
    case '\r':
      return 'r';
    default:
      return 0;
  }
}

void write_string(std::string_view text, std::string& out) {
  if (first_bad_utf8(text) != std::string_view::npos) throw std::invalid_argument("canonical: a string is not UTF-8");
  out += '"';
  for (const char c : text) {
    const auto code = static_cast<unsigned char>(c);
    if (const char letter = short_escape(c)) {
      out += {'\\', letter};
    } else if (code < 0x20) {
      out += "\\u00";
      out += {hex_digits[code >> 4], hex_digits[code & 15]};
    } else {
      out += c;
    }
  }
  out += '"';
}

void write(const Body& body, std::string& out, int depth);

void write_integer(std::int64_t value, std::string& out) {
  if (value >= bound || value <= -bound) throw std::invalid_argument("canonical: an integer of 2^53 or more");
  out += std::to_string(value);
}

void write_array(const Body::Array& array, std::string& out, int depth) {
  char before = '[';
  for (const Body& element : array) {
    out += before;
    before = ',';
    write(element, out, depth);
  }
  out += array.empty() ? "[]" : "]";
}

void write_object(const Body::Object& object, std::string& out, int depth) {
  char before = '{';
  for (const auto& [key, value] : object) {  // std::map keeps ASCII keys in the wanted order
    if (!is_key(key)) throw std::invalid_argument("canonical: the key '" + key + "' is not ASCII snake_case");
    out += before;
    before = ',';
    write_string(key, out);
    out += ':';
    write(value, out, depth);
  }
  out += object.empty() ? "{}" : "}";
}

void write(const Body& body, std::string& out, int depth) {
  if (depth > max_depth) throw std::invalid_argument("canonical: nested too deeply");
  if (const auto* object = body.object()) write_object(*object, out, depth + 1);
  if (const auto* array = body.array()) write_array(*array, out, depth + 1);
  if (const auto* text = body.string()) write_string(*text, out);
  if (const auto* integer = body.integer()) write_integer(*integer, out);
  if (const auto* boolean = body.boolean()) out += *boolean ? "true" : "false";
  if (body.is_null()) out += "null";
}

/// Reads only what `canonical` writes; every departure from it throws NotCanonical with the reading position kept.
class Reader {
 public:
  struct NotCanonical {};
  explicit Reader(std::string_view bytes) : bytes_(bytes) {}

  Body whole() {
    Body body = value(0);
    require(at_ == bytes_.size());
    return body;
  }
  std::size_t at() const { return at_; }

 private:
  static void require(bool holds) {
    if (!holds) throw NotCanonical{};
  }
  char peek() const { return at_ < bytes_.size() ? bytes_[at_] : '\0'; }
  bool skip(char c) {
    const bool there = at_ < bytes_.size() && bytes_[at_] == c;
    if (there) ++at_;
    return there;
  }
  void take(std::string_view word) {
    require(bytes_.substr(at_).starts_with(word));
    at_ += word.size();
  }

  Body value(int depth) {
    require(depth <= max_depth);
    switch (peek()) {
      case '{':
        return object(depth + 1);
      case '[':
        return array(depth + 1);
      case '"':
        return Body{string()};
      case 't':
        return take("true"), Body{true};
      case 'f':
        return take("false"), Body{false};
      case 'n':
        return take("null"), Body{};
      default:
        return Body{integer()};
    }
  }

  Body object(int depth) {
    Body::Object members;
    take("{");
    while (!skip('}')) {
      if (!members.empty()) take(",");
      const std::size_t start = at_;
      std::string key = string();
      if (!is_key(key) || (!members.empty() && key <= members.rbegin()->first)) fail_at(start);
      take(":");
      members.emplace_hint(members.end(), std::move(key), value(depth));
    }
    return members;
  }

  Body array(int depth) {
    Body::Array elements;
    take("[");
    while (!skip(']')) {
      if (!elements.empty()) take(",");
      elements.push_back(value(depth));
    }
    return elements;
  }

  std::int64_t integer() {
    const std::size_t start = at_;
    std::int64_t value = 0;
    const char* const end = bytes_.data() + bytes_.size();
    const auto [stop, error] = std::from_chars(bytes_.data() + at_, end, value);
    // Leading zeros and "-0" read as a number too; the canonical text of that number is another.
    const auto length = static_cast<std::size_t>(stop - (bytes_.data() + at_));
    require(error == std::errc{} && value < bound && value > -bound);
    require(std::to_string(value) == bytes_.substr(start, length));
    at_ += length;
    return value;
  }

  std::string string() {
    take("\"");
    const std::size_t start = at_;
    std::string text;
    while (!skip('"')) {
      require(at_ < bytes_.size() && static_cast<unsigned char>(bytes_[at_]) >= 0x20);
      text += skip('\\') ? escaped() : bytes_[at_++];
    }
    if (first_bad_utf8(text) != std::string::npos) fail_at(start);
    return text;
  }

  char escaped() {
    constexpr std::string_view letters = "\"\\btnfr", meanings = "\"\\\b\t\n\f\r";
    if (const auto which = letters.find(peek()); which != std::string_view::npos && at_ < bytes_.size())
      return ++at_, meanings[which];
    take("u00");
    const unsigned code = hex_digit() * 16 + hex_digit();
    require(code < 0x20 && short_escape(static_cast<char>(code)) == 0);  // only where there is no shorter way
    return static_cast<char>(code);
  }
  unsigned hex_digit() {
    const auto digit = std::string_view{hex_digits}.find(peek());
    require(digit != std::string_view::npos && at_ < bytes_.size());
    ++at_;
    return static_cast<unsigned>(digit);
  }
  [[noreturn]] void fail_at(std::size_t offset) {
    at_ = offset;
    throw NotCanonical{};
  }

  std::string_view bytes_;
  std::size_t at_ = 0;
};

}  // namespace

const Body* Body::find(std::string_view key) const {
  const Object* members = object();
  if (members == nullptr) return nullptr;
  const auto found = members->find(std::string{key});
  return found == members->end() ? nullptr : &found->second;
}

std::string Body::text(std::string_view key, std::string_view fallback) const {
  const Body* member = find(key);
  const std::string* text = member == nullptr ? nullptr : member->string();
  return text == nullptr ? std::string{fallback} : *text;
}

std::int64_t Body::number(std::string_view key, std::int64_t fallback) const {
  const Body* member = find(key);
  const std::int64_t* number = member == nullptr ? nullptr : member->integer();
  return number == nullptr ? fallback : *number;
}

std::string canonical(const Body& body) {
  std::string bytes;
  write(body, bytes, 0);
  return bytes;
}

Result<Body> parse_body(std::string_view bytes, std::string_view where) {
  Reader reader{bytes};
  try {
    return reader.whole();
  } catch (const Reader::NotCanonical&) {
    return Problem{"body_malformed", where, {{"offset", std::to_string(reader.at())}}};
  }
}

}  // namespace probewright
