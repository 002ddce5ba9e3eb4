#pragma once
#include "station/windows/line/berth_content.h"

namespace probewright::windows {

/// The marks of a nest between the rails. Each check keeps its place from left to right for the whole run: that of its
/// step in the passage.
std::vector<RailPoint> rail_points(const sequence::BerthView& view);

/// The point with the smallest margin, or nullptr; points without a position have none.
const RailPoint* nearest_to_an_edge(const std::vector<RailPoint>& points);

}  // namespace probewright::windows
