#include "station/pages/plot_dress.h"

#include <algorithm>
#include <cmath>

#include <qcustomplot.h>

namespace probewright::pages {
namespace {

void dress_axis(QCPAxis& axis) {
  axis.setTickLabelFont(plot_font(2.7));
  axis.setLabelFont(plot_font(2.7));
  axis.setTickLabelColor(ink::text);
  axis.setLabelColor(ink::quiet);
  axis.setBasePen(QPen{ink::quiet, 2});
  axis.setTickPen(QPen{ink::quiet, 2});
  axis.setSubTickPen(Qt::NoPen);
  axis.setTickLength(0, 10);
  axis.setSubTickLength(0, 0);
  axis.setTickLabelPadding(12);
  axis.setLabelPadding(10);
  axis.grid()->setPen(QPen{ink::rule, 1});
  axis.grid()->setZeroLinePen(Qt::NoPen);
}

}  // namespace

QFont plot_font(double size_mm) {
  QFont font{font_family};
  font.setPixelSize(static_cast<int>(std::lround(size_mm * plot_px_per_mm)));
  font.setHintingPreference(QFont::PreferNoHinting);
  without_ligatures(font);
  return font;
}

void dress(QCustomPlot& plot) {
  plot.setLocale(QLocale::c());
  plot.setBackground(Qt::NoBrush);
  plot.axisRect()->setMinimumMargins({0, 15, 45, 0});  // room for half of the last number
  dress_axis(*plot.xAxis);
  dress_axis(*plot.yAxis);
}

void draw(QCustomPlot& plot, const Canvas& canvas, const QRectF& box_mm) {
  const QRectF box = canvas.px(box_mm);
  canvas.painter->save();
  canvas.painter->translate(box.topLeft());
  canvas.painter->scale(canvas.px_per_mm / plot_px_per_mm, canvas.px_per_mm / plot_px_per_mm);
  plot.toPainter(canvas.plot_painter, static_cast<int>(box_mm.width() * plot_px_per_mm),
                 static_cast<int>(box_mm.height() * plot_px_per_mm));
  canvas.painter->restore();
}

QSharedPointer<QCPAxisTickerFixed> whole_numbers(double range) {
  QSharedPointer<QCPAxisTickerFixed> ticker{new QCPAxisTickerFixed};
  const double raw = std::max(range / 5, 1.0);
  const double decade = std::pow(10.0, std::floor(std::log10(raw)));
  const double steps[] = {1, 2, 5, 10};
  const double* step =
      std::find_if(std::begin(steps), std::end(steps) - 1, [&](double s) { return s * decade >= raw; });
  ticker->setTickStep(*step * decade);
  ticker->setScaleStrategy(QCPAxisTickerFixed::ssNone);
  return ticker;
}

QString elided(const std::string& text, double size_mm, double room_mm) {
  return QFontMetricsF{plot_font(size_mm)}.elidedText(qt(text), Qt::ElideRight, room_mm * plot_px_per_mm);
}

void write_at(QCustomPlot& plot, double x, double y, const QString& text, Qt::Alignment where, QColor colour) {
  auto* words = new QCPItemText{&plot};  // the plot owns its items
  words->position->setCoords(x, y);
  words->setPositionAlignment(where);
  words->setText(text);
  words->setFont(plot_font(2.7));
  words->setColor(colour);
  words->setPadding({12, 6, 12, 6});
  words->setClipToAxisRect(false);
}

}  // namespace probewright::pages
