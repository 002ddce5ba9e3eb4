#pragma once
#include <cstdint>
#include <string>
#include <string_view>
#include <vector>

#include "drivers/phantom/values.h"
#include "drivers/wire/identity.h"

/// Reads the phantom's answers. Whatever is not what WIRE.md says is a wire::Miss.
namespace probewright::phantom {

double read_number(std::string_view text);
/// A whole number from `low` to `high`.
std::int64_t read_whole(std::string_view text, std::int64_t low, std::int64_t high);
/// `1` or `0`.
bool read_truth(std::string_view text);
/// A string in quotes.
std::string read_string(std::string_view text);
std::vector<double> read_numbers(std::string_view text);
/// Exactly `count` answers of one message.
std::vector<std::string> read_answers(std::string_view text, std::size_t count);

/// `*IDN?` into maker, model, serial, firmware, emulated and speed.
void read_identity(std::string_view text, wire::Identity& identity);
/// number, ratio, red depth, infrared depth; again and again.
std::vector<SetPoint> read_set_points(std::string_view text);
/// `CLOS` or `OPEN`.
bool read_closed(std::string_view text);
/// The block of `SPECtrum:READ?`, its check included.
Spectrum read_spectrum(std::string_view text);

/// An entry of the error queue: `-222,"Data out of range"`.
struct DeviceError {
  int number = 0;
  std::string words;
};
DeviceError read_error(std::string_view text);

/// Whether a setting read back is the one that was set: words alike, or numbers equal to a millionth.
bool same_setting(std::string_view answer, std::string_view set);

}  // namespace probewright::phantom
