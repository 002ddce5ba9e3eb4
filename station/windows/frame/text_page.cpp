#include "station/windows/frame/text_page.h"

#include <QGridLayout>
#include <QVBoxLayout>

#include "station/windows/look/label.h"
#include "station/windows/look/look.h"

namespace probewright::windows {
namespace {

Label* words(const Look& look, Text text, Tone tone, const QString& said) {
  auto* label = new Label(look, text, tone);
  label->setWordWrap(true);
  label->say(said);
  label->setAlignment(Qt::AlignLeft | Qt::AlignTop);
  return label;
}

QLayout* pairs_of(const Look& look, const Passage& passage) {
  auto* grid = new QGridLayout;
  grid->setHorizontalSpacing(static_cast<int>(look.type().length(18)));
  grid->setColumnMinimumWidth(0, static_cast<int>(look.type().length(150)));
  grid->setColumnStretch(1, 1);
  int row = 0;
  for (const auto& [left, right] : passage.pairs) {
    grid->addWidget(words(look, Text::strong, Tone::plain, left), row, 0);
    grid->addWidget(words(look, Text::body, Tone::plain, right), row++, 1);
  }
  return grid;
}

}  // namespace

QWidget* make_text_page(const Look& look, const std::vector<Passage>& passages) {
  auto* page = new QWidget;
  page->setMaximumWidth(static_cast<int>(look.type().length(820)));
  auto* column = new QVBoxLayout(page);
  column->setContentsMargins(0, 0, 12, 12);
  column->setSpacing(static_cast<int>(look.type().length(5)));
  for (const Passage& passage : passages) {
    if (!passage.heading.isEmpty()) column->addWidget(words(look, Text::strong, Tone::plain, passage.heading));
    if (!passage.paragraph.isEmpty()) column->addWidget(words(look, Text::body, Tone::plain, passage.paragraph));
    if (!passage.pairs.empty()) column->addLayout(pairs_of(look, passage));
    column->addSpacing(static_cast<int>(look.type().length(8)));
  }
  column->addStretch(1);
  return page;
}

}  // namespace probewright::windows
