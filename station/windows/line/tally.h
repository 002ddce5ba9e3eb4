#pragma once
#include <QWidget>
#include <optional>
#include <vector>

#include "station/sequence/line_view.h"

namespace probewright::windows {

class LineModel;
class Look;

/// What has been done since the line began: numbers with their words, and the checks that fail most. One row where the
/// window is low.
class Tally : public QWidget {
  Q_OBJECT
 public:
  Tally(LineModel& model, const Look& look, QWidget* parent = nullptr);
  /// `low`: one row, without the failing checks.
  void set_low(bool low);

 protected:
  void paintEvent(QPaintEvent* event) override;
  void changeEvent(QEvent* event) override;

 private:
  struct Figure {
    QString number, words, more;
  };
  std::vector<Figure> figures() const;
  void show_view();
  void dress();
  double draw_figures(QPainter& painter);
  void draw_row(QPainter& painter);
  void draw_failing(QPainter& painter, double from);

  LineModel& model_;
  const Look& look_;
  sequence::TallyView shown_;
  std::optional<sequence::OpenLotView> lot_;
  bool low_ = false;
};

}  // namespace probewright::windows
