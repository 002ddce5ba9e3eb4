#pragma once
#include <QScrollArea>
#include <vector>

#include "station/windows/line/berth.h"

namespace probewright::windows {

class LineModel;

/// All berths side by side, in as many columns as shows them best; scrolls only where the text is too large for the
/// window. One of them is chosen: by the keyboard, or by a press.
class BerthGrid : public QScrollArea {
  Q_OBJECT
 public:
  /// Both outlive the grid.
  BerthGrid(LineModel& model, const Look& look, QWidget* parent = nullptr);

  /// Number of the chosen nest; 0: there is none.
  int chosen() const;
  void choose(int nest);
  /// Moves the choice by columns and rows, held inside the grid.
  void move(int columns, int rows);
  const std::vector<Berth*>& berths() const { return berths_; }

 signals:
  void opened(int nest);

 protected:
  void resizeEvent(QResizeEvent* event) override;
  void changeEvent(QEvent* event) override;

 private:
  void show_view();
  void make_berths(std::size_t count);
  void lay_out();

  LineModel& model_;
  const Look& look_;
  QWidget* ground_;  ///< owned by the area
  std::vector<Berth*> berths_;
  std::vector<sequence::BerthView> shown_;
  int columns_ = 1;
  std::size_t chosen_ = 0;
};

}  // namespace probewright::windows
