#include "station/windows/look/label_places.h"

#include <algorithm>

namespace probewright::windows {
namespace {

/// Where the label may stand, the most wanted first: beside the point, then above and below in growing distance.
std::vector<QRectF> candidates(const LabelWish& wish) {
  const double w = wish.size.width(), h = wish.size.height(), x = wish.at.x(), y = wish.at.y(), a = wish.away;
  const auto at = [&](double left, double top) { return QRectF{left, top, w, h}; };
  std::vector<QRectF> places = {at(x - a - w, y - h / 2), at(x + a, y - h / 2), at(x - a - w, y - h),
                                at(x + a, y - h),         at(x - a - w, y),     at(x + a, y)};
  for (int step = 0; step < 12; ++step) {
    const double off = a * 1.3 + step * h / 3;
    for (const double left : {x - w / 2, x - w - a, x + a, x - w * 0.8, x - w * 0.2}) {
      places.push_back(at(left, y - off - h));
      places.push_back(at(left, y + off));
    }
  }
  return places;
}

}  // namespace

std::vector<std::optional<QRectF>> label_places(const QRectF& room, const std::vector<LabelWish>& wishes,
                                                std::vector<QRectF> taken) {
  std::vector<std::optional<QRectF>> places;
  for (const LabelWish& wish : wishes) {
    std::optional<QRectF> place;
    for (const QRectF& candidate : candidates(wish)) {
      if (place) break;
      const bool free = room.contains(candidate) && std::none_of(taken.begin(), taken.end(), [&](const QRectF& other) {
                          return other.intersects(candidate);
                        });
      if (free) place = candidate;
    }
    if (place) taken.push_back(*place);
    places.push_back(place);
  }
  return places;
}

}  // namespace probewright::windows
