#pragma once
#include <QRectF>
#include <vector>

#include "station/sequence/line_view.h"

class QPainter;

namespace probewright::windows {

struct Colours;

/// One segment of the bar, as shares of its length.
struct Segment {
  double from = 0.0, to = 0.0;
  double filled = 0.0;  ///< share of the segment that is done, 0 to 1
  bool left_out = false;
  bool failed = false;  ///< its reading lies outside
  bool operator==(const Segment&) const = default;
};

/// Segments of a passage, as wide as their expected device time. What is done is full, what is ahead empty, and of what
/// goes on as much as `progress` (0 to 1 of the whole) reaches into it.
/// `failed` are the checks whose reading lies outside.
std::vector<Segment> segments_of(const std::vector<sequence::PassageStep>& passage, double progress,
                                 const std::vector<std::string>& failed);

void draw_passage_bar(QPainter& painter, const QRectF& place, const std::vector<Segment>& segments,
                      const Colours& colours);

}  // namespace probewright::windows
