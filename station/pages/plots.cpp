#include "station/pages/plots.h"

#include <algorithm>
#include <cmath>
#include <limits>

#include <qcustomplot.h>

#include "station/base/numbers.h"

namespace probewright::pages {
namespace {

constexpr std::size_t most_joined = 600;  // more points than that have no line between them: it would be a blot
constexpr double px_per_mm = 10.0;        // of a plot's own picture; lines and sizes of it are whole numbers of these

QFont plot_font(double size_mm) {
  QFont font{font_family};
  font.setPixelSize(static_cast<int>(std::lround(size_mm * px_per_mm)));
  font.setHintingPreference(QFont::PreferNoHinting);
  without_ligatures(font);
  return font;
}

void dress(QCPAxis& axis) {
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

// A plot without ground of its own: the page's overprint shows through.
void dress(QCustomPlot& plot) {
  plot.setLocale(QLocale::c());
  plot.setBackground(Qt::NoBrush);
  plot.axisRect()->setMinimumMargins({0, 15, 45, 0});  // room for half of the last number
  dress(*plot.xAxis);
  dress(*plot.yAxis);
}

void draw(QCustomPlot& plot, const Canvas& canvas, const QRectF& box_mm) {
  const QRectF box = canvas.px(box_mm);
  canvas.painter->save();
  canvas.painter->translate(box.topLeft());
  canvas.painter->scale(canvas.px_per_mm / px_per_mm, canvas.px_per_mm / px_per_mm);
  plot.toPainter(canvas.plot_painter, static_cast<int>(box_mm.width() * px_per_mm),
                 static_cast<int>(box_mm.height() * px_per_mm));
  canvas.painter->restore();
}

// Whole numbers only, about five.
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
  return QFontMetricsF{plot_font(size_mm)}.elidedText(qt(text), Qt::ElideRight, room_mm * px_per_mm);
}

void write_at(QCustomPlot& plot, double x, double y, const QString& text, Qt::Alignment where) {
  auto* words = new QCPItemText{&plot};  // the plot owns its items
  words->position->setCoords(x, y);
  words->setPositionAlignment(where);
  words->setText(text);
  words->setFont(plot_font(2.7));
  words->setColor(ink::text);
  words->setPadding({12, 6, 12, 6});
  words->setClipToAxisRect(false);
}

void fill_bars(QCustomPlot& plot, const std::vector<FailingCheck>& checks) {
  QSharedPointer<QCPAxisTickerText> names{new QCPAxisTickerText};
  auto* bars = new QCPBars{plot.yAxis, plot.xAxis};  // the plot owns its bars
  bars->setBrush(ink::bar);
  bars->setPen(Qt::NoPen);
  bars->setWidth(0.62);
  int most = 1;
  for (std::size_t i = 0; i < checks.size(); ++i) {
    const double place = static_cast<double>(i);
    names->addTick(place, elided(checks[i].name, 2.7, 58.0));
    bars->addData(place, checks[i].runs);
    write_at(plot, checks[i].runs, place, qt(std::to_string(checks[i].runs)), Qt::AlignLeft | Qt::AlignVCenter);
    most = std::max(most, checks[i].runs);
  }
  plot.yAxis->setTicker(names);
  plot.yAxis->setRangeReversed(true);
  plot.yAxis->setRange(-0.6, static_cast<double>(checks.size()) - 0.4);
  plot.xAxis->setTicker(whole_numbers(most));
  plot.xAxis->setRange(0, most * 1.08);
}

bool outside(const RunChart& chart, double value) {
  return (chart.lower_limit && value < *chart.lower_limit) || (chart.upper_limit && value > *chart.upper_limit);
}

void add_points(QCustomPlot& plot, const RunChart& chart, bool wanted_outside) {
  QCPGraph* points = plot.addGraph();
  points->setLineStyle(QCPGraph::lsNone);
  const double size = chart.values.size() > 300 ? 6 : 10;
  const QPen pen{wanted_outside ? ink::outside : ink::text, wanted_outside ? 5.0 : 2.0};
  points->setScatterStyle({wanted_outside ? QCPScatterStyle::ssCross : QCPScatterStyle::ssDisc, pen,
                           QBrush{pen.color()}, wanted_outside ? 22.0 : size});
  points->setPen(pen);
  for (std::size_t i = 0; i < chart.values.size(); ++i)
    if (std::isfinite(chart.values[i]) && outside(chart, chart.values[i]) == wanted_outside)
      points->addData(static_cast<double>(i + 1), chart.values[i]);
}

// The line breaks where there is no reading.
void add_line(QCustomPlot& plot, const RunChart& chart) {
  QCPGraph* line = plot.addGraph();
  line->setPen(QPen{ink::bar, chart.values.size() > 300 ? 1.0 : 2.0});
  for (std::size_t i = 0; i < chart.values.size(); ++i)
    line->addData(static_cast<double>(i + 1),
                  std::isfinite(chart.values[i]) ? chart.values[i] : std::numeric_limits<double>::quiet_NaN());
}

void add_limit(QCustomPlot& plot, double value, const std::string& words, Qt::Alignment where) {
  QCPGraph* line = plot.addGraph();
  line->setPen(QPen{ink::text, 3});
  const QCPRange runs = plot.xAxis->range();
  line->setData({runs.lower, runs.upper}, {value, value});
  write_at(plot, runs.upper, value, qt(words + " " + shortest(value)), Qt::AlignRight | where);
}

// All values and limits with a tenth of air; a single value gets some too.
QCPRange value_range(const RunChart& chart) {
  double low = std::numeric_limits<double>::infinity(), high = -low;
  const auto take = [&](double value) {
    if (!std::isfinite(value)) return;
    low = std::min(low, value);
    high = std::max(high, value);
  };
  for (const double value : chart.values) take(value);
  if (chart.lower_limit) take(*chart.lower_limit);
  if (chart.upper_limit) take(*chart.upper_limit);
  const double span = high > low ? high - low : high == 0.0 ? 1.0 : std::abs(high) * 0.02;
  return {low - 0.12 * span, high + 0.12 * span};
}

void fill_chart(QCustomPlot& plot, const RunChart& chart) {
  const double runs = static_cast<double>(chart.values.size());
  plot.xAxis->setRange(std::max(0.4 - 0.01 * runs, 0.05),
                       runs + 0.6 + 0.01 * runs);  // from the first run on; there is no run 0
  plot.xAxis->setTicker(whole_numbers(runs));
  plot.xAxis->setLabel("run of the shift");
  plot.yAxis->setRange(value_range(chart));
  plot.yAxis->setLabel(elided(chart.name + (chart.unit.empty() ? "" : ", " + chart.unit), 2.7, 40.0));
  plot.yAxis->setNumberFormat("g");
  plot.yAxis->setNumberPrecision(7);
  if (chart.values.size() <= most_joined) add_line(plot, chart);
  if (chart.lower_limit) add_limit(plot, *chart.lower_limit, "lower acceptance limit", Qt::AlignTop);
  if (chart.upper_limit) add_limit(plot, *chart.upper_limit, "upper acceptance limit", Qt::AlignBottom);
  add_points(plot, chart, false);
  add_points(plot, chart, true);
}

}  // namespace

Block bar_plot(const std::vector<FailingCheck>& checks) {
  Block block;
  block.height_mm = 12.0 + 6.0 * static_cast<double>(checks.size());
  block.draw = [checks](const Canvas& canvas, QRectF box) {
    QCustomPlot plot;
    dress(plot);
    plot.yAxis->grid()->setVisible(false);
    plot.yAxis->setTickPen(Qt::NoPen);
    plot.xAxis->setLabel("failed runs");
    fill_bars(plot, checks);
    draw(plot, canvas, box);
  };
  return block;
}

Block run_chart(const RunChart& chart) {
  Block block;
  block.height_mm = 62.0;
  block.draw = [chart](const Canvas& canvas, QRectF box) {
    QCustomPlot plot;
    dress(plot);
    plot.xAxis->grid()->setVisible(false);
    plot.yAxis->grid()->setVisible(false);  // the limits are the lines to look at
    fill_chart(plot, chart);
    draw(plot, canvas, box);
  };
  return block;
}

}  // namespace probewright::pages
