#include "station/windows/line/margin_rails.h"

#include <QFontMetricsF>
#include <QPainter>
#include <QPainterPath>
#include <algorithm>

#include "station/windows/line/rail_points.h"
#include "station/windows/look/label_places.h"
#include "station/windows/look/look.h"

namespace probewright::windows {

using Kind = RailPoint::Kind;

double RailScale::y(double position) const {
  const double held = std::clamp(position, -shown, shown);
  const double inset = std::min(5.0, place.height() * 0.06);
  return place.center().y() - held / shown * (place.height() / 2 - inset);
}

double RailScale::slot_width() const { return place.width() / std::max(rail_places, 1); }

double RailScale::x(int slot) const { return place.left() + (slot + 0.5) * slot_width(); }

QRectF RailScale::between() const { return {place.left(), y(1.0), place.width(), y(-1.0) - y(1.0)}; }

std::vector<const RailPoint*> named_points(const std::vector<RailPoint>& points, int most) {
  std::vector<const RailPoint*> named;
  for (const RailPoint& point : points)
    if (point.kind != Kind::inside) named.push_back(&point);
  std::stable_sort(named.begin(), named.end(), [](const RailPoint* a, const RailPoint* b) {
    if (a->kind != b->kind) return a->kind == Kind::outside;
    return a->margin < b->margin;
  });
  const RailPoint* nearest = nearest_to_an_edge(points);
  if (nearest && nearest->kind == Kind::inside) named.push_back(nearest);
  if (static_cast<int>(named.size()) > most) named.resize(static_cast<std::size_t>(std::max(most, 0)));
  return named;
}

QRectF label_room(const QRectF& place, const TypeScale& type) {
  const double more = type.line(Text::body) * 0.28;
  return place.adjusted(0, -more, 0, more);
}

namespace {

/// Half the width of a mark.
double reach(const RailScale& scale, const Look& look) {
  return std::clamp(scale.slot_width() * 0.45, 1.5, look.type().length(4.6));
}

void draw_rails(QPainter& painter, const RailScale& scale, const Colours& colours) {
  const QRectF between = scale.between();
  painter.fillRect(between, colours.well);
  painter.setPen(QPen{colours.edge, 1.0, Qt::DotLine});
  const double middle = std::floor(scale.y(0.0)) + 0.5;
  painter.drawLine(QPointF{between.left(), middle}, QPointF{between.right(), middle});
  for (const double rail : {1.0, -1.0})
    painter.fillRect(QRectF{between.left(), std::round(scale.y(rail)) - 1.0, between.width(), 2.0}, colours.ink);
}

/// The strip that is given up for uncertainty: a post for each check, outwards from the rail; its cap is the limit
/// itself.
void draw_post(QPainter& painter, const RailScale& scale, const RailPoint& point, double side, const Look& look) {
  const double half = std::clamp(scale.slot_width() * 0.34, 1.5, look.type().length(5)), x = scale.x(point.slot);
  const double from = scale.y(side), to = scale.y(side * (1.0 + point.guard)), thin = look.type().length(1.2);
  const QColor& colour = look.colours().guard;
  painter.fillRect(QRectF{QPointF{x - thin / 2, std::min(from, to)}, QSizeF{thin, std::abs(to - from)}}, colour);
  painter.fillRect(QRectF{x - half, to - thin / 2, 2 * half, thin}, colour);
}

void draw_guard(QPainter& painter, const RailScale& scale, const RailPoint& point, const Look& look) {
  if (!(point.guard > 0.0)) return;
  draw_post(painter, scale, point, 1.0, look);
  if (!point.one_sided) draw_post(painter, scale, point, -1.0, look);
}

void draw_diamond(QPainter& painter, QPointF at, double r, const QColor& colour) {
  painter.setPen(Qt::NoPen);
  painter.setBrush(colour);
  painter.drawPolygon(
      QPolygonF{{at.x(), at.y() - r}, {at.x() + r, at.y()}, {at.x(), at.y() + r}, {at.x() - r, at.y()}});
}

/// Outside: a square with a cross in it; beyond what is shown, a wedge that points on.
void draw_outside(QPainter& painter, const RailScale& scale, const RailPoint& point, double r, const QColor& colour) {
  const QPointF at{scale.x(point.slot), scale.y(point.position)};
  if (std::abs(point.position) > RailScale::shown) {
    const double up = point.position > 0 ? -1.0 : 1.0;
    painter.setPen(Qt::NoPen);
    painter.setBrush(colour);
    painter.drawPolygon(QPolygonF{
        {at.x() - 1.3 * r, at.y() - up * r}, {at.x() + 1.3 * r, at.y() - up * r}, {at.x(), at.y() + up * 1.2 * r}});
    return;
  }
  painter.setPen(QPen{colour, std::max(1.6, r * 0.4)});
  painter.setBrush(Qt::NoBrush);
  painter.drawLine(at + QPointF{-r, -r}, at + QPointF{r, r});
  painter.drawLine(at + QPointF{-r, r}, at + QPointF{r, -r});
  painter.drawRect(QRectF{at.x() - r * 1.3, at.y() - r * 1.3, 2.6 * r, 2.6 * r});
}

void draw_point(QPainter& painter, const RailScale& scale, const RailPoint& point, const Look& look) {
  const Colours& colours = look.colours();
  const double r = reach(scale, look), x = scale.x(point.slot);
  if (point.kind == Kind::unknown) {
    painter.setPen(QPen{colours.fail, 1.6});
    painter.setBrush(colours.card);
    painter.drawEllipse(QPointF{x, scale.y(0.0)}, r * 1.1, r * 1.1);
    return;
  }
  const QColor& colour = point.kind == Kind::inside ? colours.ink : colours.fail;
  painter.setPen(QPen{colour, 1.4});
  painter.drawLine(QPointF{x, scale.y(point.position + point.whisker)},
                   QPointF{x, scale.y(point.position - point.whisker)});
  if (point.kind == Kind::inside)
    draw_diamond(painter, {x, scale.y(point.position)}, r, colour);
  else
    draw_outside(painter, scale, point, r, colour);
}

/// What a mark and its whisker cover.
QRectF covered(const RailScale& scale, const RailPoint& point, double r) {
  const double middle = point.kind == Kind::unknown ? 0.0 : point.position;
  const double top = scale.y(middle + point.whisker), bottom = scale.y(middle - point.whisker);
  return QRectF{scale.x(point.slot) - r, std::min(top, scale.y(middle) - r), 2 * r, std::max(bottom - top, 2 * r)};
}

/// What words must not cover: marks and whiskers, and the rails' own lines.
std::vector<QRectF> taken_by(const RailScale& scale, const std::vector<RailPoint>& points, double r) {
  std::vector<QRectF> taken;
  for (const RailPoint& point : points) taken.push_back(covered(scale, point, r));
  for (const double rail : {1.0, -1.0})
    taken.push_back({scale.place.left(), scale.y(rail) - 1.5, scale.place.width(), 3.0});
  return taken;
}

/// What they had better not cover: the guard posts.
std::vector<QRectF> posts_of(const RailScale& scale, const std::vector<RailPoint>& points) {
  std::vector<QRectF> posts;
  const double half = scale.slot_width() * 0.34;
  for (const RailPoint& point : points)
    for (const double side : {1.0, -1.0}) {
      if (side < 0 && point.one_sided) continue;
      const double from = scale.y(side), to = scale.y(side * (1.0 + point.guard));
      posts.push_back({scale.x(point.slot) - half, std::min(from, to) - 1, 2 * half, std::abs(to - from) + 2});
    }
  return posts;
}

/// A place that keeps clear of the posts as well, and where there is none, one that only keeps clear of the marks.
std::optional<QRectF> label_rect(const QRectF& room, const LabelWish& wish, const std::vector<QRectF>& marks,
                                 const std::vector<QRectF>& posts) {
  std::vector<QRectF> all = marks;
  all.insert(all.end(), posts.begin(), posts.end());
  if (const auto place = label_places(room, {wish}, all).front()) return place;
  return label_places(room, {wish}, marks).front();
}

/// A thin line to a name that could not stand beside its mark.
void draw_leader(QPainter& painter, QPointF mark, const QRectF& label, double r) {
  const QPointF near{std::clamp(mark.x(), label.left() + 3, label.right() - 3),
                     mark.y() < label.top() ? label.top() + 2 : label.bottom() - 2};
  if (mark.y() > label.top() - r && mark.y() < label.bottom() + r) return;
  const QPen words = painter.pen();
  painter.setPen(QPen{words.color(), 1.0, Qt::DotLine});
  painter.drawLine(mark, near);
  painter.setPen(words);
}

void draw_labels(QPainter& painter, const RailScale& scale, const std::vector<RailPoint>& points, const Look& look) {
  const QFont font = look.type().font(Text::small);
  const QFontMetricsF metrics{font};
  const double r = reach(scale, look);
  const QRectF room = label_room(scale.place, look.type());
  std::vector<QRectF> taken = taken_by(scale, points, r);
  const std::vector<QRectF> posts = posts_of(scale, points);
  painter.setFont(font);
  for (const RailPoint* point : named_points(points, scale.place.height() > 5.5 * metrics.height() ? 4 : 2)) {
    const QPointF at{scale.x(point->slot), scale.y(point->kind == Kind::unknown ? 0.0 : point->position)};
    for (const double share : {0.8, 0.5, 0.32}) {  // a shortened name is better than none
      const QString words = metrics.elidedText(point->name, Qt::ElideRight, scale.place.width() * share);
      const LabelWish wish{at, {metrics.horizontalAdvance(words) + 4, metrics.height() * 0.94}, r * 1.3 + 3};
      const auto place = label_rect(room, wish, taken, posts);
      if (!place) continue;
      painter.setPen(point->kind == Kind::inside ? look.colours().ink : look.colours().fail);
      draw_leader(painter, at, *place, r);
      // Where it could not keep clear of the posts, they stand back behind it.
      QColor ground = scale.between().contains(place->center()) ? look.colours().well : look.colours().card;
      ground.setAlphaF(0.85F);
      painter.fillRect(*place, ground);
      painter.drawText(*place, Qt::AlignCenter | Qt::TextSingleLine, words);
      taken.push_back(*place);
      break;
    }
  }
}

}  // namespace

void draw_margin_rails(QPainter& painter, const QRectF& place, const std::vector<RailPoint>& points, int rail_places,
                       const Look& look) {
  const RailScale scale{place, rail_places};
  painter.save();
  painter.setClipRect(label_room(place, look.type()));
  draw_rails(painter, scale, look.colours());
  painter.setRenderHint(QPainter::Antialiasing);
  for (const RailPoint& point : points) draw_guard(painter, scale, point, look);
  for (const RailPoint& point : points) draw_point(painter, scale, point, look);
  draw_labels(painter, scale, points, look);
  painter.restore();
}

}  // namespace probewright::windows
