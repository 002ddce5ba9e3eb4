#pragma once
#include <QWidget>

#include "station/windows/look/colours.h"
#include "station/windows/look/shapes.h"

namespace probewright::windows {

class Look;

/// A shape as a widget of its own, beside words that say the same.
class Mark : public QWidget {
  Q_OBJECT
 public:
  /// `size_px` at a text size of 100 %.
  Mark(const Look& look, double size_px, QWidget* parent = nullptr);
  void show_shape(Shape shape, Tone tone);
  Shape shape() const { return shape_; }

 protected:
  void paintEvent(QPaintEvent* event) override;

 private:
  void dress();
  const Look& look_;
  double size_px_;
  Shape shape_ = Shape::none;
  Tone tone_ = Tone::plain;
};

}  // namespace probewright::windows
