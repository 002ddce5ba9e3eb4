#include "drivers/wire/recording.h"

#include <algorithm>
#include <array>
#include <charconv>

#include "station/base/canonical_json.h"

namespace probewright::wire {
namespace {

using Kind = WireEvent::Kind;

constexpr std::string_view first_line = "probewright line recording 1";
constexpr std::array<std::pair<Kind, std::string_view>, 5> kinds{{{Kind::opened, "opened"},
                                                                  {Kind::not_opened, "not-opened"},
                                                                  {Kind::sent, ">"},
                                                                  {Kind::received, "<"},
                                                                  {Kind::lost, "lost"}}};

bool has_bytes(Kind kind) { return kind == Kind::sent || kind == Kind::received; }

std::string_view word_of(Kind kind) {
  return std::find_if(kinds.begin(), kinds.end(), [kind](const auto& k) { return k.first == kind; })->second;
}

std::string hex_of(const Bytes& bytes) {
  constexpr std::string_view digits = "0123456789abcdef";
  std::string text;
  text.reserve(2 * bytes.size());
  for (const std::byte byte : bytes) {
    const auto value = std::to_integer<unsigned>(byte);
    text += digits[value >> 4];
    text += digits[value & 15u];
  }
  return text;
}

std::optional<Bytes> bytes_in(std::string_view hex) {
  if (hex.size() % 2 != 0) return std::nullopt;
  Bytes bytes;
  bytes.reserve(hex.size() / 2);
  for (std::size_t i = 0; i < hex.size(); i += 2) {
    unsigned value = 0;
    const auto [end, error] = std::from_chars(hex.data() + i, hex.data() + i + 2, value, 16);
    if (error != std::errc{} || end != hex.data() + i + 2) return std::nullopt;
    bytes.push_back(static_cast<std::byte>(value));
  }
  return bytes;
}

/// Digits alone, so no sign and no blank.
std::optional<std::int64_t> digits_in(std::string_view text) {
  if (text.empty() || text.size() > 18) return std::nullopt;
  if (!std::all_of(text.begin(), text.end(), [](char c) { return c >= '0' && c <= '9'; })) return std::nullopt;
  std::int64_t value = 0;
  std::from_chars(text.data(), text.data() + text.size(), value);
  return value;
}

std::optional<Duration> time_in(std::string_view text) {
  const auto point = text.find('.');
  if (point == std::string_view::npos || text.size() - point != 10) return std::nullopt;
  const auto whole = digits_in(text.substr(0, point)), nanoseconds = digits_in(text.substr(point + 1));
  if (!whole || !nanoseconds || *whole > 1'000'000'000) return std::nullopt;
  return std::chrono::seconds(*whole) + Duration{*nanoseconds};
}

/// Takes the first word off a line.
std::string_view take_word(std::string_view& line) {
  const auto blank = std::min(line.find(' '), line.size());
  const std::string_view word = line.substr(0, blank);
  line.remove_prefix(std::min(blank + 1, line.size()));
  return word;
}

/// The event of a line, or why it is none.
boost::system::result<WireEvent, std::string> parse_event(std::string_view line) {
  WireEvent event;
  const auto time = time_in(take_word(line));
  if (!time) return std::string{"a line begins with seconds and nine digits after the point"};
  event.at = *time;
  const std::string_view word = take_word(line);
  const auto kind = std::find_if(kinds.begin(), kinds.end(), [word](const auto& k) { return k.second == word; });
  if (kind == kinds.end()) return std::string{"after the time stands opened, not-opened, >, < or lost"};
  event.kind = kind->first;
  if (!has_bytes(event.kind)) {
    event.words = line;
    return event;
  }
  auto bytes = bytes_in(line);
  if (!bytes || bytes->empty()) return std::string{"bytes are written as pairs of hexadecimal digits"};
  event.bytes = *std::move(bytes);
  return event;
}

}  // namespace

std::string seconds_text(Duration at) {
  std::string nanoseconds = std::to_string(at.count() % 1'000'000'000);
  nanoseconds.insert(0, 9 - nanoseconds.size(), '0');
  return std::to_string(at.count() / 1'000'000'000) + "." + nanoseconds;
}

std::string line_text(const WireEvent& event) {
  std::string line = seconds_text(event.at) + " " + std::string(word_of(event.kind));
  if (has_bytes(event.kind)) {
    line += " " + hex_of(event.bytes);
  } else if (!event.words.empty()) {
    line += " ";
    for (const char c : event.words) line += static_cast<unsigned char>(c) < 0x20 || c == 0x7f ? ' ' : c;
  }
  return line + "\n";
}

std::string recording_text(const LineRecording& recording) {
  std::string text = std::string(first_line) + "\ndevice " + recording.device + "\n";
  for (const WireEvent& event : recording.events) text += line_text(event);
  return text;
}

Result<LineRecording> parse_recording(std::string_view text, std::string_view where) {
  LineRecording recording;
  int number = 0;
  const auto malformed = [&](std::string_view reason) {
    return Problem{
        "recording_malformed", std::string(where) + ":" + std::to_string(number), {{"reason", std::string(reason)}}};
  };
  Duration before{0};
  while (!text.empty()) {
    ++number;
    const auto end = text.find('\n');
    if (end == std::string_view::npos) return malformed("the last line is not whole");
    std::string_view line = text.substr(0, end);
    text.remove_prefix(end + 1);
    if (number == 1) {
      if (line != first_line) return malformed("the first line must be \"" + std::string(first_line) + "\"");
    } else if (number == 2) {
      if (take_word(line) != "device" || line.empty()) return malformed("the second line names the device");
      recording.device = line;
    } else {
      auto event = parse_event(line);
      if (!event) return malformed(event.error());
      if (event->at < before) return malformed("the time goes back");
      before = event->at;
      recording.events.push_back(*std::move(event));
    }
  }
  if (number < 2) return malformed("the file is too short");
  return recording;
}

LineRecording cut(const LineRecording& recording, Duration from, Duration to) {
  LineRecording part{recording.device, {}};
  for (const WireEvent& event : recording.events) {
    if (event.at >= from && event.at < to) part.events.push_back(event);
  }
  return part;
}

std::string words_of_problem(const Problem& problem) {
  Body::Array arguments;
  for (const auto& [name, value] : problem.arguments) arguments.push_back(Body::Array{Body{name}, Body{value}});
  return canonical(Body::Object{{"arguments", arguments}, {"id", problem.id}, {"where", problem.where}});
}

std::optional<Problem> problem_in_words(std::string_view words) {
  const auto body = parse_body(words);
  if (!body) return std::nullopt;
  Problem problem{body->text("id"), body->text("where")};
  if (problem.id.empty()) return std::nullopt;
  const Body* arguments = body->find("arguments");
  if (!arguments || !arguments->array()) return problem;
  for (const Body& pair : *arguments->array()) {
    const auto* parts = pair.array();
    if (!parts || parts->size() != 2 || !(*parts)[0].string() || !(*parts)[1].string()) return std::nullopt;
    problem.arguments.emplace_back(*(*parts)[0].string(), *(*parts)[1].string());
  }
  return problem;
}

}  // namespace probewright::wire
