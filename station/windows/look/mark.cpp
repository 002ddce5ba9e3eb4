#include "station/windows/look/mark.h"

#include <QPainter>

#include "station/windows/look/look.h"

namespace probewright::windows {

Mark::Mark(const Look& look, double size_px, QWidget* parent) : QWidget(parent), look_(look), size_px_(size_px) {
  connect(&look, &Look::changed, this, &Mark::dress);
  dress();
}

void Mark::dress() {
  const int side = static_cast<int>(look_.type().length(size_px_) + 0.5);
  setFixedSize(side, side);
  update();
}

void Mark::show_shape(Shape shape, Tone tone) {
  if (shape == shape_ && tone == tone_) return;
  shape_ = shape, tone_ = tone;
  update();
}

void Mark::paintEvent(QPaintEvent*) {
  QPainter painter{this};
  draw_shape(painter, shape_, QRectF{rect()}.adjusted(1, 1, -1, -1), look_.colours().of(tone_));
}

}  // namespace probewright::windows
