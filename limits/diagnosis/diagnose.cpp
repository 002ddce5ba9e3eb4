#include "limits/diagnosis/diagnose.h"

#include <algorithm>
#include <cmath>
#include <set>

#include "limits/diagnosis/comparison.h"
#include "limits/diagnosis/evidence.h"

namespace probewright::limits::diagnosis {
namespace {

/// Causes with less of a share are not worth naming; a station's cause must explain at least this part of what the
/// probe's best does.
constexpr double least_share = 0.02, least_part = 0.05;
/// Causes with this part of the first one's share are told in its sentence.
constexpr double worth_mention = 0.2;

bool contains(const std::vector<std::string>& all, const std::string& one) {
  return std::find(all.begin(), all.end(), one) != all.end();
}

/// What was compared, up to the stage at which it was decided.
struct Decided {
  std::vector<Datum> data;
  Comparison comparison;
  std::optional<std::size_t> hard_at;
};

/// The stage of the hard fault in the best explanation, if there is one.
std::optional<std::size_t> hard_stage(const Comparison& comparison) {
  if (!comparison.known_is_best()) return {};
  std::optional<std::size_t> first;
  for (const Part& part : comparison.best.parts)
    if (part.cause->hard_at) first = first ? std::min(*first, *part.cause->hard_at) : *part.cause->hard_at;
  return first;
}

/// Stage by stage, as long as no hard fault explains best what has been seen; after the last stage, everything.
Decided decide(const Rules& rules, const Pattern& pattern) {
  std::set<std::size_t> stages;
  for (const Cause& cause : rules.causes)
    if (cause.hard_at) stages.insert(*cause.hard_at);
  for (const std::size_t stage : stages) {
    Decided decided{data_up_to(stage, rules, pattern), {}, {}};
    decided.comparison = compare(rules, decided.data);
    decided.hard_at = hard_stage(decided.comparison);
    if (decided.hard_at && *decided.hard_at <= stage) return decided;
  }
  Decided decided{data_up_to(rules.stages.size(), rules, pattern), {}, {}};
  decided.comparison = compare(rules, decided.data);
  return decided;
}

class Telling {
 public:
  Telling(const Rules& rules, const Pattern& pattern, const Decided& decided)
      : rules_(rules), pattern_(pattern), decided_(decided), comparison_(decided.comparison) {}
  Diagnosis tell() const;

 private:
  LikelyCause told(const Part& part, const Explanation& explanation, double log_posterior) const;
  void tell_causes(Diagnosis& out) const;
  void tell_station(Diagnosis& out) const;
  Diagnosis::Answer answer() const;
  std::string words_of(const Diagnosis& out) const;
  std::string cause_words(const Diagnosis& out) const;

