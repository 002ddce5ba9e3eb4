#include "station/pages/capture_plots.h"

#include <algorithm>
#include <cmath>

#include <qcustomplot.h>

#include "station/base/numbers.h"
#include "station/pages/plot_dress.h"

namespace probewright::pages {
namespace {

// Red in its colour, infrared in ink: told by the words beside the lines as well.
QColor colour_of_band(const std::string& band) { return band == "red" ? ink::outside : ink::text; }

void add_curve(QCustomPlot& plot, const std::vector<double>& x, const std::vector<double>& y, QColor colour,
               double thick = 3.0) {
  QCPGraph* curve = plot.addGraph();
  curve->setPen(QPen{colour, thick});
  curve->setData(QVector<double>(x.begin(), x.end()), QVector<double>(y.begin(), y.end()), true);
}

void add_spectrum(QCustomPlot& plot, const trace::SpectrumPlot& spectrum) {
  const QColor colour = colour_of_band(spectrum.band);
  add_curve(plot, spectrum.wavelength_nm, spectrum.power, colour);
  const bool red = spectrum.band == "red";
  const double at = spectrum.centroid_nm.value_or(red ? 660.0 : 900.0);
  std::string words = spectrum.band;
  if (spectrum.centroid_nm) {
    QCPGraph* line = plot.addGraph();
    line->setPen(QPen{colour, 2.0, Qt::DashLine});
    line->setData({at, at}, {0.0, 1.08});
    words += ", centroid " + fixed(at, 2) + " nm";
  }
  write_at(plot, at, 1.1, qt(words), (at < 800.0 ? Qt::AlignLeft : Qt::AlignRight) | Qt::AlignVCenter, colour);
}

double largest(const std::vector<double>& values) {
  double most = 0.0;
  for (const double value : values)
    if (std::isfinite(value)) most = std::max(most, std::abs(value));
  return most;
}

// One set point. The axes of neighbours are alike, so that depths can be compared.
void draw_pulses(const trace::PulsePlot& pulse, double most_percent, const Canvas& canvas, const QRectF& box) {
  QCustomPlot plot;
  dress(plot);
  plot.xAxis->grid()->setVisible(false);
  add_curve(plot, pulse.infrared_s, pulse.infrared_percent, colour_of_band("infrared"), 6.0);  // seen below the other
  add_curve(plot, pulse.red_s, pulse.red_percent, colour_of_band("red"));
  const double end_s = std::max(pulse.red_s.empty() ? 0.0 : pulse.red_s.back(),
                                pulse.infrared_s.empty() ? 0.0 : pulse.infrared_s.back());
  plot.xAxis->setRange(0.0, end_s);
  plot.xAxis->ticker()->setTickCount(3);
  plot.yAxis->setRange(-1.15 * most_percent, 1.15 * most_percent);
  plot.yAxis->ticker()->setTickCount(5);
  plot.xAxis->setLabel("s");
  plot.yAxis->setLabel("% of the mean");
  draw(plot, canvas, box.adjusted(0, 5.0, 0, 0));
  canvas.line({box.x(), box.y(), box.width(), 4.5}, qt("set point R = " + fixed(pulse.set_point_ratio, 1)), 2.8,
              Weight::plain, Align::centre, ink::text);
}

constexpr std::size_t side_by_side = 3;

Block pulse_row(const std::vector<trace::PulsePlot>& pulses, double most_percent) {
  Block block;
  block.height_mm = 50.0;
  block.draw = [pulses, most_percent](const Canvas& canvas, QRectF box) {
    const double width = box.width() / static_cast<double>(side_by_side);
    for (std::size_t i = 0; i < pulses.size(); ++i)
      draw_pulses(pulses[i], most_percent, canvas,
                  {box.x() + width * static_cast<double>(i), box.y(), width - 2.0, box.height() - 2.0});
  };
  return block;
}

// What the two lines are, once for all set points.
Block pulse_key() {
  Block block;
  block.height_mm = 5.5;
  block.with_next = true;
  block.draw = [](const Canvas& canvas, QRectF box) {
    double x = box.x();
    for (const char* band : {"red", "infrared"}) {
      canvas.rule(x, box.y() + 2.2, 7.0, colour_of_band(band), 0.5);
      canvas.line({x + 9.0, box.y(), 30.0, 4.4}, band, 2.8, Weight::plain, Align::left, colour_of_band(band));
      x += 28.0;
    }
  };
  return block;
}

}  // namespace

Block spectra_plot(const std::vector<trace::SpectrumPlot>& spectra) {
  Block block;
  block.height_mm = 64.0;
  block.draw = [spectra](const Canvas& canvas, QRectF box) {
    QCustomPlot plot;
    dress(plot);
    plot.xAxis->grid()->setVisible(false);
    plot.xAxis->setLabel("wavelength, nm");
    plot.yAxis->setLabel("power over the peak");
    plot.xAxis->setRange(600.0, 1050.0);
    plot.yAxis->setRange(-0.04, 1.18);
    for (const trace::SpectrumPlot& spectrum : spectra) add_spectrum(plot, spectrum);
    draw(plot, canvas, box);
  };
  return block;
}

std::vector<Block> pulse_plots(const std::vector<trace::PulsePlot>& pulses) {
  double most_percent = 0.0;
  for (const trace::PulsePlot& pulse : pulses)
    most_percent = std::max({most_percent, largest(pulse.red_percent), largest(pulse.infrared_percent)});
  if (!(most_percent > 0.0)) most_percent = 1.0;
  std::vector<Block> blocks{pulse_key()};
  for (std::size_t at = 0; at < pulses.size(); at += side_by_side) {
    const auto from = pulses.begin() + static_cast<std::ptrdiff_t>(at);
    const auto count = std::min(side_by_side, pulses.size() - at);
    blocks.push_back(pulse_row({from, from + static_cast<std::ptrdiff_t>(count)}, most_percent));
  }
  return blocks;
}

}  // namespace probewright::pages
