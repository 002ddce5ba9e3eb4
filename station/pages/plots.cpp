#include "station/pages/plots.h"

#include <algorithm>
#include <cmath>
#include <limits>

#include <qcustomplot.h>

#include "station/base/numbers.h"
#include "station/pages/plot_dress.h"

namespace probewright::pages {
namespace {

constexpr std::size_t most_joined = 600;  // more points than that have no line between them: it would be a blot
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

// Name and unit where there is room for both; the name stands in the heading anyway.
QString axis_label(const RunChart& chart) {
  constexpr double room_mm = 40.0;
  const std::string both = chart.name + (chart.unit.empty() ? "" : ", " + chart.unit);
  const bool fits = elided(both, 2.7, room_mm) == qt(both);
  return fits || chart.unit.empty() ? elided(both, 2.7, room_mm) : qt(chart.unit);
}

void fill_chart(QCustomPlot& plot, const RunChart& chart) {
  const double runs = static_cast<double>(chart.values.size());
  plot.xAxis->setRange(std::max(0.4 - 0.01 * runs, 0.05),
                       runs + 0.6 + 0.01 * runs);  // from the first run on; there is no run 0
  plot.xAxis->setTicker(whole_numbers(runs));
  plot.xAxis->setLabel("run of the shift");
  plot.yAxis->setRange(value_range(chart));
  plot.yAxis->setLabel(axis_label(chart));
  plot.yAxis->setNumberFormat("g");
  plot.yAxis->setNumberPrecision(7);
  if (chart.values.size() <= most_joined) add_line(plot, chart);
  if (chart.lower_limit) add_limit(plot, *chart.lower_limit, "lower acceptance limit", Qt::AlignTop);
  if (chart.upper_limit) add_limit(plot, *chart.upper_limit, "upper acceptance limit", Qt::AlignBottom);
  add_points(plot, chart, false);
  add_points(plot, chart, true);
}

// About as many bins as the root of the number of values, on the scale of the chart beside it.
void fill_histogram(QCustomPlot& plot, const RunChart& chart) {
  const QCPRange range = value_range(chart);
  std::size_t count = 0;
  for (const double value : chart.values) count += std::isfinite(value) ? 1 : 0;
  const int bins = std::clamp(static_cast<int>(std::lround(std::sqrt(static_cast<double>(count)))) + 4, 6, 40);
  std::vector<int> heights(static_cast<std::size_t>(bins), 0);
  for (const double value : chart.values) {
    if (!std::isfinite(value)) continue;
    const int bin = static_cast<int>(bins * (value - range.lower) / range.size());
    ++heights[static_cast<std::size_t>(std::clamp(bin, 0, bins - 1))];
  }
  auto* bars = new QCPBars{plot.yAxis, plot.xAxis};  // the plot owns its bars
  bars->setBrush(ink::bar);
  bars->setPen(Qt::NoPen);
  bars->setWidth(0.9 * range.size() / bins);
  for (int bin = 0; bin < bins; ++bin)
    bars->addData(range.lower + (bin + 0.5) * range.size() / bins, heights[static_cast<std::size_t>(bin)]);
  const double most = *std::max_element(heights.begin(), heights.end());
  plot.yAxis->setRange(range);
  plot.yAxis->setTickLabels(false);
  plot.xAxis->setRange(0, std::max(1.0, most) * 1.05);
  plot.xAxis->setTicker(whole_numbers(2 * most));
  plot.xAxis->setLabel("runs");
  for (const auto& limit : {chart.lower_limit, chart.upper_limit}) {
    if (!limit) continue;
    QCPGraph* line = plot.addGraph();
    line->setPen(QPen{ink::text, 3});
    line->setData({plot.xAxis->range().lower, plot.xAxis->range().upper}, {*limit, *limit});
  }
}

QCPBars* stack_bars(QCustomPlot& plot, QCPBars* below, const QBrush& brush, const QPen& pen) {
  auto* bars = new QCPBars{plot.xAxis, plot.yAxis};  // the plot owns its bars
  bars->setBrush(brush);
  bars->setPen(pen);
  bars->setWidth(0.66);
  if (below) bars->moveAbove(below);
  return bars;
}

// Passed in grey, failed in the colour of what lies outside, void hollow.
void fill_stretches(QCustomPlot& plot, const std::vector<StretchRow>& rows, int most) {
  QCPBars* passed = stack_bars(plot, nullptr, QBrush{ink::bar}, Qt::NoPen);
  QCPBars* failed = stack_bars(plot, passed, QBrush{ink::outside}, Qt::NoPen);
  QCPBars* voided = stack_bars(plot, failed, Qt::NoBrush, QPen{ink::quiet, 2});
  QSharedPointer<QCPAxisTickerText> names{new QCPAxisTickerText};
  for (std::size_t i = 0; i < rows.size(); ++i) {
    const StretchRow& row = rows[i];
    const double place = static_cast<double>(i);
    passed->addData(place, row.passed);
    failed->addData(place, row.failed);
    voided->addData(place, row.voided);
    // An hour shows its hour, and its day where that is new; a day its month and day.
    const bool hour = row.begin.size() > 10;
    const std::string day = row.begin.substr(5, 5);
    const bool new_day = i == 0 || rows[i - 1].begin.substr(0, 10) != row.begin.substr(0, 10);
    names->addTick(place, qt(hour ? row.begin.substr(11, 5) + (new_day ? "\n" + day : "") : day));
    const int judged = row.passed + row.failed;
    if (judged > 0)
      write_at(plot, place, judged + row.voided,
               qt(fixed(100.0 * row.passed / judged, rows.size() > 12 ? 0 : 1) + " %"),
               Qt::AlignHCenter | Qt::AlignBottom);
  }
  plot.xAxis->setTicker(names);
  plot.xAxis->setRange(-0.6, std::max(static_cast<double>(rows.size()), 4.0) - 0.4);
  plot.yAxis->setTicker(whole_numbers(most));
  plot.yAxis->setRange(0, most * 1.22);
}

void stretch_key(const Canvas& canvas, const QRectF& box) {
  double x = box.right() - 66.0;
  const auto item = [&](const char* words, QColor fill, bool hollow) {
    canvas.fill({x, box.y() + 0.8, 3.0, 3.0}, fill);
    if (hollow) canvas.fill({x + 0.25, box.y() + 1.05, 2.5, 2.5}, Qt::white);
    canvas.line({x + 4.2, box.y(), 18.0, 4.6}, words, 2.7, Weight::plain, Align::left, ink::text);
    x += 23.0;
  };
  item("passed", ink::bar, false);
  item("failed", ink::outside, false);
  item("void", ink::quiet, true);
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

Block chart_with_histogram(const RunChart& chart) {
  Block block;
  block.height_mm = 62.0;
  block.draw = [chart](const Canvas& canvas, QRectF box) {
    constexpr double histogram_mm = 38.0;
    QCustomPlot plot;
    dress(plot);
    plot.xAxis->grid()->setVisible(false);
    plot.yAxis->grid()->setVisible(false);  // the limits are the lines to look at
    fill_chart(plot, chart);
    draw(plot, canvas, box.adjusted(0, 0, -histogram_mm, 0));
    QCustomPlot beside;
    dress(beside);
    beside.xAxis->grid()->setVisible(false);
    beside.yAxis->grid()->setVisible(false);
    fill_histogram(beside, chart);
    draw(beside, canvas, {box.right() - histogram_mm, box.y(), histogram_mm, box.height()});
  };
  return block;
}

std::vector<Block> stretch_plots(const std::vector<StretchRow>& stretches) {
  constexpr std::size_t most_in_a_row = 24;
  int most = 1;
  for (const StretchRow& row : stretches) most = std::max(most, row.passed + row.failed + row.voided);
  std::vector<Block> blocks;
  for (std::size_t at = 0; at < stretches.size(); at += most_in_a_row) {
    const auto from = stretches.begin() + static_cast<std::ptrdiff_t>(at);
    const auto to = from + static_cast<std::ptrdiff_t>(std::min(most_in_a_row, stretches.size() - at));
    Block block;
    block.height_mm = 52.0;
    block.draw = [rows = std::vector<StretchRow>{from, to}, most](const Canvas& canvas, QRectF box) {
      QCustomPlot plot;
      dress(plot);
      plot.xAxis->grid()->setVisible(false);
      plot.xAxis->setTickPen(Qt::NoPen);
      plot.yAxis->setLabel("runs");
      fill_stretches(plot, rows, most);
      draw(plot, canvas, box.adjusted(0, 5.0, 0, 0));
      stretch_key(canvas, box);
    };
    blocks.push_back(std::move(block));
  }
  return blocks;
}

}  // namespace probewright::pages
