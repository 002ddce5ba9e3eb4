#pragma once
#include <cstddef>
#include <span>
#include <string>
#include <string_view>
#include <variant>
#include <vector>

#include "station/base/digest.h"
#include "station/base/result.h"
#include "station/measure/captures.h"

namespace probewright::measure {

using AnyCapture = std::variant<ElectricalCapture, DarkCapture, SpectrumCapture, PulseCapture, RedAloneCapture,
                                ClosedPathCapture, AmbientCapture, AloneSlotsCapture>;

/// Its kind in the ledger, unique within a run: "electrical" ("electrical_driven" for the one that holds LEDs alone),
/// "dark", "red_spectrum", "infrared_spectrum", "pulses_0p4", "pulses_1p0", "pulses_1p6" (nominal ratio, one decimal),
/// "red_alone_spectrum", "closed_path", "ambient", "red_alone_slots", "infrared_alone_slots".
std::string capture_kind(const AnyCapture& capture);

/// The bytes of CAPTURES.md. Throws std::invalid_argument for what the format cannot hold (trains of unequal length,
/// codes beyond 24 bit, a value that is not finite): our own mistakes.
Bytes encode(const AnyCapture& capture);
/// Reads them back; `where` names them in problems. Never reads beyond the bytes, whatever they hold.
/// Errors: capture_malformed (what, at which offset).
Result<AnyCapture> decode(std::span<const std::byte> bytes, std::string_view where = {});

/// All captures of a run, in the order electrical, dark, red, infrared, pulses, red alone, closed path, ambient,
/// slots with red alone and with infrared alone.
std::vector<AnyCapture> all_captures(const Captures& captures);
/// Puts one capture into its place. A further electrical capture adds what the ones before it lack, and its temperature
/// counts. Errors: capture_twice.
Result<void> add_capture(Captures& captures, AnyCapture capture);

}  // namespace probewright::measure
