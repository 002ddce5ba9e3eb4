#include "station/windows/line/passage_bar.h"

#include <QPainter>
#include <algorithm>

#include "station/windows/look/colours.h"

namespace probewright::windows {

using sequence::PassageStep;

std::vector<Segment> segments_of(const std::vector<PassageStep>& passage, double progress,
                                 const std::vector<std::string>& failed) {
  double whole = 0.0;
  for (const PassageStep& step : passage) whole += std::max(step.expected_s, 0.0);
  std::vector<Segment> segments;
  double from = 0.0;
  for (const PassageStep& step : passage) {
    const double share =
        whole > 0.0 ? std::max(step.expected_s, 0.0) / whole : 1.0 / static_cast<double>(passage.size());
    Segment segment{from, from + share, 0.0, step.state == PassageStep::State::left_out};
    if (step.state == PassageStep::State::done) segment.filled = 1.0;
    if (step.state == PassageStep::State::doing && share > 0.0)
      segment.filled = std::clamp((progress - from) / share, 0.0, 1.0);
    segment.failed = std::find(failed.begin(), failed.end(), step.check) != failed.end();
    segments.push_back(segment);
    from += share;
  }
  return segments;
}

namespace {

void draw_left_out(QPainter& painter, const QRectF& box, const Colours& colours) {
  painter.setPen(QPen{colours.edge, 1.0});
  painter.drawLine(box.bottomLeft(), box.topRight());
}

}  // namespace

void draw_passage_bar(QPainter& painter, const QRectF& place, const std::vector<Segment>& segments,
                      const Colours& colours) {
  painter.save();
  painter.setRenderHint(QPainter::Antialiasing, false);
  painter.fillRect(place, colours.well);
  for (const Segment& segment : segments) {
    QRectF box{place.left() + segment.from * place.width(), place.top(), (segment.to - segment.from) * place.width(),
               place.height()};
    if (box.width() <= 0.0) continue;
    const double gap = std::min(1.0, box.width() * 0.3);
    box.setWidth(box.width() - gap);
    if (segment.left_out) draw_left_out(painter, box, colours);
    QRectF full{box.left(), box.top(), box.width() * segment.filled, box.height()};
    // One that failed stands out of the bar as well as in its colour.
    if (segment.failed) full = full.adjusted(-0.5, -place.height() * 0.3, 0.5, place.height() * 0.3);
    painter.fillRect(full, segment.failed ? colours.fail : colours.ink);
    painter.fillRect(QRectF{box.right(), box.top(), gap, box.height()}, colours.card);
  }
  painter.setPen(QPen{colours.edge, 1.0});
  painter.drawLine(place.bottomLeft(), place.bottomRight());
  painter.restore();
}

}  // namespace probewright::windows
