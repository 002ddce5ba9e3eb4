#pragma once
#include <QWidget>
#include <vector>

#include "station/sequence/line_types.h"

namespace probewright::windows {

class Look;

/// A reading on the scale of its own acceptance limits.
struct ReadingRail {
  QString name, value, lower, upper, words;  ///< words: why it is not ok; else empty
  bool judged = false, ok = true, placed = false;
  double position = 0.0, whisker = 0.0, guard = 0.0;  ///< as a RailMark has them
  bool one_sided = false;
  double margin = 0.0;
};

/// Readings of a run in the order in which a person wants them: what is not ok, then by rising margin, then what was
/// only recorded. Pure.
std::vector<ReadingRail> reading_rails(const sequence::RunOutcome& outcome);

/// All readings of a run, each with a small rail of its own, in as many columns as there is room for.
class ReadingRails : public QWidget {
  Q_OBJECT
 public:
  ReadingRails(const sequence::RunOutcome& outcome, const Look& look, QWidget* parent = nullptr);
  bool hasHeightForWidth() const override { return true; }
  int heightForWidth(int width) const override;
  QSize sizeHint() const override;

 protected:
  void paintEvent(QPaintEvent* event) override;

 private:
  int columns(double width) const;
  double cell_height() const;
  void draw_cell(QPainter& painter, const QRectF& cell, const ReadingRail& rail) const;
  void draw_rail(QPainter& painter, const QRectF& row, const ReadingRail& rail) const;

  const Look& look_;
  std::vector<ReadingRail> rails_;
};

}  // namespace probewright::windows
