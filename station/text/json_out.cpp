#include "station/text/json_out.h"

#include <cmath>
#include <stdexcept>

#include "station/base/numbers.h"
#include "station/base/utf8.h"

namespace probewright::text {
namespace {

void indent(std::string& out, int depth) { out.append(static_cast<std::size_t>(2 * depth), ' '); }

std::string control_character(unsigned char c) {
  constexpr std::string_view digits = "0123456789abcdef";
  return std::string{"\\u00"} + digits[c >> 4] + digits[c & 15];
}

void write_character(unsigned char c, std::string& out) {
  if (c == '"' || c == '\\')
    out += '\\', out += static_cast<char>(c);
  else if (c == '\n')
    out += "\\n";
  else if (c == '\t')
    out += "\\t";
  else if (c < 0x20 || c == 0x7f)
    out += control_character(c);
  else
    out += static_cast<char>(c);
}

/// File names and device texts may hold any bytes; what is not UTF-8 is shown as the replacement character.
std::string made_utf8(std::string_view text) {
  std::string good;
  while (true) {
    const std::size_t bad = first_bad_utf8(text);
    if (bad == std::string_view::npos) return good.append(text);
    good.append(text.substr(0, bad)).append("\xEF\xBF\xBD");
    text.remove_prefix(bad + 1);
  }
}

void write_string(std::string_view text, std::string& out) {
  out += '"';
  for (const char c : made_utf8(text)) write_character(static_cast<unsigned char>(c), out);
  out += '"';
}

}  // namespace

Json& Json::set(std::string_view key, Json value) {
  auto* members = std::get_if<Members>(&value_);
  if (!members) throw std::logic_error("a member needs a JSON object");
  members->emplace_back(std::string{key}, std::move(value));
  return *this;
}

Json& Json::add(Json value) {
  auto* items = std::get_if<Items>(&value_);
  if (!items) throw std::logic_error("an item needs a JSON array");
  items->push_back(std::move(value));
  return *this;
}

std::string Json::text() const {
  std::string out;
  write(out, 0);
  return out + "\n";
}

void Json::write(std::string& out, int depth) const {
  if (const auto* flag = std::get_if<bool>(&value_))
    out += *flag ? "true" : "false";
  else if (const auto* whole = std::get_if<std::int64_t>(&value_))
    out += std::to_string(*whole);
  else if (const auto* number = std::get_if<double>(&value_))
    out += std::isfinite(*number) ? shortest(*number) : "null";
  else if (const auto* text = std::get_if<std::string>(&value_))
    write_string(*text, out);
  else if (const auto* items = std::get_if<Items>(&value_))
    write_items(*items, out, depth);
  else if (const auto* members = std::get_if<Members>(&value_))
    write_members(*members, out, depth);
  else
    out += "null";
}

void Json::write_members(const Members& members, std::string& out, int depth) const {
  if (members.empty()) {
    out += "{}";
    return;
  }
  out += "{\n";
  for (std::size_t i = 0; i < members.size(); ++i) {
    indent(out, depth + 1);
    write_string(members[i].first, out);
    out += ": ";
    members[i].second.write(out, depth + 1);
    out += i + 1 < members.size() ? ",\n" : "\n";
  }
  indent(out, depth);
  out += '}';
}

void Json::write_items(const Items& items, std::string& out, int depth) const {
  if (items.empty()) {
    out += "[]";
    return;
  }
  out += "[\n";
  for (std::size_t i = 0; i < items.size(); ++i) {
    indent(out, depth + 1);
    items[i].write(out, depth + 1);
    out += i + 1 < items.size() ? ",\n" : "\n";
  }
  indent(out, depth);
  out += ']';
}

}  // namespace probewright::text
