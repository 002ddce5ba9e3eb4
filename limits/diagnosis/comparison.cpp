#include "limits/diagnosis/comparison.h"

#include <algorithm>
#include <cmath>

namespace probewright::limits::diagnosis {
namespace {

/// Faults of one probe that are told at most, and how many first guesses are gone on with.
constexpr std::size_t most_faults = 3, first_guesses = 4;

double log_add(double a, double b) {
  const double most = std::max(a, b);
  return most + std::log(std::exp(a - most) + std::exp(b - most));
}

/// Priors, likelihoods and candidates of one comparison.
class Comparing {
 public:
  Comparing(const Rules& rules, std::span<const Datum> data) : rules_(rules), data_(data) {
    for (const Cause& cause : rules.causes)
      if (cause.kind == CauseKind::probe) often_ += cause.how_often;
  }
  std::vector<Explanation> each(CauseKind kind) const;
  Explanation with_more(Explanation one) const;
  double healthy() const { return log_likelihood(data_, {}, stray()); }
  double unknown() const {
    return std::log(rules_.method.unknown_fault) + log_likelihood(data_, {}, rules_.method.unknown_moves);
  }

 private:
  double stray() const { return rules_.method.stray_reading; }
  double log_prior(const Cause& cause) const { return std::log(cause.how_often / std::max(often_, cause.how_often)); }
  Explanation with_one_more(const Explanation& one) const;
  Explanation refitted(Explanation one) const;

  const Rules& rules_;
  std::span<const Datum> data_;
  double often_ = 0.0;
};

std::vector<Explanation> Comparing::each(CauseKind kind) const {
  std::vector<Explanation> all;
  for (const Cause& cause : rules_.causes) {
    if (cause.kind != kind || !can_show(data_, cause)) continue;
    const Fitted fitted = fit(data_, cause, {}, stray());
    all.push_back({{{&cause, fitted.severity}}, log_prior(cause) + fitted.log_evidence});
  }
  std::stable_sort(all.begin(), all.end(),
                   [](const Explanation& a, const Explanation& b) { return a.log_posterior > b.log_posterior; });
  return all;
}

/// Severities that were found alone, found again beside each other.
Explanation Comparing::refitted(Explanation one) const {
  for (std::size_t i = 0; i < one.parts.size(); ++i) {
    std::vector<Part> others = one.parts;
    others.erase(others.begin() + static_cast<std::ptrdiff_t>(i));
    one.parts[i].severity = fit(data_, *one.parts[i].cause, others, stray()).severity;
  }
  return one;
}

/// The explanation with the one cause more that helps most; itself where none does.
///
/// What is gained is the new cause's evidence over the likelihood without it, at the other causes' best severities.
Explanation Comparing::with_one_more(const Explanation& one) const {
  const double without = log_likelihood(data_, one.parts, stray());
  Explanation best = one;
  for (const Cause& cause : rules_.causes) {
    const auto same = [&](const Part& part) { return part.cause == &cause; };
    if (cause.kind != CauseKind::probe || !can_show(data_, cause)) continue;
    if (std::any_of(one.parts.begin(), one.parts.end(), same)) continue;
    const Fitted fitted = fit(data_, cause, one.parts, stray());
    const double price = std::log(rules_.method.second_fault) + log_prior(cause);
    const double log_posterior = one.log_posterior + price + fitted.log_evidence - without;
    if (log_posterior <= best.log_posterior) continue;
    best = {one.parts, log_posterior};
    best.parts.push_back({&cause, fitted.severity});
  }
  return best.parts.size() > one.parts.size() ? refitted(std::move(best)) : best;
}

Explanation Comparing::with_more(Explanation one) const {
  while (one.parts.size() < most_faults) {
    Explanation more = with_one_more(one);
    if (more.parts.size() == one.parts.size()) break;
    one = std::move(more);
  }
  return one;
}

/// The faults of an explanation in the order of what each alone explains.
void in_order(Explanation& one, const std::vector<Explanation>& singles) {
  const auto rank = [&](const Part& part) {
    return std::find_if(singles.begin(), singles.end(),
                        [&](const Explanation& s) { return s.parts.front().cause == part.cause; });
  };
  std::stable_sort(one.parts.begin(), one.parts.end(), [&](const Part& a, const Part& b) { return rank(a) < rank(b); });
}

}  // namespace

Comparison compare(const Rules& rules, std::span<const Datum> data) {
  const Comparing comparing{rules, data};
  Comparison out;
  out.singles = comparing.each(CauseKind::probe);
  out.station = comparing.each(CauseKind::station);
  out.log_healthy = comparing.healthy();
  out.log_unknown = comparing.unknown();
  for (std::size_t i = 0; i < std::min(first_guesses, out.singles.size()); ++i) {
    Explanation one = comparing.with_more(out.singles[i]);
    if (i == 0 || one.log_posterior > out.best.log_posterior) out.best = std::move(one);
  }
  in_order(out.best, out.singles);
  return out;
}

double Comparison::log_all() const {
  double sum = log_add(log_healthy, log_unknown);
  for (const Explanation& one : singles) sum = log_add(sum, one.log_posterior);
  return best.parts.size() > 1 ? log_add(sum, best.log_posterior) : sum;
}

}  // namespace probewright::limits::diagnosis
