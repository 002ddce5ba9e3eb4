#pragma once
#include <QRectF>
#include <vector>

#include "station/windows/line/berth_content.h"

class QPainter;

namespace probewright::windows {

class Look;
class TypeScale;

/// Where things stand between the rails: the common scale of all checks in px. Pure.
struct RailScale {
  QRectF place;
  int rail_places = 1;

  static constexpr double shown = 1.45;  ///< positions from -shown to +shown are in sight
  double y(double position) const;       ///< a position beyond what is shown stands at the edge
  double x(int slot) const;
  double slot_width() const;
  QRectF between() const;  ///< from rail to rail
};

/// Draws the marks of a run between the two acceptance limits: guard posts outside them, whiskers, what is nearest to
/// an edge or outside named beside its mark.
void draw_margin_rails(QPainter& painter, const QRectF& place, const std::vector<RailPoint>& points, int rail_places,
                       const Look& look);

/// Names may stand a little above and below the rails' place.
QRectF label_room(const QRectF& place, const TypeScale& type);

/// Which points are named, the most important first: those outside and without a value by rising margin, and the one
/// that is nearest to an edge. At most `most`.
std::vector<const RailPoint*> named_points(const std::vector<RailPoint>& points, int most);

}  // namespace probewright::windows
