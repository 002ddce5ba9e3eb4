#include "station/windows/line/scan_field.h"

#include <QEvent>
#include <QKeyEvent>
#include <QPainter>
#include <QTimer>
#include <QVBoxLayout>
#include <algorithm>

#include "station/windows/look/label.h"
#include "station/windows/look/look.h"

namespace probewright::windows {

void ScanEdit::keyPressEvent(QKeyEvent* event) {
  if (!text().isEmpty()) return QLineEdit::keyPressEvent(event);
  switch (event->key()) {
    case Qt::Key_Left:
      emit moved(-1, 0);
      return;
    case Qt::Key_Right:
      emit moved(1, 0);
      return;
    case Qt::Key_Up:
      emit moved(0, -1);
      return;
    case Qt::Key_Down:
      emit moved(0, 1);
      return;
    default:
      QLineEdit::keyPressEvent(event);
  }
}

/// A scanner types wherever the focus is, so it comes back from everything but another window or an open menu.
void ScanEdit::focusOutEvent(QFocusEvent* event) {
  QLineEdit::focusOutEvent(event);
  if (event->reason() == Qt::PopupFocusReason || event->reason() == Qt::ActiveWindowFocusReason) return;
  QTimer::singleShot(0, this, [this] {
    if (isVisible()) setFocus(Qt::OtherFocusReason);
  });
}

bool ScanEdit::focusNextPrevChild(bool) { return false; }

ScanField::ScanField(const Look& look, QWidget* parent)
    : QWidget(parent), look_(look), caption_(new Label(look, Text::small, Tone::quiet)), edit_(new ScanEdit) {
  auto* column = new QVBoxLayout(this);
  column->setSpacing(0);
  column->addWidget(caption_);
  column->addWidget(edit_);
  edit_->setObjectName(QStringLiteral("scan"));
  edit_->setFrame(false);
  edit_->setMaxLength(64);
  caption_->setBuddy(edit_);
  setFocusProxy(edit_);
  set_shown_forms({});
  connect(edit_, &QLineEdit::returnPressed, this, &ScanField::take);
  connect(edit_, &QLineEdit::textEdited, this, &ScanField::hide_or_show);
  connect(edit_, &ScanEdit::moved, this, &ScanField::moved);
  connect(&look, &Look::changed, this, &ScanField::dress);
  dress();
  say();
}

void ScanField::set_shown_forms(const QStringList& patterns) {
  forms_.clear();
  for (const QString& pattern :
       QStringList{QStringLiteral("LOT/.*"), QStringLiteral("[Nn][Ee][Ss][Tt] *[0-9]*")} + patterns)
    forms_.emplace_back(pattern);
}

void ScanField::hide_or_show(const QString& text) {
  const bool shown = std::any_of(forms_.begin(), forms_.end(), [&](const QRegularExpression& form) {
    const auto match = form.match(text, 0, QRegularExpression::PartialPreferCompleteMatch,
                                  QRegularExpression::AnchorAtOffsetMatchOption);
    return match.hasPartialMatch() || (match.hasMatch() && match.capturedLength() == text.size());
  });
  edit_->setEchoMode(shown || text.isEmpty() ? QLineEdit::Normal : QLineEdit::Password);
}

void ScanField::take() {
  const QString text = edit_->text().trimmed();
  edit_->clear();
  edit_->setEchoMode(QLineEdit::Normal);
  if (text.isEmpty())
    emit entered();
  else
    emit scanned(text);
}

void ScanField::dress() {
  edit_->setFont(look_.type().font(Text::scan));
  QPalette colours = edit_->palette();
  colours.setColor(QPalette::Base, look_.colours().card);
  colours.setColor(QPalette::Text, look_.colours().ink);
  edit_->setPalette(colours);
  const int side = static_cast<int>(look_.type().length(14)), above = static_cast<int>(look_.type().length(6));
  layout()->setContentsMargins(side, above, side, above);
  update();
}

void ScanField::say() {
  caption_->say(tr("Scan a probe, a badge or a lot card"));
  edit_->setAccessibleName(tr("Scan field"));
  edit_->setAccessibleDescription(caption_->text());
}

void ScanField::changeEvent(QEvent* event) {
  QWidget::changeEvent(event);
  if (event->type() == QEvent::LanguageChange) say();
}

void ScanField::paintEvent(QPaintEvent*) {
  QPainter painter{this};
  painter.setRenderHint(QPainter::Antialiasing);
  painter.setPen(QPen{look_.colours().accent, 2.0});
  painter.setBrush(look_.colours().card);
  painter.drawRoundedRect(QRectF{rect()}.adjusted(1, 1, -1, -1), 6, 6);
}

}  // namespace probewright::windows
