#include "station/windows/line/rail_points.h"

#include <algorithm>

#include "station/windows/words/check_words.h"

namespace probewright::windows {
namespace {

int slot_of(const sequence::BerthView& view, const std::string& check, int otherwise) {
  const auto found = std::find_if(view.passage.begin(), view.passage.end(),
                                  [&](const sequence::PassageStep& step) { return step.check == check; });
  return found == view.passage.end() ? otherwise : static_cast<int>(found - view.passage.begin());
}

}  // namespace

std::vector<RailPoint> rail_points(const sequence::BerthView& view) {
  using enum RailPoint::Kind;
  std::vector<RailPoint> points;
  for (const sequence::RailMark& mark : view.marks) {
    RailPoint point;
    point.name = check_words(mark.check);
    point.slot = slot_of(view, mark.check, static_cast<int>(points.size()));
    point.position = mark.position, point.guard = mark.guard, point.whisker = mark.whisker;
    point.margin = mark.margin, point.one_sided = mark.one_sided;
    point.kind = mark.unusable ? unknown : mark.ok ? inside : outside;
    points.push_back(std::move(point));
  }
  return points;
}

const RailPoint* nearest_to_an_edge(const std::vector<RailPoint>& points) {
  const RailPoint* nearest = nullptr;
  for (const RailPoint& point : points)
    if (point.kind != RailPoint::Kind::unknown && (!nearest || point.margin < nearest->margin)) nearest = &point;
  return nearest;
}

}  // namespace probewright::windows
