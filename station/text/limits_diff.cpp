#include "limits/compare.h"
#include "station/base/files.h"
#include "station/base/strict_yaml.h"
#include "station/text/limits.h"
#include "station/text/sheet_json.h"

namespace probewright::text {
namespace {

/// Reads one of the two sheets; its faults are added to `faults`.
std::optional<limits::Sheet> read_sheet(const std::string& file, Problems& faults) {
  const auto text = read_file(file, yaml::Document::max_bytes);
  if (!text) {
    faults.push_back(text.error());
    return std::nullopt;
  }
  auto sheet = limits::read_sheet(*text, file);
  if (sheet) return *std::move(sheet);
  const Problems found = sheet.error();
  faults.insert(faults.end(), found.begin(), found.end());
  return std::nullopt;
}

}  // namespace

int limits_diff(const LimitsDiffOptions& options, Console& console) {
  Problems faults;
  const auto before = read_sheet(options.before, faults);
  const auto after = read_sheet(options.after, faults);
  if (!before || !after) return console.refuse(faults);
  const limits::SheetDifference difference = limits::compare(*before, *after);
  if (console.json())
    console.print_json(json_of(difference));
  else
    console.print_text(limits::to_text(difference));
  return done;
}

}  // namespace probewright::text
