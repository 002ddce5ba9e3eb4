#include "drivers/phantom/answers.h"

#include <algorithm>
#include <cmath>

#include "drivers/wire/block.h"
#include "drivers/wire/crc.h"
#include "drivers/wire/le.h"
#include "drivers/wire/link.h"
#include "drivers/wire/message.h"
#include "station/base/numbers.h"

namespace probewright::phantom {
namespace {

constexpr std::size_t longest_in_words = 60;

[[noreturn]] void odd(std::string_view text, std::string_view wanted) {
  throw wire::Miss("answer \"" + std::string{text.substr(0, longest_in_words)} + "\" is no " + std::string{wanted});
}

}  // namespace

double read_number(std::string_view text) {
  const auto number = parse_double(text);
  if (!number) odd(text, "number");
  return *number;
}

std::int64_t read_whole(std::string_view text, std::int64_t low, std::int64_t high) {
  const auto number = parse_integer(text);
  if (!number || *number < low || *number > high) odd(text, "whole number in range");
  return *number;
}

bool read_truth(std::string_view text) {
  if (text != "1" && text != "0") odd(text, "truth value");
  return text == "1";
}

std::string read_string(std::string_view text) {
  const auto data = wire::parse_data(text);
  if (!data || data->size() != 1 || data->front().kind != wire::Datum::Kind::text) odd(text, "string");
  return data->front().text;
}

std::vector<double> read_numbers(std::string_view text) {
  std::vector<double> numbers;
  for (const auto piece : wire::split_outside(text, ',')) numbers.push_back(read_number(piece));
  return numbers;
}

std::vector<std::string> read_answers(std::string_view text, std::size_t count) {
  const auto pieces = wire::split_outside(text, ';');
  if (pieces.size() != count) odd(text, "line of " + std::to_string(count) + " answers");
  return {pieces.begin(), pieces.end()};
}

void read_identity(std::string_view text, wire::Identity& identity) {
  const auto fields = wire::split_outside(text, ',');
  if (fields.size() != 4) odd(text, "identity");
  identity.maker = fields[0];
  identity.model = fields[1];
  identity.serial = fields[2];
  if (!wire::read_firmware(fields[3], identity)) odd(text, "identity");
}

std::vector<SetPoint> read_set_points(std::string_view text) {
  const auto numbers = read_numbers(text);
  if (numbers.size() % 4 != 0) odd(text, "list of set points");
  std::vector<SetPoint> points;
  for (std::size_t i = 0; i < numbers.size(); i += 4) {
    if (!(numbers[i] >= 1.0 && numbers[i] <= 9.0)) odd(text, "list of set points");
    points.push_back({static_cast<int>(numbers[i]), numbers[i + 1], numbers[i + 2], numbers[i + 3]});
  }
  return points;
}

bool read_closed(std::string_view text) {
  if (text != "CLOS" && text != "OPEN") odd(text, "OPEN or CLOS");
  return text == "CLOS";
}

Spectrum read_spectrum(std::string_view text) {
  const auto block = wire::decode_block(text);
  if (!block || block->length != text.size()) odd(text.substr(0, 7), "block");
  constexpr std::size_t size = 16 + 2 * pixels + 4;
  if (block->bytes.size() != size) throw wire::Miss("the block of the spectrum has the wrong length");
  const std::span<const std::byte> bytes{block->bytes};
  if (wire::crc32(bytes.first(size - 4)) != wire::LeReader{bytes.last(4)}.u32())
    throw wire::Miss("the check of the spectrum's block is wrong");
  wire::LeReader fields{bytes};
  Spectrum spectrum;
  spectrum.number = fields.u32();
  spectrum.setting.exposure_us = fields.u32();
  spectrum.setting.frames = fields.u16();
  spectrum.setting.shutter = fields.u8() == 1 ? Shutter::open : Shutter::closed;
  spectrum.any_pixel_full = fields.u8() != 0;
  spectrum.temperature_degC = 0.01 * fields.i16();
  if (fields.u16() != pixels) throw wire::Miss("the spectrum has the wrong number of pixels");
  for (auto& count : spectrum.counts) count = fields.u16();
  return spectrum;
}

DeviceError read_error(std::string_view text) {
  const auto data = wire::parse_data(text);
  if (!data || data->size() != 2 || (*data)[0].kind != wire::Datum::Kind::number ||
      (*data)[1].kind != wire::Datum::Kind::text || !(std::abs((*data)[0].number) <= 32768.0))
    odd(text, "entry of the error queue");
  return {static_cast<int>((*data)[0].number), (*data)[1].text};
}

bool same_setting(std::string_view answer, std::string_view set) {
  if (answer == set) return true;
  const auto found = parse_double(answer);
  const auto want = parse_double(set);
  return found && want && std::abs(*found - *want) <= 1e-6 * std::max(std::abs(*want), 1e-3);
}

}  // namespace probewright::phantom
