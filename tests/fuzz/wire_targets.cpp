#include <algorithm>

#include "drivers/adapter/in_words.h"
#include "drivers/adapter/payloads.h"
#include "drivers/emulated/control_commands.h"
#include "drivers/phantom/answers.h"
#include "drivers/phantom/in_words.h"
#include "drivers/wire/block.h"
#include "drivers/wire/checked_line.h"
#include "drivers/wire/cobs.h"
#include "drivers/wire/frame.h"
#include "drivers/wire/link.h"
#include "drivers/wire/message.h"
#include "drivers/wire/recording.h"
#include "tests/fuzz/targets.h"

namespace probewright::fuzz {
namespace {

/// What a driver may throw at an answer that is not what was asked.
template <class Read>
void may_miss(Read read) {
  try {
    read();
  } catch (const wire::Miss&) {
  }
}

/// Hands that do nothing, so that only the words are tried.
class NoHands final : public emulated::Hands {
 public:
  Result<void> seat(int, std::string_view, std::string_view) override { return {}; }
  Result<void> seat(int, std::string_view, std::string_view, emulated::PlantedFault fault) override {
    require(fault.severity > 0.0 && fault.severity <= 1.0, "a severity is above 0, at most 1");
    return {};
  }
  Result<void> remove(int) override { return {}; }
  Result<void> lid(int, bool) override { return {}; }
  void room(double degC) override { require(degC >= -20.0 && degC <= 80.0, "a room has -20 to 80 degC"); }
  Result<void> pull(const emulated::DeviceId&) override { return {}; }
  Result<void> plug(const emulated::DeviceId&) override { return {}; }
  Result<void> restart(const emulated::DeviceId&) override { return {}; }
  Result<void> spoil(const emulated::DeviceId&, const emulated::SpoiltByte&) override { return {}; }
  Result<void> spoil(const emulated::DeviceId&, const emulated::SpoiltShare& share) override {
    require(share.per_byte >= 0.0 && share.per_byte <= 1.0, "a rate is 0 to 1");
    return {};
  }
  Result<void> heal(const emulated::DeviceId&) override { return {}; }
  Result<void> cause(const emulated::ScenarioFault&) override { return {}; }
  void mend() override {}
};

}  // namespace

void frames(std::span<const std::byte> bytes) {
  wire::FrameReader whole, pieces;
  whole.feed(bytes);
  for (std::size_t at = 0; at < bytes.size();) {
    const std::size_t size = 1 + std::to_integer<std::size_t>(bytes[at]) % 7;
    pieces.feed(bytes.subspan(at, std::min(size, bytes.size() - at)));
    at += size;
  }
  while (const auto frame = whole.next()) {
    require(pieces.next() == frame, "frames do not hang on how the bytes are cut");
    wire::FrameReader again;
    again.feed(wire::encode_frame(*frame));
    require(again.next() == frame, "a frame is read as it was written");
    static_cast<void>(adapter::in_words(*frame));
    wire::LeReader hello{frame->payload}, state{frame->payload};
    may_miss([&] { adapter::read_hello(hello); });
    may_miss([&] { adapter::read_state(state); });
  }
  require(!pieces.next() && whole.damaged() == pieces.damaged(), "damage does not hang on how the bytes are cut");
  static_cast<void>(adapter::Listener{}.hear(bytes));
  static_cast<void>(wire::decode_frame(bytes));
}

void cobs(std::span<const std::byte> bytes) {
  const Bytes encoded = wire::cobs_encode(bytes);
  require(std::find(encoded.begin(), encoded.end(), std::byte{0}) == encoded.end(), "no zero byte inside");
  const auto back = wire::cobs_decode(encoded);
  require(back && std::equal(back->begin(), back->end(), bytes.begin(), bytes.end()), "what was stuffed comes back");
  static_cast<void>(wire::cobs_decode(bytes));
}

void lines(std::span<const std::byte> bytes) {
  for (const auto blocks_inside : {wire::LineReader::Blocks::none, wire::LineReader::Blocks::inside}) {
    wire::LineReader whole{512, blocks_inside}, pieces{512, blocks_inside};
    whole.feed(bytes);
    for (const std::byte& byte : bytes) pieces.feed(std::span{&byte, 1});
    while (const auto line = whole.next()) {
      require(pieces.next() == line, "lines do not hang on how the bytes are cut");
      static_cast<void>(phantom::in_words(*line));
    }
    require(!pieces.next() && whole.overlong() == pieces.overlong(), "nor does what is dropped");
  }
  const auto text = wire::strip_checksum(text_of(bytes));
  if (text) {
    std::string line{text_of(bytes)};
    if (!line.ends_with('\n')) line += '\n';
    require(wire::add_checksum(*text) == line, "a checked line is written as it was read");
  }
  static_cast<void>(phantom::Listener{}.hear(bytes));
}

void messages(std::span<const std::byte> bytes) {
  const std::string_view text = text_of(bytes);
  const wire::Message message = wire::parse_message(text);
  for (const wire::Unit& unit : message.units) {
    require(!unit.header.empty(), "every unit has a header");
    static_cast<void>(wire::header_matches("SYSTem:ERRor[:NEXT]?", unit));
    for (const wire::Datum& datum : unit.data)
      for (const char* wanted : {"", "S", "HZ", "OHM"}) static_cast<void>(wire::number_in(datum, wanted));
  }
  if (message.fault) require(message.fault->at <= text.size(), "a fault lies inside the message");
  static_cast<void>(wire::parse_data(text));
  std::string joined;
  for (const std::string_view piece : wire::split_outside(text, ';'))
    joined += (joined.empty() ? "" : ";") + std::string(piece);
}

void blocks(std::span<const std::byte> bytes) {
  const auto block = wire::decode_block(text_of(bytes));
  if (block) {
    require(block->length <= bytes.size(), "a block lies inside the text");
    const auto again = wire::decode_block(wire::encode_block(block->bytes));
    require(again && again->bytes == block->bytes, "a block is read as it was written");
  }
  may_miss([&] { phantom::read_spectrum(text_of(bytes)); });
}

void answers(std::span<const std::byte> bytes) {
  const std::string_view text = text_of(bytes);
  may_miss([&] { phantom::read_number(text); });
  may_miss([&] { phantom::read_whole(text, -5, 5); });
  may_miss([&] { phantom::read_truth(text); });
  may_miss([&] { phantom::read_string(text); });
  may_miss([&] { phantom::read_numbers(text); });
  may_miss([&] { phantom::read_answers(text, 3); });
  may_miss([&] { phantom::read_set_points(text); });
  may_miss([&] { phantom::read_closed(text); });
  may_miss([&] { phantom::read_error(text); });
  wire::Identity identity;
  may_miss([&] { phantom::read_identity(text, identity); });
}

void recordings(std::span<const std::byte> bytes) {
  const auto recording = wire::parse_recording(text_of(bytes), "recording");
  if (!recording) return;
  const auto again = wire::parse_recording(wire::recording_text(*recording), "again");
  require(again.has_value(), "what was read can be written and read again");
  for (const auto& event : recording->events) static_cast<void>(wire::problem_in_words(event.words));
}

void control(std::span<const std::byte> bytes) {
  NoHands hands;
  const std::string reply = emulated::obey(hands, text_of(bytes));
  require(!reply.empty(), "every command gets a reply");
  require(reply.find('\n') == std::string::npos, "a reply is one line");
}

}  // namespace probewright::fuzz
