#include "station/windows/setup/setup_page.h"

#include <QGridLayout>
#include <QHBoxLayout>
#include <QPushButton>
#include <QScrollArea>
#include <QSpinBox>
#include <QVBoxLayout>
#include <algorithm>

#include "station/windows/look/label.h"
#include "station/windows/look/look.h"
#include "station/windows/words/problem_words.h"

namespace probewright::windows {
namespace {

constexpr int look_again_ms = 1500;

Label* words(const Look& look, Text text, Tone tone, const QString& said) {
  auto* label = new Label(look, text, tone);
  label->setWordWrap(true);
  label->say(said);
  return label;
}

}  // namespace

SetupPage::SetupPage(SetupDoor& door, const Look& look, QWidget* parent)
    : QWidget(parent),
      door_(door),
      look_(look),
      search_(door),
      list_(new QWidget),
      rows_(new QGridLayout),
      state_(words(look, Text::strong, Tone::plain, {})),
      keep_(new QPushButton(tr("&Use these devices"))),
      emulated_(new QPushButton(tr("&Open the emulated bench"))) {
  auto* column = new QVBoxLayout(this);
  column->setContentsMargins(40, 28, 40, 28);
  column->setSpacing(10);
  column->addWidget(words(look, Text::verdict, Tone::plain, tr("Set up this station")));
  column->addWidget(words(look, Text::body, Tone::plain,
                          tr("Plug in the phantom and the adapter of nest 1 and switch them on, then those of nest 2, "
                             "and so on. Each appears below and is given the lowest nest that lacks it. Change the "
                             "number where it is wrong.")));
  auto* list = new QVBoxLayout(list_);
  list->setContentsMargins(0, 8, 0, 8);
  list->addLayout(rows_);
  list->addStretch(1);
  auto* area = new QScrollArea;
  area->setFrameShape(QFrame::NoFrame);
  area->setWidgetResizable(true);
  area->setWidget(list_);
  column->addWidget(area, 1);
  state_->setObjectName(QStringLiteral("setup_state"));
  column->addWidget(state_);
  auto* buttons = new QHBoxLayout;
  buttons->addWidget(keep_);
  buttons->addWidget(emulated_);
  buttons->addStretch(1);
  column->addLayout(buttons);
  column->addWidget(words(look, Text::body, Tone::quiet,
                          tr("The emulated bench is all devices in software, to learn and to try. It needs nothing "
                             "plugged in, and what it makes is marked as a demonstration.")));
  keep_->setObjectName(QStringLiteral("keep"));
  emulated_->setObjectName(QStringLiteral("emulated"));
  connect(keep_, &QPushButton::clicked, this, &SetupPage::keep);
  connect(emulated_, &QPushButton::clicked, this, &SetupPage::emulated_wanted);
  connect(&search_, &DeviceSearch::found, this, &SetupPage::place);
  connect(&search_, &DeviceSearch::gone, this, &SetupPage::take_away);
  connect(&again_, &QTimer::timeout, this, [this] {
    search_.look();
    show_state();
  });
  again_.start(look_again_ms);
  search_.look();
  show_devices();
}

void SetupPage::place(const sequence::FoundDevice& device) {
  placed_.push_back({device, free_nest(placed_, device)});
  show_devices();
}

void SetupPage::take_away(const std::string& port) {
  std::erase_if(placed_, [&](const Placed& one) { return one.device.port == port; });
  show_devices();
}

void SetupPage::show_devices() {
  while (QLayoutItem* item = rows_->takeAt(0)) {
    if (item->widget()) item->widget()->deleteLater();
    delete item;
  }
  rows_->setColumnStretch(2, 1);
  rows_->setHorizontalSpacing(20);
  for (std::size_t i = 0; i < placed_.size(); ++i) add_row(i);
  show_state();
}

void SetupPage::add_row(std::size_t index) {
  const Placed& one = placed_[index];
  const int row = static_cast<int>(index);
  const QString port = QString::fromStdString(one.device.port), serial = QString::fromStdString(one.device.serial);
  if (!one.device.kind) {
    rows_->addWidget(words(look_, Text::strong, Tone::quiet, serial.isEmpty() ? tr("unknown") : serial), row, 1);
    const QString why = one.device.trouble ? what_words(*one.device.trouble) : port;
    rows_->addWidget(words(look_, Text::body, Tone::quiet, why), row, 2);
    return;
  }
  auto* nest = new QSpinBox;
  nest->setRange(0, 16);
  nest->setPrefix(tr("nest "));
  nest->setSpecialValueText(tr("not used"));
  nest->setValue(one.nest);
  nest->setAccessibleName(tr("Nest of %1").arg(serial));
  connect(nest, &QSpinBox::valueChanged, this, [this, index](int value) {
    placed_[index].nest = value;
    show_state();
  });
  const bool phantom = *one.device.kind == sequence::DeviceKind::phantom;
  rows_->addWidget(nest, row, 0);
  rows_->addWidget(words(look_, Text::strong, Tone::plain, (phantom ? tr("Phantom %1") : tr("Adapter %1")).arg(serial)),
                   row, 1);
  rows_->addWidget(words(look_, Text::body, Tone::quiet,
                         tr("certificate %1, at %2").arg(QString::fromStdString(one.device.certificate), port)),
                   row, 2);
}

void SetupPage::show_state() {
  const auto nests = nests_of(placed_);
  keep_->setEnabled(nests.has_value());
  if (nests)
    state_->say(nests->size() == 1 ? tr("1 nest is complete.") : tr("%1 nests are complete.").arg(nests->size()));
  else if (search_.waiting() > 0)
    state_->say(tr("Looking at %1 ports ...").arg(search_.waiting()));
  else
    state_->say(problem_words(nests.error()));
}

void SetupPage::keep() {
  const auto nests = nests_of(placed_);
  if (!nests) return state_->say(problem_words(nests.error()));
  const auto path = door_.keep(*nests);
  if (!path) return state_->say(problem_words(path.error()));
  emit kept(QString::fromStdString(*path));
}

}  // namespace probewright::windows
