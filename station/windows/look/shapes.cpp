#include "station/windows/look/shapes.h"

#include <QPainter>
#include <QPen>
#include <QPolygonF>

namespace probewright::windows {
namespace {

/// Coordinates below are of a square from 0 to 1.
struct Square {
  QPainter& painter;
  QRectF box;
  QPointF at(double x, double y) const { return {box.left() + x * box.width(), box.top() + y * box.height()}; }
  void path(std::initializer_list<QPointF> points) const {
    QPolygonF line;
    for (const QPointF& point : points) line << at(point.x(), point.y());
    painter.drawPolyline(line);
  }
  QRectF inner(double by) const {
    return box.adjusted(by * box.width(), by * box.height(), -by * box.width(), -by * box.height());
  }
};

void draw_tray(const Square& square) { square.path({{0.12, 0.62}, {0.12, 0.9}, {0.88, 0.9}, {0.88, 0.62}}); }

void draw_lines(const Square& square, Shape shape, const QColor& colour) {
  QPainter& painter = square.painter;
  switch (shape) {
    case Shape::tick:
      return square.path({{0.1, 0.55}, {0.38, 0.83}, {0.9, 0.2}});
    case Shape::cross:
      square.path({{0.16, 0.16}, {0.84, 0.84}});
      return square.path({{0.84, 0.16}, {0.16, 0.84}});
    case Shape::crossbar:
      painter.drawEllipse(square.inner(0.1));
      return square.path({{0.28, 0.5}, {0.72, 0.5}});
    case Shape::inward:
      draw_tray(square);
      square.path({{0.5, 0.06}, {0.5, 0.66}});
      return square.path({{0.27, 0.44}, {0.5, 0.67}, {0.73, 0.44}});
    case Shape::lift:
      draw_tray(square);
      square.path({{0.5, 0.68}, {0.5, 0.1}});
      return square.path({{0.27, 0.32}, {0.5, 0.09}, {0.73, 0.32}});
    case Shape::ring:
      painter.drawEllipse(square.inner(0.14));
      return;
    case Shape::gap:
      painter.drawArc(square.inner(0.1), 16 * 55, 16 * 290);
      square.path({{0.5, 0.3}, {0.5, 0.56}});
      return square.path({{0.5, 0.7}, {0.5, 0.71}});
    case Shape::turning:
      painter.drawEllipse(square.inner(0.1));
      painter.setBrush(colour);
      painter.drawPie(square.inner(0.1), 16 * -90, 16 * 180);
      return;
    case Shape::none:
      return;
  }
}

}  // namespace

void draw_shape(QPainter& painter, Shape shape, const QRectF& box, const QColor& colour) {
  painter.save();
  painter.setRenderHint(QPainter::Antialiasing);
  const bool heavy = shape == Shape::tick || shape == Shape::cross;
  painter.setPen(QPen{colour, box.width() * (heavy ? 0.19 : 0.12), Qt::SolidLine, Qt::FlatCap, Qt::MiterJoin});
  painter.setBrush(Qt::NoBrush);
  draw_lines({painter, box}, shape, colour);
  painter.restore();
}

}  // namespace probewright::windows
