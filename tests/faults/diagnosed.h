#pragma once
#include <map>
#include <string>
#include <vector>

#include "limits/diagnosis/diagnose.h"
#include "tests/trial/memory_ledger.h"

// A station that tests probes with known faults, and what diagnosis says of them.
namespace probewright::faults {

/// The demonstration's rules.
const limits::diagnosis::Rules& probe_rules();

/// What became of one probe.
struct Diagnosed {
  limits::diagnosis::Pattern pattern;
  limits::diagnosis::Diagnosis told;
  sequence::RunVerdict verdict = sequence::RunVerdict::void_run;
};

/// One station with errors of its own, and a ledger in memory.
class DiagnosingStation {
 public:
  explicit DiagnosingStation(std::uint64_t seed, std::string model = "AQ-20")
      : station_(ledger_.options(seed)), seed_(seed), model_(std::move(model)) {}

  /// Makes the next probe with these faults, tests it and diagnoses it. Throws when no run came about.
  Diagnosed test(const std::vector<emulated::PlantedFault>& faults);

 private:
  trial::MemoryLedger ledger_;
  trial::Trial station_;
  std::uint64_t seed_;
  std::string model_;
  int made_ = 0;
};

/// Slug of the cause that is named first; "(nothing wrong)" or "(none of known)".
std::string first_named(const limits::diagnosis::Diagnosis& told);
/// All that are named as being there: the first and those besides.
std::vector<std::string> all_named(const limits::diagnosis::Diagnosis& told);

/// How often each planted fault was given which name.
class Confusion {
 public:
  void add(const std::string& planted, const std::string& named) { ++counts_[planted][named]; }
  int all() const;
  int right() const;
  int count(const std::string& planted) const;
  /// Of those with this fault, how many were given its name; there must be some.
  double share(const std::string& planted) const;
  /// A line for each planted fault: how many there were, and what they were called.
  std::string table() const;

 private:
  std::map<std::string, std::map<std::string, int>> counts_;
};

}  // namespace probewright::faults
