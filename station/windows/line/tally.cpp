#include "station/windows/line/tally.h"

#include <QEvent>
#include <QPainter>
#include <algorithm>

#include "station/base/numbers.h"
#include "station/windows/line/line_model.h"
#include "station/windows/look/look.h"
#include "station/windows/look/written.h"
#include "station/windows/words/check_words.h"

namespace probewright::windows {

Tally::Tally(LineModel& model, const Look& look, QWidget* parent) : QWidget(parent), model_(model), look_(look) {
  setObjectName(QStringLiteral("tally"));
  connect(&model, &LineModel::view_changed, this, &Tally::show_view);
  connect(&look, &Look::changed, this, &Tally::dress);
  dress();
  show_view();
}

void Tally::set_low(bool low) {
  if (low == low_) return;
  low_ = low;
  dress();
}

void Tally::dress() {
  const TypeScale& type = look_.type();
  setFixedHeight(
      static_cast<int>(low_ ? type.line(Text::strong) * 1.5 : type.line(Text::figure) + 2.2 * type.line(Text::body)));
  update();
}

void Tally::show_view() {
  const auto& view = model_.view();
  if (view.tally == shown_ && view.lot == lot_) return;
  shown_ = view.tally, lot_ = view.lot;
  QStringList spoken;
  for (const Figure& figure : figures()) spoken << figure.number + QLatin1Char(' ') + figure.words;
  setAccessibleName(spoken.join(QStringLiteral(", ")));
  update();
}

std::vector<Tally::Figure> Tally::figures() const {
  const auto whole = [](int number) { return QString::number(number); };
  std::vector<Figure> figures;
  figures.push_back({whole(shown_.tested), tr("tested"),
                     lot_ ? tr("%1 of %2 in this lot").arg(lot_->tested).arg(lot_->quantity) : QString{}});
  const double share = shown_.tested > 0 ? 100.0 * shown_.passed_first_time / shown_.tested : 0.0;
  figures.push_back({whole(shown_.passed_first_time), tr("passed first time"),
                     shown_.tested > 0
                         ? tr("%1 % of %2").arg(QString::fromStdString(fixed(share, 1))).arg(shown_.tested)
                         : QString{}});
  figures.push_back({whole(shown_.failed), tr("failed"), {}});
  figures.push_back({whole(shown_.voids), tr("void"), {}});
  figures.push_back({QString::fromStdString(fixed(shown_.probes_per_hour, 0)), tr("an hour"), {}});
  return figures;
}

void Tally::paintEvent(QPaintEvent*) {
  QPainter painter{this};
  if (low_) return draw_row(painter);
  draw_failing(painter, draw_figures(painter));
}

/// Gives where the figures end.
double Tally::draw_figures(QPainter& painter) {
  const TypeScale& type = look_.type();
  double x = type.length(16);
  for (const Figure& figure : figures()) {
    const double width = std::max({type.width(Text::figure, figure.number), type.width(Text::body, figure.words),
                                   type.width(Text::body, figure.more)}) +
                         type.length(34);
    QRectF left{x, 0, width, static_cast<double>(height())};
    left.setTop(write(painter, left, {figure.number, type.font(Text::figure), 1}, look_.colours().ink));
    left.setTop(left.top() + write(painter, left, {figure.words, type.font(Text::body), 1}, look_.colours().ink));
    write(painter, left, {figure.more, type.font(Text::body), 1}, look_.colours().quiet);
    x += std::max(width, type.length(104));
  }
  return x;
}

void Tally::draw_row(QPainter& painter) {
  const TypeScale& type = look_.type();
  double x = type.length(16);
  for (const Figure& figure : figures()) {
    const double number = type.width(Text::strong, figure.number), words = type.width(Text::body, figure.words);
    const QRectF row{x, 0, number + words + type.length(8), static_cast<double>(height())};
    write_line(painter, row, figure.number, type.font(Text::strong), look_.colours().ink);
    write_line(painter, row.adjusted(number + type.length(5), 0, 0, 0), figure.words, type.font(Text::body),
               look_.colours().quiet);
    x += row.width() + type.length(16);
  }
}

void Tally::draw_failing(QPainter& painter, double from) {
  const TypeScale& type = look_.type();
  const double line = type.line(Text::body) * 1.12, most = width() - from - type.length(16);
  if (shown_.commonest_failing.empty() || most < type.length(240)) return;
  QRectF row{from, 0, most, line};
  write_line(painter, row, tr("Checks that failed most"), type.font(Text::body), look_.colours().quiet);
  const double words = std::min(most * 0.55, type.length(240)), bars = most - words - type.length(44);
  const int longest = std::max(shown_.commonest_failing.front().runs, 1);
  for (const auto& failing : shown_.commonest_failing) {
    row.translate(0, line);
    write_line(painter, {row.left(), row.top(), words, line}, check_words(failing.check), type.font(Text::body),
               look_.colours().ink);
    const double length = std::min(bars, type.length(220)) * failing.runs / longest;
    const QRectF bar{row.left() + words + type.length(8), row.top() + line * 0.22, length, line * 0.56};
    painter.fillRect(bar, look_.colours().edge);
    write_line(painter, {bar.right() + type.length(8), row.top(), type.length(60), line}, QString::number(failing.runs),
               type.font(Text::body), look_.colours().ink);
  }
}

void Tally::changeEvent(QEvent* event) {
  QWidget::changeEvent(event);
  if (event->type() == QEvent::LanguageChange) update();
}

}  // namespace probewright::windows
