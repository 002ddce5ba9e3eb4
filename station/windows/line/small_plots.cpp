#include "station/windows/line/small_plots.h"

#include <QCoreApplication>
#include <QPainter>
#include <QPainterPath>
#include <algorithm>
#include <optional>

#include "station/base/numbers.h"
#include "station/windows/look/look.h"
#include "station/windows/look/written.h"

namespace probewright::windows {

using sequence::NestPlots;
using sequence::PlotLine;

namespace {

struct Say {
  Q_DECLARE_TR_FUNCTIONS(Plots)
};

struct Span {
  float least = 0.0F, most = 0.0F;
};

std::optional<Span> span_of(const std::vector<float>& one, const std::vector<float>& other = {}) {
  std::optional<Span> span;
  for (const auto* values : {&one, &other})
    for (const float value : *values)
      span = span ? Span{std::min(span->least, value), std::max(span->most, value)} : Span{value, value};
  return span && span->most > span->least ? span : std::nullopt;
}

void draw_line(QPainter& painter, const QRectF& box, const PlotLine& line, const Span& x, const Span& y,
               const QPen& pen) {
  const std::size_t count = std::min(line.x.size(), line.y.size());
  if (count < 2) return;
  QPolygonF points;
  points.reserve(static_cast<qsizetype>(count));
  for (std::size_t i = 0; i < count; ++i)
    points << QPointF{box.left() + static_cast<double>((line.x[i] - x.least) / (x.most - x.least)) * box.width(),
                      box.bottom() - static_cast<double>((line.y[i] - y.least) / (y.most - y.least)) * box.height()};
  painter.setPen(pen);
  painter.drawPolyline(points);
}

QPen red_pen(const Look& look) { return QPen{look.colours().red, look.type().length(1.5)}; }

QPen infrared_pen(const Look& look) {
  QPen pen{look.colours().infrared, look.type().length(1.5)};
  pen.setDashPattern({3.0, 1.6});
  return pen;
}

/// The well of a plot above its caption.
QRectF draw_frame(QPainter& painter, const QRectF& place, const QString& caption, const Look& look) {
  const double line = look.type().line(Text::small);
  const QRectF well = place.adjusted(0, 0, 0, -line * 1.1);
  painter.fillRect(well, look.colours().well);
  const QRectF row{place.left(), well.bottom() + line * 0.1, place.width(), line};
  write_line(painter, row, caption, look.type().font(Text::small), look.colours().quiet);
  return well.adjusted(2, 3, -2, -3);
}

QString spectra_caption(const NestPlots* plots) {
  const auto span = plots ? span_of(plots->red_spectrum.x, plots->infrared_spectrum.x) : std::nullopt;
  if (!span) return Say::tr("spectra");
  const auto number = [](float value) { return QString::fromStdString(fixed(static_cast<double>(value), 0)); };
  return Say::tr("%1 to %2 nm").arg(number(span->least), number(span->most));
}

QString pulses_caption(const NestPlots* plots) {
  const auto span = plots ? span_of(plots->red_pulses.x, plots->infrared_pulses.x) : std::nullopt;
  if (!span) return Say::tr("pulses");
  return Say::tr("pulses, %1 s").arg(QString::fromStdString(fixed(static_cast<double>(span->most - span->least), 1)));
}

}  // namespace

void draw_spectra(QPainter& painter, const QRectF& place, const NestPlots* plots, const Look& look) {
  painter.save();
  painter.setRenderHint(QPainter::Antialiasing);
  const QRectF box = draw_frame(painter, place, spectra_caption(plots), look);
  const auto x = plots ? span_of(plots->red_spectrum.x, plots->infrared_spectrum.x) : std::nullopt;
  const auto y = plots ? span_of(plots->red_spectrum.y, plots->infrared_spectrum.y) : std::nullopt;
  if (x && y) {
    draw_line(painter, box, plots->red_spectrum, *x, *y, red_pen(look));
    draw_line(painter, box, plots->infrared_spectrum, *x, *y, infrared_pen(look));
  }
  painter.restore();
}

void draw_pulses(QPainter& painter, const QRectF& place, const NestPlots* plots, const Look& look) {
  painter.save();
  painter.setRenderHint(QPainter::Antialiasing);
  const QRectF box = draw_frame(painter, place, pulses_caption(plots), look);
  const auto x = plots ? span_of(plots->red_pulses.x, plots->infrared_pulses.x) : std::nullopt;
  const double half = box.height() * 0.46;
  if (x) {
    if (const auto y = span_of(plots->red_pulses.y))
      draw_line(painter, {box.left(), box.top(), box.width(), half}, plots->red_pulses, *x, *y, red_pen(look));
    if (const auto y = span_of(plots->infrared_pulses.y))
      draw_line(painter, {box.left(), box.bottom() - half, box.width(), half}, plots->infrared_pulses, *x, *y,
                infrared_pen(look));
  }
  painter.restore();
}

}  // namespace probewright::windows
