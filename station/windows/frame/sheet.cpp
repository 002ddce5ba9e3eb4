#include "station/windows/frame/sheet.h"

#include <QEvent>
#include <QHBoxLayout>
#include <QPainter>
#include <QScrollArea>
#include <QScrollBar>
#include <QVBoxLayout>

#include "station/windows/look/label.h"
#include "station/windows/look/look.h"
#include "station/windows/look/word_button.h"

namespace probewright::windows {

Sheet::Sheet(const Look& look, QWidget* parent)
    : QWidget(parent),
      look_(look),
      title_(new Label(look, Text::headline, Tone::plain)),
      close_(new WordButton(look, Text::body)),
      area_(new QScrollArea) {
  setObjectName(QStringLiteral("sheet"));
  auto* column = new QVBoxLayout(this);
  auto* row = new QHBoxLayout;
  title_->setWordWrap(true);
  row->addWidget(title_, 1);
  row->addWidget(close_, 0, Qt::AlignTop);
  column->addLayout(row);
  column->addWidget(area_, 1);
  area_->setFrameShape(QFrame::NoFrame);
  area_->setFocusPolicy(Qt::NoFocus);
  area_->setWidgetResizable(true);
  area_->setHorizontalScrollBarPolicy(Qt::ScrollBarAlwaysOff);
  close_->setObjectName(QStringLiteral("close"));
  connect(close_, &WordButton::clicked, this, &Sheet::shut);
  connect(&look, &Look::changed, this, &Sheet::dress);
  dress();
  say();
  hide();
}

void Sheet::open(const QString& kind, const QString& title, QWidget* page) {
  kind_ = kind;
  title_->say(title);
  setAccessibleName(title);
  area_->setWidget(page);
  show();
  raise();
}

void Sheet::shut() {
  if (!is_open()) return;
  hide();
  kind_.clear();
  emit closed();
}

void Sheet::scroll(int steps) {
  QScrollBar* bar = area_->verticalScrollBar();
  bar->setValue(bar->value() + static_cast<int>(steps * look_.type().line(Text::body) * 2));
}

void Sheet::set_room(const QRect& room) { setGeometry(room); }

void Sheet::dress() {
  const int pad = static_cast<int>(look_.type().length(18));
  layout()->setContentsMargins(pad, pad * 2 / 3, pad, pad / 2);
  QPalette colours = area_->palette();
  colours.setColor(QPalette::Window, look_.colours().card);
  area_->setPalette(colours);
  update();
}

void Sheet::say() { close_->setText(tr("Close (Esc)")); }

void Sheet::changeEvent(QEvent* event) {
  QWidget::changeEvent(event);
  if (event->type() == QEvent::LanguageChange) say();
}

void Sheet::paintEvent(QPaintEvent*) {
  QPainter painter{this};
  painter.fillRect(rect(), look_.colours().paper);
  painter.setRenderHint(QPainter::Antialiasing);
  painter.setPen(QPen{look_.colours().edge, 1.0});
  painter.setBrush(look_.colours().card);
  painter.drawRoundedRect(QRectF{rect()}.adjusted(0.5, 0.5, -0.5, -0.5), 6, 6);
}

}  // namespace probewright::windows
