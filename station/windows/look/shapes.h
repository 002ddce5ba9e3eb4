#pragma once
#include <QRectF>

class QColor;
class QPainter;

namespace probewright::windows {

/// A shape that stands beside a word and says the same. Each has an outline of its own, so that none depends on colour.
enum class Shape {
  none,
  tick,      ///< pass, ready
  cross,     ///< fail
  crossbar,  ///< void: a ring with a bar across
  inward,    ///< armed: an arrow into a tray
  lift,      ///< take the probe out: an arrow out of a tray
  ring,      ///< empty
  gap,       ///< not ready: a ring with a gap and a mark in it
  turning    ///< running: a ring, half of it filled
};

/// Draws a shape as large as `box`, a square.
void draw_shape(QPainter& painter, Shape shape, const QRectF& box, const QColor& colour);

}  // namespace probewright::windows
