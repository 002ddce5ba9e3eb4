#pragma once
#include <cstdint>
#include <string_view>

namespace probewright::emulated::request {

// Types of drivers/adapter/WIRE.md, section 2.
inline constexpr std::uint8_t hello = 0x01, set_drive = 0x02, set_timing = 0x03, forward_voltage = 0x04,
                              reverse_leakage = 0x05, dark_current = 0x06, id_resistance = 0x07, mains_pickup = 0x08,
                              presence = 0x09, self_proof = 0x0A, state = 0x0B, start_capture = 0x10,
                              stop_capture = 0x11;

/// Name of a request, "unknown" for other types.
std::string_view name(std::uint8_t type);
/// Bytes of a request's payload; -1 for other types.
int payload_size(std::uint8_t type);

}  // namespace probewright::emulated::request
