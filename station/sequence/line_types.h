#pragma once
#include <cstdint>
#include <optional>
#include <string>
#include <variant>
#include <vector>

#include "limits/judge.h"
#include "station/base/digest.h"
#include "station/base/times.h"
#include "station/measure/reading.h"
#include "station/sequence/run_step.h"

// What goes into the line and what comes out of it: plain values, used alike by the text, windows and hands.
namespace probewright::sequence {

/// Why a run is made; fixed before its first device command.
enum class Purpose { production, engineering, reference, challenge, gauge, echo, training, returned };
std::string_view slug(Purpose purpose);  ///< "production" ...; returned is "return"
std::optional<Purpose> find_purpose(std::string_view slug);

enum class RunVerdict { pass, fail, void_run };
std::string_view slug(RunVerdict verdict);  ///< "pass", "fail", "void"

/// Arms one nest for a serial; the probe is to be put in within `armed_for`.
struct ArmNest {
  int nest = 1;
  std::string serial;
  Purpose purpose = Purpose::engineering;
  std::string operator_name;
  std::string lot;  ///< empty outside a lot
};
/// Takes an arming back, or stops the run: by a person, so void or fail by the rule.
struct StopNest {
  int nest = 1;
  std::string who;
};
/// What the scanner read, or a person typed: a probe's serial, a badge, a lot card, "nest 3".
struct Scan {
  std::string text;
};
/// Ends the sign-in; runs that go on are stopped in that person's name.
struct SignOut {};
/// Ends the open lot.
struct CloseLot {};
using LineRequest = std::variant<ArmNest, StopNest, Scan, SignOut, CloseLot>;

/// Who is signed in.
struct SignedIn {
  std::string name;
  std::string role;  ///< "operator", "engineer", "quality", "auditor", "steward"
  bool operator==(const SignedIn&) const = default;
};

/// One reading with its judgement, as it went into the ledger.
struct JudgedReading {
  measure::Reading reading;
  limits::Judgement judgement;
};

/// How a run ended; told only after the closing entry is on disk.
struct RunOutcome {
  std::int64_t run = 0;  ///< number of the opening entry
  int nest = 0;
  std::string serial;
  Purpose purpose = Purpose::engineering;
  bool emulated = false;  ///< any device said so: a demonstration, whatever the verdict
  RunVerdict verdict = RunVerdict::void_run;
  std::string cause;        ///< slug: "limits", "completed", "stopped_by_person", "lid_opened", "device_lost" ...
  std::string cause_words;  ///< one sentence
  std::vector<std::string> failing;  ///< judged checks that are not ok, in catalogue order
  std::vector<JudgedReading> readings;
  std::int64_t closing_entry = 0;
  Digest seal{};
  Duration cycle{};            ///< first device command to verdict told, on the line's clock
  int asked_again = 0;         ///< exchanges and captures that had to be repeated
  std::vector<RunStep> steps;  ///< what was done when, in the order of their beginnings
};

/// What a nest is doing, in one word.
enum class NestState { not_ready, empty, occupied, armed, running };
std::string_view slug(NestState state);

struct NestView {
  int nest = 0;
  NestState state = NestState::not_ready;
  std::string words;   ///< one sentence: why not ready, what to do
  std::string serial;  ///< armed or running
  std::string doing;   ///< while running: what is being measured
  int stage = 0, stages = 0;
  bool operator==(const NestView&) const = default;
};

struct NestChanged {
  NestView view;
};
struct RunStarted {
  int nest = 0;
  std::string serial;
  std::int64_t run = 0;
};
struct RunEnded {
  RunOutcome outcome;
};
/// A run that could not be put on record: no verdict, no label.
struct RunNotRecorded {
  int nest = 0;
  std::string serial;
  Problem problem;
};
struct ArmingEnded {
  int nest = 0;
  std::string serial;
  Problem problem;
};
/// The answer to a scan or another request of a person, in the order of the requests.
struct Answered {
  bool taken = false;
  std::string words;               ///< one sentence: what was done, or why not and what to do
  std::optional<Problem> problem;  ///< why not
  int nest = 0;                    ///< that was armed by it; 0: none
};
struct PersonChanged {
  std::optional<SignedIn> person;
};
struct LotChanged {
  std::string lot;  ///< empty: closed
  std::string model;
};
/// Loss-free, in order.
using LineEvent =
    std::variant<NestChanged, RunStarted, RunEnded, RunNotRecorded, ArmingEnded, Answered, PersonChanged, LotChanged>;

}  // namespace probewright::sequence
