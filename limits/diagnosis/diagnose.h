#pragma once
#include <optional>
#include <span>
#include <string>
#include <vector>

#include "limits/diagnosis/pattern.h"

namespace probewright::limits::diagnosis {

/// One check that speaks for a cause, or that it leaves unexplained.
struct Evidence {
  std::string check;
  std::optional<double> measured;  ///< in tolerances from where it should be
  std::optional<double> expected;  ///< the same, at the severity that fits best; none where only a bound is known
  bool explained = true;
  std::string words;  ///< "dark current 4.7 times its tolerance (expected 4.6)"
};

/// A cause that may be there.
struct LikelyCause {
  std::string slug, words, rework;
  CauseKind kind = CauseKind::probe;
  bool hard = false;
  /// Share of 1 among all causes, none of them, and nothing wrong. A number for ranking by the rules' assumptions, not
  /// a probability that anybody has measured.
  double share = 0.0;
  double severity = 0.0;                ///< times the rules' pattern
  std::vector<Evidence> evidence;       ///< what moved most first, then what it leaves unexplained
  std::vector<std::string> looks_like;  ///< words of causes that no reading tells from this one
};

/// What is likely wrong with a probe.
struct Diagnosis {
  enum class Answer {
    nothing_wrong,  ///< the readings are those of a healthy probe
    likely_cause,   ///< causes.front() explains them better than anything else
    none_of_known   ///< something is wrong, and no cause fits; causes may still hold the nearest ones
  };
  Answer answer = Answer::nothing_wrong;
  std::vector<LikelyCause> causes;   ///< of the probe, best first; those with a share of at least 2 %
  std::vector<LikelyCause> besides;  ///< further faults of the same probe, beside causes.front()
  std::vector<LikelyCause>
      ask_reference;       ///< causes of the station that would look like this: ask for a reference check
  std::string decided_at;  ///< stage of a hard fault; what comes after it was not looked at. Empty: all was
  std::string words;       ///< one or two sentences for people: cause, evidence, rework

  const LikelyCause* first() const { return answer == Answer::likely_cause ? &causes.front() : nullptr; }
};

/// Ranks the causes by how well the whole pattern fits them (likelihood.h). Pure; any thread; the same arguments give
/// the same answer. Stage by stage, in the rules' order: as soon as a hard fault fits best, later readings are not
/// looked at. A second and third cause are named where one leaves a significant part unexplained. Causes of the station
/// are never ranked among the probe's: they are only asked about.
Diagnosis diagnose(const Rules& rules, const Pattern& pattern);

/// The same from readings, for the end of a run. `readings`: all that the run has, judged by `sheet`; those without a
/// value too. Takes some milliseconds.
///
/// For the run's record: `first()->words` is the likely cause, `first()->rework` the instruction that the probe goes
/// to, `words` the sentence with the evidence. With the answer none_of_known there is no cause to name, and `words`
/// says what is out of its limits. A nest with `ask_reference` is to make a reference check before its next verdicts
/// are trusted.
Diagnosis likely_causes(const Rules& rules, const Sheet& sheet, std::span<const JudgedValue> readings);

}  // namespace probewright::limits::diagnosis
