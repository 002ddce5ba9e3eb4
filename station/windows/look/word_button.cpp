#include "station/windows/look/word_button.h"

#include <QPainter>

#include "station/windows/look/look.h"

namespace probewright::windows {

WordButton::WordButton(const Look& look, Text text, QWidget* parent)
    : QAbstractButton(parent), look_(look), text_(text) {
  setFocusPolicy(Qt::NoFocus);
  setSizePolicy(QSizePolicy::Fixed, QSizePolicy::Fixed);
  connect(&look, &Look::changed, this, [this] {
    updateGeometry();
    update();
  });
}

QSize WordButton::sizeHint() const {
  QFont bold = look_.type().font(text_);
  bold.setBold(true);
  const QFontMetricsF metrics{bold};
  return QSizeF{metrics.horizontalAdvance(text()) + look_.type().length(8), metrics.height() + look_.type().length(8)}
      .toSize();
}

void WordButton::paintEvent(QPaintEvent*) {
  QPainter painter{this};
  QFont font = look_.type().font(text_);
  font.setBold(isChecked() || isDown());
  painter.setFont(font);
  painter.setPen(isChecked() || underMouse() || !isCheckable() ? look_.colours().ink : look_.colours().quiet);
  painter.drawText(QRectF{rect()}.adjusted(0, 0, 0, -look_.type().length(4)), Qt::AlignCenter, text());
  if (!isChecked() && !underMouse()) return;
  const double bar = look_.type().length(isChecked() ? 3 : 1), inset = look_.type().length(4);
  painter.fillRect(QRectF{inset, height() - bar, width() - 2 * inset, bar}, look_.colours().ink);
}

void WordButton::enterEvent(QEnterEvent*) { update(); }
void WordButton::leaveEvent(QEvent*) { update(); }

}  // namespace probewright::windows
