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

void WordButton::set_outlined(bool outlined) {
  outlined_ = outlined;
  updateGeometry();
}

QSize WordButton::sizeHint() const {
  QFont bold = look_.type().font(text_);
  bold.setBold(true);
  const QFontMetricsF metrics{bold};
  return QSizeF{metrics.horizontalAdvance(text()) + look_.type().length(outlined_ ? 24 : 8),
                metrics.height() + look_.type().length(8)}
      .toSize();
}

void WordButton::paintEvent(QPaintEvent*) {
  QPainter painter{this};
  QFont font = look_.type().font(text_);
  font.setBold(isChecked() || isDown());
  painter.setFont(font);
  painter.setPen(isChecked() || underMouse() || !isCheckable() ? look_.colours().ink : look_.colours().quiet);
  painter.drawText(QRectF{rect()}.adjusted(0, 0, 0, outlined_ ? 0 : -look_.type().length(4)), Qt::AlignCenter, text());
  if (outlined_) return draw_outline(painter);
  if (!isChecked() && !underMouse()) return;
  const double bar = look_.type().length(isChecked() ? 3 : 1), inset = look_.type().length(4);
  painter.fillRect(QRectF{inset, height() - bar, width() - 2 * inset, bar}, look_.colours().ink);
}

void WordButton::draw_outline(QPainter& painter) {
  painter.setRenderHint(QPainter::Antialiasing);
  painter.setPen(QPen{look_.colours().accent, underMouse() || isDown() ? 2.0 : 1.0});
  painter.drawRoundedRect(QRectF{rect()}.adjusted(1, 1, -1, -1), height() / 2.0 - 1, height() / 2.0 - 1);
}

void WordButton::enterEvent(QEnterEvent*) { update(); }
void WordButton::leaveEvent(QEvent*) { update(); }

}  // namespace probewright::windows
