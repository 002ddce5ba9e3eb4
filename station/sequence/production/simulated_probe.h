#pragma once
#include <optional>
#include <string>
#include <vector>

#include "limits/judge.h"
#include "station/measure/reading.h"
#include "station/sequence/production/true_values.h"

namespace probewright::sequence::production {

/// How a probe really stands to one judged check.
struct TrueStanding {
  std::string check;
  bool known = false;     ///< the bench knows a truth for it
  bool conforms = false;  ///< the true value lies within the sheet's limits
};

/// Judged checks of the routine, and what their limits are compared with.
std::vector<TrueStanding> true_standings(const emulated::Truth& truth, const TrueValues& values,
                                         const limits::Sheet& sheet, const std::vector<std::string>& judged);

/// One run's readings by the sheet, exactly as production judges them.
struct JudgedRun {
  std::vector<limits::Judgement> judgements;
  bool pass = false;
  /// Of a check; nullptr when it is not there.
  const limits::Judgement* find(const std::string& check) const;
};
JudgedRun judge_run(const std::vector<measure::Reading>& readings, const limits::Sheet& sheet,
                    const std::vector<std::string>& judged);

}  // namespace probewright::sequence::production
