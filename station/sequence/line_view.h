#pragma once
#include <cstdint>
#include <memory>
#include <optional>
#include <string>
#include <vector>

#include "station/base/problem.h"
#include "station/base/times.h"
#include "station/sequence/line_types.h"

// What a person sees of the line, made at most 30 times a second. Plain values that nobody changes after they were
// published, so any thread may read them.
namespace probewright::sequence {

/// One check of the run's passage: a segment of the berth's bar.
struct PassageStep {
  std::string check;        ///< slug
  double expected_s = 0.0;  ///< its share of the device time
  enum class State { ahead, doing, done, left_out } state = State::ahead;
  bool operator==(const PassageStep&) const = default;
};

/// One judged reading on the common scale of the margin rails.
struct RailMark {
  std::string check;       ///< slug
  double position = 0.0;   ///< -1 at the lower acceptance limit, +1 at the upper; 0 at the middle, or where typical is
  double guard = 0.0;      ///< width of the guard strip outside +-1, same scale
  double whisker = 0.0;    ///< expanded uncertainty, same scale
  double margin = 0.0;     ///< as judged: 0 at an acceptance limit, negative outside
  bool one_sided = false;  ///< an upper limit only: the mark runs from 0 to +1
  bool ok = false;
  bool unusable = false;  ///< no value, or its uncertainty is above the declared one: there is no position then
  bool operator==(const RailMark&) const = default;
};

/// Points of a small plot, decimated: at most 256.
struct PlotLine {
  std::vector<float> x, y;
};
/// What the captures of a run show. Shared between views, never changed.
struct NestPlots {
  PlotLine red_spectrum, infrared_spectrum;  ///< wavelength in nm, signal over its peak
  PlotLine red_pulses, infrared_pulses;      ///< time in s, light over its mean minus 1
};

/// How the last run in this nest ended, and what is to be done with the probe.
struct LastRun {
  std::int64_t run = 0;
  std::string serial;
  Purpose purpose = Purpose::engineering;
  RunVerdict verdict = RunVerdict::void_run;
  std::string cause;         ///< slug
  std::string cause_words;   ///< one sentence
  std::string likely_cause;  ///< of a fail, in words; empty: none of the known
  std::string what_to_do;    ///< one sentence for the operator
  std::string decided_by;    ///< the check with the smallest margin, slug; empty when none was judged
  bool recorded = true;      ///< false: the ledger did not take it; there is no verdict
  double cycle_s = 0.0;      ///< device seconds
  bool operator==(const LastRun&) const = default;
};

/// One nest as its berth shows it.
struct BerthView {
  NestView nest;
  std::optional<Problem> trouble;    ///< why it is not ready
  int armed_left_s = 0;              ///< while armed: how long it still waits, seconds
  std::vector<PassageStep> passage;  ///< of the run that goes on, or of the last one
  double progress = 0.0;             ///< 0 to 1 of the expected device time
  std::vector<RailMark> marks;       ///< of the run that goes on, or of the last one
  std::shared_ptr<const NestPlots> plots;
  std::optional<LastRun> last;
  bool operator==(const BerthView&) const = default;
};

struct TallyView {
  int tested = 0;  ///< serials with a production verdict
  int passed_first_time = 0, passed = 0, failed = 0;
  int voids = 0;  ///< void runs, told apart
  double probes_per_hour = 0.0;
  struct Failing {
    std::string check;
    int runs = 0;
    bool operator==(const Failing&) const = default;
  };
  std::vector<Failing> commonest_failing;  ///< at most three
  bool operator==(const TallyView&) const = default;
};

struct OpenLotView {
  std::string lot, model;
  int sheet_revision = 0;
  int quantity = 0;
  int tested = 0;  ///< serials with a verdict in this lot
  bool operator==(const OpenLotView&) const = default;
};

/// The answer to the newest scan.
struct ScanView {
  std::uint64_t number = 0;  ///< counts scans; 0: none yet
  bool taken = false;
  std::string words;  ///< one sentence: what the scan did, or why not and what to do
  bool operator==(const ScanView&) const = default;
};

struct LineView {
  std::uint64_t revision = 0;
  UtcTime at;
  std::string station;
  std::string zone;
  bool emulated = false;
  double speed = 1.0;
  std::optional<Problem> trouble;  ///< of the station or its worst nest; empty: ready
  std::string next_due;            ///< certificate that ends first, "PHC-2026-0101 on 2027-06-30"
  std::optional<SignedIn> person;  ///< who is signed in
  std::optional<OpenLotView> lot;
  std::vector<BerthView> berths;  ///< by nest number
  TallyView tally;
  ScanView scan;
};

}  // namespace probewright::sequence
