#include "station/sequence/production/simulated_probe.h"

#include <cmath>

namespace probewright::sequence::production {
namespace {

bool conforms(const limits::CheckRule& rule, double true_value) {
  return rule.must_be_yes ? true_value == 1.0 : rule.limits.contain(true_value);
}

}  // namespace

std::vector<TrueStanding> true_standings(const emulated::Truth& truth, const TrueValues& values,
                                         const limits::Sheet& sheet, const std::vector<std::string>& judged) {
  std::vector<TrueStanding> standings;
  for (const std::string& check : judged) {
    TrueStanding standing{check};
    if (const auto value = values.of(truth, check)) {
      standing.known = true;
      standing.conforms = conforms(*sheet.find(check), *value);
    }
    standings.push_back(std::move(standing));
  }
  return standings;
}

const limits::Judgement* JudgedRun::find(const std::string& check) const {
  for (const limits::Judgement& judgement : judgements)
    if (judgement.check == check) return &judgement;
  return nullptr;
}

JudgedRun judge_run(const std::vector<measure::Reading>& readings, const limits::Sheet& sheet,
                    const std::vector<std::string>& judged) {
  JudgedRun run;
  for (const measure::Reading& reading : readings)
    run.judgements.push_back(limits::judge(sheet, reading.check, reading.value,
                                           reading.expanded_uncertainty.value_or(0.0), reading.none_reason));
  run.pass = limits::overall(run.judgements, judged).pass;
  return run;
}

}  // namespace probewright::sequence::production