  const Rules& rules_;
  const Pattern& pattern_;
  const Decided& decided_;
  const Comparison& comparison_;
};

LikelyCause Telling::told(const Part& part, const Explanation& explanation, double log_posterior) const {
  const Cause& cause = *part.cause;
  LikelyCause out;
  out.slug = cause.slug, out.words = cause.words, out.rework = cause.rework;
  out.kind = cause.kind, out.hard = cause.hard_at.has_value();
  out.share = std::exp(log_posterior - comparison_.log_all());
  out.severity = part.severity;
  out.evidence = evidence_for(part, decided_.data, explanation.parts, rules_.method.stray_reading);
  for (Evidence& one : unexplained(decided_.data, explanation.parts, rules_.method.stray_reading))
    out.evidence.push_back(std::move(one));
  for (const std::string& slug : cause.looks_like) out.looks_like.push_back(rules_.find(slug)->words);
  return out;
}

/// The first of several faults stands for all of them among the causes; the others are told beside it.
void Telling::tell_causes(Diagnosis& out) const {
  const Explanation& best = comparison_.best;
  for (const Explanation& one : comparison_.singles) {
    const bool first = !best.parts.empty() && one.parts.front().cause == best.parts.front().cause;
    const Explanation& explanation = first ? best : one;
    LikelyCause cause = told(explanation.parts.front(), explanation, explanation.log_posterior);
    if (first || cause.share >= least_share) out.causes.push_back(std::move(cause));
  }
  std::stable_sort(out.causes.begin(), out.causes.end(),
                   [](const LikelyCause& a, const LikelyCause& b) { return a.share > b.share; });
  if (!comparison_.known_is_best()) return;
  for (std::size_t i = 1; i < best.parts.size(); ++i)
    out.besides.push_back(told(best.parts[i], best, best.log_posterior));
}

/// A station's cause is told when it explains the pattern nearly as well as the best cause of the probe, and better
/// than a healthy probe does.
void Telling::tell_station(Diagnosis& out) const {
  const double bar = comparison_.best.parts.empty() ? comparison_.log_unknown
                                                    : std::max(comparison_.best.log_posterior, comparison_.log_unknown);
  for (const Explanation& one : comparison_.station)
    if (one.log_posterior > std::max(comparison_.log_healthy, bar + std::log(least_part)))
      out.ask_reference.push_back(told(one.parts.front(), one, one.log_posterior));
}

Diagnosis::Answer Telling::answer() const {
  using enum Diagnosis::Answer;
  if (comparison_.known_is_best()) return likely_cause;
  const bool any_not_ok = std::any_of(pattern_.begin(), pattern_.end(), [](const Deviation& d) { return d.not_ok; });
  return any_not_ok || comparison_.log_unknown > comparison_.log_healthy ? none_of_known : nothing_wrong;
}

std::string Telling::cause_words(const Diagnosis& out) const {
  const LikelyCause& first = out.causes.front();
  std::string text = first.words;
  for (const std::string& other : first.looks_like) text += " (or " + other + ", which looks the same)";
  for (const LikelyCause& other : out.causes)
    if (&other != &first && other.share >= worth_mention * first.share && !contains(first.looks_like, other.words))
      text += " (perhaps " + other.words + ")";
  for (const LikelyCause& more : out.besides) text += " and " + more.words;
  std::vector<Evidence> evidence = first.evidence;
  for (const LikelyCause& more : out.besides)
    std::copy_if(more.evidence.begin(), more.evidence.end(), std::back_inserter(evidence),
                 [](const Evidence& one) { return one.explained; });
  const auto unexplained =
      std::stable_partition(evidence.begin(), evidence.end(), [](const Evidence& one) { return one.explained; });
  text += ": " + joined({evidence.begin(), unexplained});
  if (unexplained != evidence.end())
    text += "; not explained: " + joined({unexplained, evidence.end()});
  else if (decided_.hard_at)
    text += "; what comes after \"" + out.decided_at + "\" was not looked at";
  else
    text += "; everything else normal";
  return text;
}

std::string Telling::words_of(const Diagnosis& out) const {
  using enum Diagnosis::Answer;
  std::string text;
  switch (out.answer) {
    case nothing_wrong:
      text = "the readings are those of a healthy probe";
      break;
    case likely_cause:
      text = cause_words(out);
      break;
    case none_of_known:
      text = "none of the known causes";
      if (const auto bad = not_ok(pattern_); !bad.empty()) text += ": " + joined(bad);
      break;
  }
  if (out.ask_reference.empty()) return text;
  text += ". The nest may be at fault: ask for a reference check (";
  for (const LikelyCause& cause : out.ask_reference)
    text += (&cause == &out.ask_reference.front() ? "" : ", ") + cause.words;
  return text + ")";
}

Diagnosis Telling::tell() const {
  Diagnosis out;
  out.answer = answer();
  if (decided_.hard_at) out.decided_at = rules_.stages.at(*decided_.hard_at);
  if (out.answer != Diagnosis::Answer::nothing_wrong) {
    tell_causes(out);
    tell_station(out);
  }
  out.words = words_of(out);
  return out;
}

}  // namespace

Diagnosis diagnose(const Rules& rules, const Pattern& pattern) {
  const Decided decided = decide(rules, pattern);
  return Telling{rules, pattern, decided}.tell();
}

Diagnosis likely_causes(const Rules& rules, const Sheet& sheet, std::span<const JudgedValue> readings) {
  return diagnose(rules, pattern_of(rules, sheet, readings));
}

}  // namespace probewright::limits::diagnosis
