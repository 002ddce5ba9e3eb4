#include "station/windows/line/answer_line.h"

#include <QEvent>
#include <QHBoxLayout>

#include "station/windows/line/line_model.h"
#include "station/windows/look/label.h"
#include "station/windows/look/look.h"
#include "station/windows/look/mark.h"
#include "station/windows/words/filled.h"
#include "station/windows/words/problem_words.h"
#include "station/windows/words/said_words.h"

namespace probewright::windows {

AnswerLine::AnswerLine(LineModel& model, const Look& look, QWidget* parent)
    : QWidget(parent), model_(model), mark_(new Mark(look, 17)), label_(new Label(look, Text::strong, Tone::plain)) {
  auto* row = new QHBoxLayout(this);
  row->setContentsMargins(16, 0, 16, 0);
  row->addWidget(mark_, 0, Qt::AlignVCenter);
  row->addSpacing(4);
  row->addWidget(label_, 1);
  label_->setObjectName(QStringLiteral("answer"));
  label_->setWordWrap(true);
  connect(&model, &LineModel::answered, this, [this] {
    answered_ = true;
    show_answer();
  });
  connect(&model, &LineModel::run_ended, this, [this](int nest) {
    // What was asked for is done: an answer that tells to put the probe in would send hands the wrong way.
    if (!model_.answer() || model_.answer()->nest != nest) return;
    answered_ = false;
    show_beginning();
  });
  connect(&model, &LineModel::view_changed, this, [this] {
    if (!answered_) show_beginning();
  });
  show_beginning();
}

QString AnswerLine::words() const { return label_->text(); }

void AnswerLine::say_ourselves(const QString& words) {
  mark_->show_shape(Shape::gap, Tone::wait);
  label_->say(words);
  label_->setAccessibleName(words);
}

/// What a newcomer needs first: somebody signed in, then a lot, then a probe.
void AnswerLine::show_beginning() {
  mark_->show_shape(Shape::inward, Tone::wait);
  const auto& view = model_.view();
  label_->say(!view.person ? tr("Nobody is signed in. Scan your badge.")
              : !view.lot  ? tr("No lot is open. Scan the lot card.")
                           : tr("Scan a probe."));
}

void AnswerLine::show_answer() {
  if (!model_.answer()) return show_beginning();
  const auto& answer = *model_.answer();
  mark_->show_shape(answer.taken ? Shape::tick : Shape::cross, answer.taken ? Tone::pass : Tone::fail);
  label_->say(answer.problem ? problem_words(*answer.problem) : as_sentence(said(answer.words)));
  label_->setAccessibleName(label_->text());
}

void AnswerLine::changeEvent(QEvent* event) {
  QWidget::changeEvent(event);
  if (event->type() == QEvent::LanguageChange) answered_ ? show_answer() : show_beginning();
}

}  // namespace probewright::windows
