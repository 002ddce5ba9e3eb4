#include "limits/statistics/group_shares.h"

#include <algorithm>
#include <cmath>
#include <stdexcept>
#include <vector>

#include "limits/statistics/student.h"

namespace probewright::limits::statistics {
namespace {

double part(const GroupShare& group) { return static_cast<double>(group.count) / static_cast<double>(group.of); }

double median_of(const std::vector<double>& rising) {
  const std::size_t half = rising.size() / 2;
  return rising.size() % 2 == 1 ? rising[half] : 0.5 * (rising[half - 1] + rising[half]);
}

std::vector<GroupShare> with_members(std::span<const GroupShare> groups) {
  std::vector<GroupShare> kept;
  for (const GroupShare& group : groups) {
    if (group.count < 0 || group.count > group.of) throw std::domain_error("a count outside its group");
    if (group.of > 0) kept.push_back(group);
  }
  return kept;
}

/// Sums over the groups about the common share.
struct Sums {
  double members = 0.0, members_squared = 0.0;  ///< n, n^2
  double weighted = 0.0, squared = 0.0;         ///< n (p - mean)^2, n^2 (p - mean)^2
};

Sums sums_of(const std::vector<GroupShare>& groups, double share) {
  Sums sums;
  for (const GroupShare& group : groups) {
    const auto n = static_cast<double>(group.of);
    const double off = part(group) - share;
    sums.members += n, sums.members_squared += n * n;
    sums.weighted += n * off * off, sums.squared += n * n * off * off;
  }
  return sums;
}

}  // namespace

SharesOfGroups shares_of_groups(std::span<const GroupShare> all, double confidence) {
  if (!(confidence > 0.0 && confidence < 1.0)) throw std::domain_error("a confidence lies between 0 and 1");
  const std::vector<GroupShare> groups = with_members(all);
  SharesOfGroups out;
  out.groups = static_cast<int>(groups.size());
  if (groups.empty()) return out;
  std::vector<double> parts;
  GroupShare together;
  for (const GroupShare& group : groups) {
    parts.push_back(part(group));
    together.count += group.count, together.of += group.of;
  }
  std::sort(parts.begin(), parts.end());
  out.share = part(together);
  out.least = parts.front(), out.median = median_of(parts), out.most = parts.back();
  if (groups.size() < 2) return out;
  const Sums sums = sums_of(groups, out.share);
  const double freedom = static_cast<double>(groups.size()) - 1.0, by_chance = out.share * (1.0 - out.share);
  const double gain = sums.members - sums.members_squared / sums.members;
  out.between_sd = std::sqrt(std::max(0.0, (sums.weighted - freedom * by_chance) / gain));
  const double error = std::sqrt(sums.squared * (freedom + 1.0) / freedom) / sums.members;
  const double reach = student_quantile(0.5 + 0.5 * confidence, freedom) * error;
  out.mean = {std::max(0.0, out.share - reach), std::min(1.0, out.share + reach)};
  return out;
}

}  // namespace probewright::limits::statistics
