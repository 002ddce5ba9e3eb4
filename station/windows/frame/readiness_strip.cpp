#include "station/windows/frame/readiness_strip.h"

#include <QEvent>
#include <QHBoxLayout>
#include <QVBoxLayout>

#include "station/windows/line/line_model.h"
#include "station/windows/look/label.h"
#include "station/windows/look/look.h"
#include "station/windows/look/mark.h"
#include "station/windows/words/problem_words.h"
#include "station/windows/words/said_words.h"

namespace probewright::windows {
namespace {

QVBoxLayout* column_of(Label* above, Label* below) {
  auto* column = new QVBoxLayout;
  column->setSpacing(0);
  column->addStretch(1);
  column->addWidget(above);
  column->addWidget(below);
  column->addStretch(1);
  return column;
}

}  // namespace

ReadinessStrip::ReadinessStrip(LineModel& model, const Look& look, QWidget* parent)
    : QWidget(parent),
      model_(model),
      mark_(new Mark(look, 24)),
      state_(new Label(look, Text::strong, Tone::plain)),
      reason_(new Label(look, Text::body, Tone::quiet)),
      person_(new Label(look, Text::strong, Tone::plain)),
      lot_(new Label(look, Text::body, Tone::quiet)) {
  auto* row = new QHBoxLayout(this);
  row->setContentsMargins(0, 0, 0, 0);
  row->addWidget(mark_, 0, Qt::AlignVCenter);
  row->addSpacing(6);
  row->addLayout(column_of(state_, reason_), 3);
  row->addLayout(column_of(person_, lot_), 2);
  state_->setObjectName(QStringLiteral("readiness"));
  reason_->setObjectName(QStringLiteral("reason"));
  person_->setObjectName(QStringLiteral("person"));
  lot_->setObjectName(QStringLiteral("lot"));
  for (Label* label : {state_, reason_, person_, lot_}) label->setWordWrap(true);
  for (Label* label : {person_, lot_}) label->setAlignment(Qt::AlignRight | Qt::AlignVCenter);
  connect(&model, &LineModel::view_changed, this, &ReadinessStrip::show_view);
  connect(&model, &LineModel::broke, this, &ReadinessStrip::show_view);
  show_view();
}

void ReadinessStrip::show_view() {
  show_readiness();
  show_person_and_lot();
}

void ReadinessStrip::show_readiness() {
  const auto& view = model_.view();
  const bool ready = !view.trouble && model_.broken().isEmpty();
  mark_->show_shape(ready ? Shape::tick : Shape::gap, ready ? Tone::pass : Tone::fail);
  state_->set_tone(ready ? Tone::pass : Tone::fail);
  if (!model_.broken().isEmpty()) {
    state_->say(tr("Stopped"));
    reason_->say(tr("The line ended by a mistake of the program. Close the window and start it again."));
  } else if (view.trouble) {
    state_->say(tr("Not ready"));
    reason_->say(problem_words(*view.trouble));
  } else {
    state_->say(tr("Ready"));
    reason_->say(view.next_due.empty() ? QString{} : tr("Next due: %1").arg(said(view.next_due)));
  }
  state_->setAccessibleName(state_->text() + QStringLiteral(". ") + reason_->text());
}

void ReadinessStrip::show_person_and_lot() {
  const auto& view = model_.view();
  person_->say(view.person
                   ? QStringLiteral("%1, %2").arg(QString::fromStdString(view.person->name), said(view.person->role))
                   : tr("Nobody is signed in"));
  lot_->say(view.lot ? tr("Lot %1, %2, sheet revision %3")
                           .arg(QString::fromStdString(view.lot->lot), QString::fromStdString(view.lot->model))
                           .arg(view.lot->sheet_revision)
                     : tr("No lot is open"));
}

void ReadinessStrip::changeEvent(QEvent* event) {
  QWidget::changeEvent(event);
  if (event->type() == QEvent::LanguageChange) show_view();
}

}  // namespace probewright::windows
