#include "station/windows/line/run_details.h"

#include <QCoreApplication>
#include <QVBoxLayout>

#include "station/base/numbers.h"
#include "station/windows/line/berth_content.h"
#include "station/windows/line/reading_rails.h"
#include "station/windows/look/label.h"
#include "station/windows/look/look.h"
#include "station/windows/words/filled.h"
#include "station/windows/words/said_words.h"

namespace probewright::windows {
namespace {

struct Say {
  Q_DECLARE_TR_FUNCTIONS(Details)
};

QString facts_of(const sequence::RunOutcome& outcome) {
  QString facts = Say::tr("Run %1, purpose %2, took %3 s")
                      .arg(outcome.run)
                      .arg(purpose_words(outcome.purpose), QString::fromStdString(fixed(seconds(outcome.cycle), 1)));
  if (outcome.asked_again > 0)
    facts += QStringLiteral(", ") + Say::tr("%1 repeated exchanges").arg(outcome.asked_again);
  facts += QLatin1Char('.');
  if (outcome.emulated) facts += QLatin1Char(' ') + Say::tr("Demonstration: made on an emulated bench.");
  return facts;
}

}  // namespace

QString run_title(const sequence::RunOutcome& outcome) {
  return Say::tr("%1 in nest %2: %3")
      .arg(QString::fromStdString(outcome.serial))
      .arg(outcome.nest)
      .arg(verdict_words(outcome.verdict));
}

QWidget* make_run_page(const sequence::RunOutcome& outcome, const Look& look) {
  auto* page = new QWidget;
  auto* column = new QVBoxLayout(page);
  column->setContentsMargins(0, 0, 12, 12);
  const auto add = [&](Tone tone, const QString& words) {
    if (words.isEmpty()) return;
    auto* label = new Label(look, Text::body, tone);
    label->setWordWrap(true);
    label->say(words);
    column->addWidget(label);
  };
  add(Tone::quiet, facts_of(outcome));
  if (outcome.verdict != sequence::RunVerdict::pass) add(Tone::plain, as_sentence(said(outcome.cause_words)));
  add(Tone::plain, QString::fromStdString(outcome.likely.sentences));
  column->addSpacing(8);
  if (outcome.readings.empty())
    add(Tone::quiet, Say::tr("The run ended before its first reading."));
  else
    column->addWidget(new ReadingRails(outcome, look));
  column->addStretch(1);
  return page;
}

}  // namespace probewright::windows
