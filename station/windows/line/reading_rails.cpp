#include "station/windows/line/reading_rails.h"

#include <QFontMetricsF>
#include <QPainter>
#include <algorithm>
#include <cmath>

#include "station/windows/look/look.h"
#include "station/windows/look/shapes.h"
#include "station/windows/look/written.h"
#include "station/windows/words/check_words.h"
#include "station/windows/words/filled.h"
#include "station/windows/words/reading_words.h"

namespace probewright::windows {

using sequence::JudgedReading;

namespace {

/// Position, whisker and guard of a two-sided reading: the middle is 0, the acceptance limits are -1 and 1.
void place_between(ReadingRail& rail, const JudgedReading& judged) {
  const auto& [lower, upper] = judged.judgement.acceptance;
  const double middle = (*lower + *upper) / 2, half = (*upper - *lower) / 2;
  if (!(half > 0.0)) return;
  rail.placed = true;
  rail.position = (*judged.reading.value - middle) / half;
  rail.whisker = judged.reading.expanded_uncertainty.value_or(0.0) / half;
  if (judged.judgement.limits.upper) rail.guard = (*judged.judgement.limits.upper - *upper) / half;
}

/// One-sided: what is typical is 0, the acceptance limit is 1. The margin says how far the typical value lies.
void place_below(ReadingRail& rail, const JudgedReading& judged) {
  const bool above = judged.judgement.acceptance.upper.has_value();
  const double limit = above ? *judged.judgement.acceptance.upper : *judged.judgement.acceptance.lower;
  const double room =
      *judged.judgement.margin != 0.0 ? std::abs((limit - *judged.reading.value) / *judged.judgement.margin) : 0.0;
  rail.one_sided = true;
  if (!(room > 0.0)) return;
  rail.placed = true;
  rail.position = (above ? 1.0 : -1.0) * (1.0 - *judged.judgement.margin);
  rail.whisker = judged.reading.expanded_uncertainty.value_or(0.0) / room;
  const auto& bound = above ? judged.judgement.limits.upper : judged.judgement.limits.lower;
  if (bound) rail.guard = std::abs(*bound - limit) / room;
}

ReadingRail rail_of(const JudgedReading& judged) {
  ReadingRail rail;
  rail.name = as_sentence(check_words(judged.reading.check));
  rail.name.chop(1);
  rail.value = value_words(judged.reading);
  rail.judged = judged.judgement.judged();
  if (!rail.judged) return rail;
  rail.ok = judged.judgement.lets_pass();
  rail.margin = judged.judgement.margin.value_or(-1e9);
  const auto& [lower, upper] = judged.judgement.acceptance;
  if (lower) rail.lower = number_words(*lower, judged.reading.expanded_uncertainty);
  if (upper) rail.upper = number_words(*upper, judged.reading.expanded_uncertainty);
  if (judged.reading.value && judged.judgement.margin && judged.reading.unit != "yes/no")
    lower&& upper ? place_between(rail, judged) : place_below(rail, judged);
  return rail;
}

}  // namespace

std::vector<ReadingRail> reading_rails(const sequence::RunOutcome& outcome) {
  std::vector<ReadingRail> rails;
  for (const JudgedReading& judged : outcome.readings) rails.push_back(rail_of(judged));
  std::stable_sort(rails.begin(), rails.end(), [](const ReadingRail& a, const ReadingRail& b) {
    if (a.judged != b.judged) return a.judged;
    if (a.ok != b.ok) return !a.ok;
    return a.judged && a.margin < b.margin;
  });
  return rails;
}

ReadingRails::ReadingRails(const sequence::RunOutcome& outcome, const Look& look, QWidget* parent)
    : QWidget(parent), look_(look), rails_(reading_rails(outcome)) {
  QSizePolicy policy{QSizePolicy::Expanding, QSizePolicy::Minimum};
  policy.setHeightForWidth(true);
  setSizePolicy(policy);
  connect(&look, &Look::changed, this, [this] {
    updateGeometry();
    update();
  });
  QStringList spoken;
  for (const ReadingRail& rail : rails_) spoken << rail.name + QLatin1Char(' ') + rail.value;
  setAccessibleName(spoken.join(QStringLiteral("; ")));
}

int ReadingRails::columns(double width) const {
  return std::clamp(static_cast<int>(width / (look_.type().line(Text::body) * 21.0)), 1, 4);
}

double ReadingRails::cell_height() const {
  return look_.type().line(Text::body) * 1.15 + look_.type().line(Text::small) * 1.9;
}

int ReadingRails::heightForWidth(int width) const {
  const int across = columns(width), rows = (static_cast<int>(rails_.size()) + across - 1) / across;
  return static_cast<int>(rows * cell_height() + 1);
}

QSize ReadingRails::sizeHint() const { return {400, heightForWidth(std::max(width(), 400))}; }

void ReadingRails::paintEvent(QPaintEvent*) {
  QPainter painter{this};
  const int across = columns(width());
  const double gap = look_.type().length(28), cell = (width() - gap * (across - 1)) / across;
  const int rows = (static_cast<int>(rails_.size()) + across - 1) / across;
  for (std::size_t i = 0; i < rails_.size(); ++i) {  // down the columns, as they are read
    const int column = static_cast<int>(i) / rows, row = static_cast<int>(i) % rows;
    draw_cell(painter, {column * (cell + gap), row * cell_height(), cell, cell_height()}, rails_[i]);
  }
}

void ReadingRails::draw_cell(QPainter& painter, const QRectF& cell, const ReadingRail& rail) const {
  const TypeScale& type = look_.type();
  const QColor colour = rail.ok ? look_.colours().ink : look_.colours().fail;
  QFont bold = type.font(Text::body);
  bold.setBold(true);
  const QRectF row{cell.left(), cell.top(), cell.width(), type.line(Text::body) * 1.15};
  const double value = QFontMetricsF{bold}.horizontalAdvance(rail.value);
  QRectF name = row.adjusted(0, 0, -std::min(value + type.length(10), row.width() * 0.6), 0);
  if (!rail.ok) {
    const double side = type.line(Text::body) * 0.6;
    draw_shape(painter, Shape::cross, {name.left(), name.center().y() - side / 2, side, side}, colour);
    name.setLeft(name.left() + side + type.length(6));
  }
  write_line(painter, name, rail.name, rail.ok ? type.font(Text::body) : bold, colour);
  write_line(painter, row, rail.value, rail.judged ? bold : type.font(Text::body), colour, Qt::AlignRight);
  if (rail.judged) draw_rail(painter, {cell.left(), row.bottom(), cell.width(), type.line(Text::small) * 1.1}, rail);
}

/// From left to right: lower limit in figures, the scale, upper limit in figures.
void ReadingRails::draw_rail(QPainter& painter, const QRectF& row, const ReadingRail& rail) const {
  const TypeScale& type = look_.type();
  const Colours& colours = look_.colours();
  const double figure = type.length(58);
  if (rail.lower.isEmpty() && rail.upper.isEmpty()) return;
  write_line(painter, {row.left(), row.top(), figure - type.length(6), row.height()}, rail.lower,
             type.font(Text::small), colours.quiet, Qt::AlignRight);
  write_line(painter, {row.right() - figure + type.length(6), row.top(), figure, row.height()}, rail.upper,
             type.font(Text::small), colours.quiet);
  const QRectF scale = row.adjusted(figure, 0, -figure, 0);
  constexpr double shown = 1.3;
  const auto x = [&](double position) {
    return scale.center().x() + std::clamp(position, -shown, shown) / shown * scale.width() / 2;
  };
  const double y = row.center().y(), half = row.height() * 0.34;
  painter.fillRect(QRectF{x(-1), y - half * 0.5, x(1) - x(-1), half}, colours.well);
  if (!rail.upper.isEmpty()) {
    painter.fillRect(QRectF{x(1), y - half * 0.5, x(1 + rail.guard) - x(1), half}, colours.guard);
    painter.fillRect(QRectF{x(1) - 1, y - half, 2, 2 * half}, colours.ink);
  }
  if (!rail.lower.isEmpty()) {
    painter.fillRect(QRectF{x(-1 - rail.guard), y - half * 0.5, x(-1) - x(-1 - rail.guard), half}, colours.guard);
    painter.fillRect(QRectF{x(-1) - 1, y - half, 2, 2 * half}, colours.ink);
  }
  if (!rail.placed) return;
  const QColor colour = rail.ok ? colours.ink : colours.fail;
  painter.setRenderHint(QPainter::Antialiasing);
  painter.setPen(QPen{colour, 1.4});
  painter.drawLine(QPointF{x(rail.position - rail.whisker), y}, QPointF{x(rail.position + rail.whisker), y});
  const double r = type.length(4.2), at = x(rail.position);
  if (!rail.ok) {
    painter.drawLine(QPointF{at - r, y - r}, QPointF{at + r, y + r});
    painter.drawLine(QPointF{at - r, y + r}, QPointF{at + r, y - r});
    return;
  }
  painter.setBrush(colour);
  painter.drawPolygon(QPolygonF{{at, y - r}, {at + r, y}, {at, y + r}, {at - r, y}});
}

}  // namespace probewright::windows
