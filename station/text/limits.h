#pragma once
#include <string>

#include "station/text/console.h"

namespace probewright::text {

struct LimitsCheckOptions {
  std::string file;   ///< a limit sheet
  std::string model;  ///< file of the model that it is for; empty: the sheet is checked alone
};
/// `limits check`: every fault of a sheet with its place, or what the sheet says, in words.
/// Exit status: 0 no fault, 2 faults.
int limits_check(const LimitsCheckOptions& options, Console& console);

struct LimitsDiffOptions {
  std::string before, after;  ///< two limit sheets
};
/// `limits diff`: what changed from one sheet to the other, and which way it moves.
/// Exit status: 0 (also when they differ), 2 faults in a sheet.
int limits_diff(const LimitsDiffOptions& options, Console& console);

}  // namespace probewright::text
