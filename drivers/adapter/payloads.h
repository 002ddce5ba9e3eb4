#pragma once
#include <cstdint>
#include <string_view>

#include "drivers/adapter/values.h"
#include "drivers/wire/identity.h"
#include "drivers/wire/le.h"

/// Types of frames and their payloads. Whatever is not what WIRE.md says is a wire::Miss; that a payload was read to
/// its end is checked by whoever made the reader.
namespace probewright::adapter {

namespace type {
constexpr std::uint8_t hello = 0x01, set_drive = 0x02, set_timing = 0x03, forward_voltage = 0x04,
                       reverse_leakage = 0x05, dark_current = 0x06, id_resistance = 0x07, mains_pickup = 0x08,
                       presence = 0x09, self_proof = 0x0A, state = 0x0B, start_capture = 0x10, stop_capture = 0x11;
constexpr std::uint8_t block = 0x50, end = 0x51, error = 0xFF;
constexpr std::uint8_t reply_to(std::uint8_t request) { return static_cast<std::uint8_t>(request + 0x80); }
}  // namespace type

/// For messages.
std::string_view name_of(std::uint8_t request);
/// What an error reply's code means.
std::string_view words_of(std::uint8_t code);

constexpr std::uint32_t cycles_per_block = 32;
constexpr std::size_t bytes_per_cycle = 12;

struct Hello {
  std::uint8_t protocol = 0;
  wire::Identity identity;
};
Hello read_hello(wire::LeReader& payload);
State read_state(wire::LeReader& payload);
Cycle read_cycle(wire::LeReader& samples);

/// Throws wire::Miss unless both are equal: a reply repeats what was asked.
void require_same(std::uint64_t found, std::uint64_t asked, std::string_view what);

}  // namespace probewright::adapter
