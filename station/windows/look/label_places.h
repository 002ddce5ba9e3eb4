#pragma once
#include <QRectF>
#include <optional>
#include <vector>

namespace probewright::windows {

/// A label that wants to stand beside a point.
struct LabelWish {
  QPointF at;         ///< the point
  QSizeF size;        ///< of the label
  double away = 4.0;  ///< room between both
};

/// A place for each label inside `room`, or none: to the left, to the right, above or below its point, free of all of
/// `taken` and of labels placed before it. Earlier wishes are served first. Pure.
std::vector<std::optional<QRectF>> label_places(const QRectF& room, const std::vector<LabelWish>& wishes,
                                                std::vector<QRectF> taken);

}  // namespace probewright::windows
