#include "station/base/zone.h"

#include <algorithm>
#include <optional>

#include "station/base/files.h"

namespace probewright {
namespace {

constexpr std::size_t header_bytes = 44;
constexpr std::size_t most_bytes = 1u << 20;

std::int64_t big_endian(std::string_view bytes, std::size_t at, std::size_t count) {
  std::uint64_t value = count == 8 || (static_cast<unsigned char>(bytes[at]) & 0x80) == 0 ? 0 : ~std::uint64_t{0};
  for (std::size_t i = 0; i < count; ++i) value = (value << 8) | static_cast<unsigned char>(bytes[at + i]);
  return static_cast<std::int64_t>(value);
}

/// Counts of one header of RFC 8536, section 3.1.
struct Counts {
  std::size_t isut, isstd, leap, time, type, letters;
  std::size_t block_bytes(std::size_t time_bytes) const {
    return time * time_bytes + time + type * 6 + letters + leap * (time_bytes + 4) + isstd + isut;
  }
};

std::optional<Counts> counts_at(std::string_view bytes, std::size_t at) {
  if (bytes.size() < at + header_bytes || bytes.substr(at, 4) != "TZif") return std::nullopt;
  const auto count = [&](std::size_t i) { return static_cast<std::size_t>(big_endian(bytes, at + 20 + 4 * i, 4)); };
  Counts counts{count(0), count(1), count(2), count(3), count(4), count(5)};
  const bool sane = counts.isut <= 256 && counts.isstd <= 256 && counts.leap <= 4096 && counts.time <= 65536 &&
                    counts.type >= 1 && counts.type <= 256 && counts.letters <= 4096;
  return sane ? std::optional{counts} : std::nullopt;
}

}  // namespace

Zone::Zone() = default;

Result<Zone> Zone::read(std::string_view name, std::string_view folder) {
  const std::string file = std::string{folder} + "/" + std::string{name};
  const bool named = !name.empty() && name.front() != '/' && name.find("..") == std::string_view::npos;
  const auto text = named ? read_file(file, most_bytes) : Result<std::string>{Problem{"zone_unknown", file}};
  if (!text) return Problem{"zone_unknown", file, {{"zone", std::string{name}}}};
  const std::string_view bytes = *text;
  const Problem malformed{"zone_malformed", file};
  const auto old = counts_at(bytes, 0);
  if (!old || bytes.size() < 5 || bytes[4] < '2') return malformed;
  const std::size_t second = header_bytes + old->block_bytes(4);  // the 64-bit data follow the 32-bit ones
  const auto counts = counts_at(bytes, second);
  if (!counts || bytes.size() < second + header_bytes + counts->block_bytes(8)) return malformed;

  const std::size_t times = second + header_bytes;
  const std::size_t indices = times + 8 * counts->time;
  const std::size_t types = indices + counts->time;
  const auto offset_of = [&](std::size_t type) { return static_cast<int>(big_endian(bytes, types + 6 * type, 4)); };
  Zone zone;
  zone.name_ = name;
  zone.before_s_ = offset_of(0);
  for (std::size_t i = 0; i < counts->time; ++i) {
    const auto type = static_cast<unsigned char>(bytes[indices + i]);
    if (type >= counts->type) return malformed;
    zone.changes_.push_back({big_endian(bytes, times + 8 * i, 8), offset_of(type)});
  }
  return zone;
}

int Zone::offset_s(UtcTime time) const {
  const std::int64_t at_s = time.microseconds / 1'000'000 - (time.microseconds % 1'000'000 < 0 ? 1 : 0);
  const auto next = std::upper_bound(changes_.begin(), changes_.end(), at_s,
                                     [](std::int64_t moment, const Change& change) { return moment < change.at_s; });
  return next == changes_.begin() ? before_s_ : std::prev(next)->offset_s;
}

std::string Zone::local_text(UtcTime time) const {
  const UtcTime shifted{time.microseconds + offset_s(time) * std::int64_t{1'000'000}};
  std::string text = to_text(shifted).substr(0, 19);
  text[10] = ' ';
  return text;
}

std::string Zone::day(UtcTime time) const { return local_text(time).substr(0, 10); }

}  // namespace probewright
