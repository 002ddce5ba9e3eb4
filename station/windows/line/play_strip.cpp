#include "station/windows/line/play_strip.h"

#include <QEvent>
#include <QHBoxLayout>
#include <QPainter>
#include <QShortcut>
#include <algorithm>

#include "station/windows/line/line_model.h"
#include "station/windows/look/label.h"
#include "station/windows/look/look.h"
#include "station/windows/look/word_button.h"
#include "station/windows/words/problem_words.h"

namespace probewright::windows {

using sequence::BerthView;
using sequence::NestState;

PlayStrip::PlayStrip(BenchPlay& play, LineModel& model, const Look& look, QWidget* parent)
    : QWidget(parent),
      play_(play),
      model_(model),
      look_(look),
      title_(new Label(look, Text::body, Tone::quiet)),
      said_(new Label(look, Text::body, Tone::plain)),
      next_(new WordButton(look, Text::strong)) {
  setObjectName(QStringLiteral("play"));
  auto* row = new QHBoxLayout(this);
  row->setContentsMargins(16, 4, 16, 4);
  row->setSpacing(14);
  row->addWidget(title_);
  row->addWidget(next_);
  row->addWidget(said_, 1);
  next_->set_outlined(true);
  next_->setObjectName(QStringLiteral("play_next"));
  connect(next_, &WordButton::clicked, this, &PlayStrip::do_next);
  connect(new QShortcut(Qt::Key_F5, this), &QShortcut::activated, this, &PlayStrip::do_next);
  connect(&model, &LineModel::view_changed, this, &PlayStrip::say);
  say();
}

int PlayStrip::nest_in(NestState state) const {
  const auto& berths = model_.view().berths;
  const auto found =
      std::find_if(berths.begin(), berths.end(), [&](const BerthView& berth) { return berth.nest.state == state; });
  return found == berths.end() ? 0 : found->nest.nest;
}

PlayStrip::Next PlayStrip::next() const {
  if (!model_.view().person) return Next::sign_in;
  if (!model_.view().lot) return Next::open_lot;
  if (nest_in(NestState::armed)) return Next::put_in;
  if (nest_in(NestState::empty)) return Next::scan;
  return nest_in(NestState::occupied) ? Next::take_out : Next::wait;
}

void PlayStrip::say() {
  title_->say(tr("Emulated bench, next (F5):"));
  QString words;
  switch (next()) {
    case Next::sign_in:
      words = tr("scan a badge");
      break;
    case Next::open_lot:
      words = tr("scan the lot card");
      break;
    case Next::scan:
      words = tr("scan the next probe");
      break;
    case Next::put_in:
      words = tr("put the probe into nest %1").arg(nest_in(NestState::armed));
      break;
    case Next::take_out:
      words = tr("take the probe out of nest %1").arg(nest_in(NestState::occupied));
      break;
    case Next::wait:
      words = tr("wait for a verdict");
      break;
  }
  if (words == next_->text()) return;
  next_->setText(words);
  next_->updateGeometry();
}

void PlayStrip::do_next() {
  switch (next()) {
    case Next::sign_in:
      return model_.scan(QString::fromStdString(play_.badge()));
    case Next::open_lot:
      return model_.scan(QString::fromStdString(play_.lot_card()));
    case Next::scan:
      return model_.scan(QString::fromStdString(play_.next_serial()));
    case Next::put_in: {
      const int nest = nest_in(NestState::armed);
      const auto& berths = model_.view().berths;
      const auto armed =
          std::find_if(berths.begin(), berths.end(), [&](const BerthView& one) { return one.nest.nest == nest; });
      return tell(play_.seat(nest, armed->nest.serial));
    }
    case Next::take_out:
      return tell(play_.take_out(nest_in(NestState::occupied)));
    case Next::wait:
      return;
  }
}

void PlayStrip::tell(const Result<void>& done) { said_->say(done ? QString{} : problem_words(done.error())); }

void PlayStrip::changeEvent(QEvent* event) {
  QWidget::changeEvent(event);
  if (event->type() == QEvent::LanguageChange) say();
}

void PlayStrip::paintEvent(QPaintEvent*) {
  QPainter painter{this};
  painter.fillRect(rect(), look_.colours().wait_wash);
}

}  // namespace probewright::windows
