#include "station/windows/look/label_places.h"

#include <algorithm>
#include <array>

namespace probewright::windows {
namespace {

/// Where the label may stand, the most wanted first.
std::array<QRectF, 8> candidates(const LabelWish& wish) {
  const double w = wish.size.width(), h = wish.size.height(), x = wish.at.x(), y = wish.at.y(), a = wish.away;
  const auto at = [&](double left, double top) { return QRectF{left, top, w, h}; };
  return {at(x - a - w, y - h / 2), at(x + a, y - h / 2), at(x - a - w, y - h),           at(x + a, y - h),
          at(x - a - w, y),         at(x + a, y),         at(x - w / 2, y - a * 1.5 - h), at(x - w / 2, y + a * 1.5)};
}

}  // namespace

std::vector<std::optional<QRectF>> label_places(const QRectF& room, const std::vector<LabelWish>& wishes,
                                                std::vector<QRectF> taken) {
  std::vector<std::optional<QRectF>> places;
  for (const LabelWish& wish : wishes) {
    std::optional<QRectF> place;
    for (const QRectF& candidate : candidates(wish)) {
      const bool free = room.contains(candidate) && std::none_of(taken.begin(), taken.end(), [&](const QRectF& other) {
                          return other.intersects(candidate);
                        });
      if (free && !place) place = candidate;
    }
    if (place) taken.push_back(*place);
    places.push_back(place);
  }
  return places;
}

}  // namespace probewright::windows
