#pragma once
#include <functional>
#include <map>
#include <string>
#include <vector>

#include "station/sequence/line_services.h"
#include "tests/faults/shift/plan.h"

// Whole shifts with faults of the bench, of people and of the disk, under the virtual clock, and what must hold after
// each.
namespace probewright::faults {

/// Something that must never be.
struct Breach {
  std::string rule;   ///< "told but not kept"
  std::string words;  ///< where and how
};

/// How often a fault was there, and how the runs ended in which it struck (or the whole shift, for faults that are no
/// run's).
struct Fates {
  std::uint64_t times = 0;
  std::map<std::string, std::uint64_t> endings;  ///< "pass", "fail", "void", "not recorded" ...
};

struct ShiftReport {
  std::vector<Breach> breaches;
  std::map<std::string, Fates> faults;           ///< by name
  std::map<std::string, std::uint64_t> endings;  ///< of runs: verdict and cause
  int lives = 0;
  int runs = 0;
  double device_s = 0.0;  ///< of all lives
  db::Seal seal;          ///< of the ledger in the end
  void add(const ShiftReport& other);
};

/// Stand-ins for parts of the station, with which the rules themselves are tried.
struct Doubles {
  /// Put between the line and its ports.
  std::function<sequence::PortOpener(sequence::PortOpener)> ports;
  /// Serials that hands put in for each other.
  bool hands_exchange_pairs = false;
  bool disk_lies = false;
};

/// Hears what happens, line by line: device time and words.
using Diary = std::function<void(const std::string&)>;

/// Makes a shift. All that it holds is in the plan: the same plan gives the same report.
ShiftReport make_shift(const ShiftPlan& plan, const Doubles& doubles = {}, const Diary& diary = {});

/// The table of all faults and how the runs ended in which they struck.
std::string table_of(const ShiftReport& report);

}  // namespace probewright::faults
