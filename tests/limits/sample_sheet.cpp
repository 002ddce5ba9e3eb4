#include "sample_sheet.h"

#include <gtest/gtest.h>

using probewright::limits::read_sheet;
using probewright::limits::Sheet;

std::vector<std::string> sample_lines() {
  return {
      /*  1 */ "sheet: AQ-20",
      /*  2 */ "revision: 4",
      /*  3 */ "reason: first production sheet with guarded saturation error",
      /*  4 */ "decision: acceptance limits are the limits moved inwards by guard x U (ISO 14253-1, JCGM 106)",
      /*  5 */ "checks:",
      /*  6 */ "  red_centroid: {lower: 655.0 nm, upper: 665.0 nm, U: 0.33 nm}",
      /*  7 */ "  red_drive: {nominal: 20 mA, tolerance: 2 %, U: 0.26 %}",
      /*  8 */ "  dark_current: {upper: 5.0 nA, typical: 0.8 nA, U: 0.4 nA, at: 25 degC}",
      /*  9 */ "  saturation_error_70: {lower: -1.0 points, upper: 1.0 points, U: 0.195 points, guard: 0.83}",
      /* 10 */ "  secondary_emission: {upper: 0.30 %, typical: 0.02 %, U: 0.05 %, guard: {risk: 5 %}}",
      /* 11 */ "  red_half_power_centre: record only",
      /* 12 */ "  bin_mismatch: {watch: 1.4 nm}",
      /* 13 */ "  probe_present: must be yes",
      /* 14 */ "bins:",
      /* 15 */ "  by: red_centroid",
      /* 16 */ "  B1: {lower: 655.0 nm, upper: 660 nm, nominal: 657.5 nm, id resistor: 10.2 kohm}",
      /* 17 */ "  B2: {lower: 660 nm, upper: 665 nm, nominal: 662.5 nm, id resistor: 11.8 kohm}",
      /* 18 */ "retest: {tries: 1, after: 60 s}",
      /* 19 */ "stop when: {fails in a row: 4, yield below: 85 % of last 50}",
  };
}

std::string joined(const std::vector<std::string>& lines) {
  std::string text;
  for (const std::string& line : lines) text += line + "\n";
  return text;
}

std::string sample_with(int number, const std::string& line) {
  auto lines = sample_lines();
  lines.at(static_cast<std::size_t>(number - 1)) = line;
  return joined(lines);
}

Sheet sheet_of(const std::string& text) {
  auto sheet = read_sheet(text, "sample.yaml");
  if (sheet) return *std::move(sheet);
  for (const auto& fault : sheet.error()) ADD_FAILURE() << fault.text();
  return {};
}

Sheet sample_sheet() { return sheet_of(joined(sample_lines())); }
