#include "drivers/adapter/in_words.h"

#include <algorithm>
#include <array>

#include "drivers/adapter/payloads.h"
#include "drivers/wire/le.h"

namespace probewright::adapter {
namespace {

/// The fields of a payload, in the letters of WIRE.md: "red_uA u32, infrared_uA u32".
struct Shape {
  std::uint8_t type;
  std::string_view fields;
};
constexpr auto shapes = std::to_array<Shape>({
    {type::hello, ""},
    {type::reply_to(type::hello),
     "protocol u8, flags u8, speed_thousandths u32, boot u32, maker text, model text, serial text, firmware text, "
     "certificate text, due text"},
    {type::set_drive, "red_uA u32, infrared_uA u32"},
    {type::reply_to(type::set_drive), "red_uA u32, infrared_uA u32"},
    {type::set_timing, "slot_ns u32"},
    {type::reply_to(type::set_timing), "slot_ns u32"},
    {type::forward_voltage, "led u8, drive_uA u32"},
    {type::reply_to(type::forward_voltage),
     "led u8, drive_uA u32, delivered_nA u32, voltage_uV i32, first_uV i32, flags u8"},
    {type::reverse_leakage, "led u8, reverse_mV u16"},
    {type::reply_to(type::reverse_leakage), "led u8, reverse_mV u16, leakage_pA u32, flags u8"},
    {type::dark_current, "bias_mV u16, time_ms u16, input u8"},
    {type::reply_to(type::dark_current), "bias_mV u16, time_ms u16, input u8, current_pA i32, sd_pA u32"},
    {type::id_resistance, ""},
    {type::reply_to(type::id_resistance), "resistance_milliohm u32"},
    {type::mains_pickup, "time_ms u16"},
    {type::reply_to(type::mains_pickup), "time_ms u16, pickup_pA u32"},
    {type::presence, ""},
    {type::reply_to(type::presence), "present u8, insertions u32"},
    {type::self_proof, "what u8"},
    {type::reply_to(type::self_proof), "what u8, value i32, flags u8"},
    {type::state, ""},
    {type::reply_to(type::state),
     "boot u32, uptime_ms u32, watchdog_trips u16, red_uA u32, infrared_uA u32, capture u16, temperature_mdegC i32"},
    {type::start_capture, "capture u16, cycles u32"},
    {type::reply_to(type::start_capture), "capture u16, cycles u32"},
    {type::stop_capture, ""},
    {type::reply_to(type::stop_capture), "capture u16, cycles u32"},
    {type::block, "capture u16, block u32, samples block"},
    {type::end, "capture u16, cycles u32, check u32"},
    {type::error, "request u8, code u8, detail u32"},
});

std::string hex_of(std::span<const std::byte> bytes) {
  constexpr std::string_view digits = "0123456789ABCDEF";
  std::string text;
  for (const std::byte byte : bytes) {
    const auto value = std::to_integer<unsigned>(byte);
    if (!text.empty()) text += ' ';
    text += digits[value >> 4];
    text += digits[value & 15u];
  }
  return text.empty() ? "nothing" : text;
}

std::string printable(std::string text) {
  for (char& c : text) {
    if (static_cast<unsigned char>(c) < 0x20 || static_cast<unsigned char>(c) > 0x7e) c = '.';
  }
  return text;
}

std::string field_text(std::string_view kind, wire::LeReader& payload) {
  if (kind == "u8") return std::to_string(payload.u8());
  if (kind == "u16") return std::to_string(payload.u16());
  if (kind == "u32") return std::to_string(payload.u32());
  if (kind == "i32") return std::to_string(payload.i32());
  if (kind == "text") return "\"" + printable(payload.short_text()) + "\"";
  const std::size_t bytes = cycles_per_block * bytes_per_cycle;
  payload.raw(bytes);
  return std::to_string(cycles_per_block) + " cycles";
}

/// Nothing where the payload has another length.
std::string fields_text(std::string_view fields, const Bytes& payload) {
  wire::LeReader reader{payload};
  std::string text;
  while (!fields.empty()) {
    const auto comma = std::min(fields.find(", "), fields.size());
    const std::string_view field = fields.substr(0, comma);
    fields.remove_prefix(std::min(comma + 2, fields.size()));
    const auto blank = field.find(' ');
    text += (text.empty() ? "" : ", ") + std::string(field.substr(0, blank)) + " " +
            field_text(field.substr(blank + 1), reader);
  }
  return reader.finished() ? text : "(unexpected) " + hex_of(payload);
}

std::string title(std::uint8_t frame_type) {
  if (frame_type == type::block) return "block";
  if (frame_type == type::end) return "end of capture";
  if (frame_type == type::error) return "error reply";
  if (frame_type >= 0x80) return "reply to " + std::string(name_of(static_cast<std::uint8_t>(frame_type - 0x80)));
  return std::string(name_of(frame_type));
}

}  // namespace

std::string in_words(const wire::Frame& frame) {
  std::string text = title(frame.type) + " #" + std::to_string(frame.sequence);
  const auto shape =
      std::find_if(shapes.begin(), shapes.end(), [&](const Shape& known) { return known.type == frame.type; });
  if (shape == shapes.end()) return text + ": " + hex_of(frame.payload);
  const std::string fields = fields_text(shape->fields, frame.payload);
  if (!fields.empty()) text += ": " + fields;
  if (frame.type != type::error || frame.payload.size() != 6) return text;
  const auto about = std::to_integer<std::uint8_t>(frame.payload[0]),
             code = std::to_integer<std::uint8_t>(frame.payload[1]);
  return text + " (" + std::string(name_of(about)) + ": " + std::string(words_of(code)) + ")";
}

std::vector<std::string> Listener::hear(std::span<const std::byte> bytes) {
  std::vector<std::string> heard;
  for (const std::byte byte : bytes) {  // one at a time, so that damage is told at its place
    frames_.feed(std::span{&byte, 1});
    while (const auto frame = frames_.next()) heard.push_back(in_words(*frame));
    if (frames_.damaged() > damaged_) heard.emplace_back("(a damaged frame)");
    damaged_ = frames_.damaged();
  }
  return heard;
}

}  // namespace probewright::adapter
