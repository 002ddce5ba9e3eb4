#include <algorithm>

#include "limits/reader/parts.h"
#include "limits/sheet.h"
#include "station/base/numbers.h"

namespace probewright::limits {
namespace {

using reader::Faults;
using reader::Map;

std::string need_text(Map& map, const char* key, Faults& faults) {
  const auto value = map.need(key, faults);
  if (!value) return {};
  auto text = value->text(faults);
  if (!text) return {};
  if (text->find_first_not_of(" \t\n") == std::string::npos)
    faults.add(value->place(), "sheet_empty_text", {{"key", key}});
  return *std::move(text);
}

int need_revision(Map& map, Faults& faults) {
  const auto value = map.need("revision", faults);
  const auto number = value ? value->integer(faults) : std::nullopt;
  if (!number) return 0;
  if (*number < 1 || *number > 1'000'000)
    faults.add(value->place(), "sheet_out_of_range",
               {{"key", "revision"}, {"text", reader::as_written(*value)}, {"from", "1"}, {"to", "1000000"}});
  return static_cast<int>(std::clamp(*number, 0LL, 1'000'000LL));
}

std::optional<int> hex_digit(char c) {
  if (c >= '0' && c <= '9') return c - '0';
  if (c >= 'a' && c <= 'f') return c - 'a' + 10;
  return {};
}

/// "sha256 " and 64 lower-case hexadecimal digits.
std::optional<Digest> parse_digest(std::string_view text) {
  constexpr std::string_view prefix = "sha256 ";
  Digest digest{};
  if (!text.starts_with(prefix) || text.size() != prefix.size() + 2 * digest.size()) return {};
  text.remove_prefix(prefix.size());
  for (std::size_t i = 0; i < digest.size(); ++i) {
    const auto high = hex_digit(text[2 * i]), low = hex_digit(text[2 * i + 1]);
    if (!high || !low) return {};
    digest[i] = static_cast<std::byte>(*high * 16 + *low);
  }
  return digest;
}

std::optional<Digest> read_model_digest(Map& map, Faults& faults) {
  const auto value = map.maybe("for model");
  const auto text = value ? value->text(faults) : std::nullopt;
  if (!text) return {};
  const auto digest = parse_digest(*text);
  if (!digest) faults.add(value->place(), "sheet_model_digest", {{"text", *text}});
  return digest;
}

void read_head(Map& map, Sheet& sheet, Faults& faults) {
  sheet.name = need_text(map, "sheet", faults);
  sheet.revision = need_revision(map, faults);
  sheet.reason = need_text(map, "reason", faults);
  sheet.decision = need_text(map, "decision", faults);
  sheet.for_model = read_model_digest(map, faults);
}

void read_body(Map& map, Sheet& sheet, Faults& faults, Faults& warnings) {
  reader::ReadChecks read;
  if (const auto checks = map.need("checks", faults)) read = reader::read_checks(*checks, faults);
  if (const auto bins = map.maybe("bins")) sheet.bins = reader::read_bins(*bins, read, faults, warnings);
  sheet.checks = std::move(read.rules);
  if (const auto retest = map.maybe("retest")) sheet.retest = reader::read_retest(*retest, faults);
  if (const auto stop = map.maybe("stop when")) sheet.stop_when = reader::read_stop_when(*stop, faults);
}

}  // namespace

ResultOrFaults<Sheet> read_sheet(std::string_view text, std::string_view file) {
  Faults faults{std::string{file}}, warnings{std::string{file}};
  Sheet sheet;
  sheet.file = file;
  const auto document = yaml::Document::read(text, faults);
  if (!document) return faults.take();
  if (auto map = document->root().map(faults)) {
    read_head(*map, sheet, faults);
    read_body(*map, sheet, faults, warnings);
    map->finish(faults);
  }
  if (!faults.empty()) return faults.take();
  sheet.warnings = warnings.take();
  return sheet;
}

}  // namespace probewright::limits
