#include "station/windows/line/berth_grid.h"

#include <QEvent>
#include <algorithm>

#include "station/windows/line/line_model.h"
#include "station/windows/look/look.h"

namespace probewright::windows {

BerthGrid::BerthGrid(LineModel& model, const Look& look, QWidget* parent)
    : QScrollArea(parent), model_(model), look_(look), ground_(new QWidget) {
  setObjectName(QStringLiteral("berths"));
  setFrameShape(QFrame::NoFrame);
  setFocusPolicy(Qt::NoFocus);
  setHorizontalScrollBarPolicy(Qt::ScrollBarAlwaysOff);
  setWidget(ground_);
  connect(&model, &LineModel::view_changed, this, &BerthGrid::show_view);
  connect(&model, &LineModel::run_ended, this, [this] {
    shown_.clear();  // a berth tells more once the readings are there
    show_view();
  });
  connect(&look, &Look::changed, this, &BerthGrid::lay_out);
  show_view();
}

void BerthGrid::make_berths(std::size_t count) {
  for (Berth* berth : berths_) berth->deleteLater();
  berths_.clear();
  shown_.clear();
  for (std::size_t i = 0; i < count; ++i) {
    auto* berth = new Berth(look_, ground_);
    berth->setObjectName(QStringLiteral("berth%1").arg(i + 1));
    connect(berth, &Berth::pressed, this, &BerthGrid::choose);
    connect(berth, &Berth::opened, this, &BerthGrid::opened);
    berth->show();
    berths_.push_back(berth);
  }
  chosen_ = std::min(chosen_, count == 0 ? 0 : count - 1);
  lay_out();
}

void BerthGrid::show_view() {
  const auto& views = model_.view().berths;
  if (views.size() != berths_.size()) make_berths(views.size());
  for (std::size_t i = 0; i < views.size(); ++i)
    if (i >= shown_.size() || !(shown_[i] == views[i]))
      berths_[i]->show_content(berth_content(views[i], model_.last_outcome(views[i].nest.nest)));
  shown_ = views;
}

void BerthGrid::lay_out() {
  if (berths_.empty()) return;
  const QSizeF room = viewport()->size();
  const double gap = look_.type().length(berths_.size() > 8 ? 6 : 12);
  const QSizeF least = least_berth(look_.type());
  const int most = std::max(1, static_cast<int>((room.width() + gap) / (least.width() + gap)));
  const int count = static_cast<int>(berths_.size());
  columns_ = std::min(columns_for(count, room, look_.type()), most);
  const int rows = (count + columns_ - 1) / columns_;
  const double width = (room.width() - gap * (columns_ - 1)) / columns_;
  const double height = std::max((room.height() - gap * (rows - 1)) / rows, least.height());
  ground_->resize(static_cast<int>(room.width()), static_cast<int>(rows * (height + gap) - gap + 0.5));
  for (int i = 0; i < count; ++i)
    berths_[static_cast<std::size_t>(i)]->setGeometry(
        QRectF{i % columns_ * (width + gap), i / columns_ * (height + gap), width, height}.toRect());
}

int BerthGrid::chosen() const { return berths_.empty() ? 0 : model_.view().berths[chosen_].nest.nest; }

void BerthGrid::choose(int nest) {
  const auto& views = model_.view().berths;
  for (std::size_t i = 0; i < views.size() && i < berths_.size(); ++i) {
    if (views[i].nest.nest == nest) chosen_ = i;
    berths_[i]->set_chosen(views[i].nest.nest == nest);
  }
  if (!berths_.empty()) ensureWidgetVisible(berths_[chosen_], 0, 0);
}

void BerthGrid::move(int columns, int rows) {
  if (berths_.empty()) return;
  const int wanted = static_cast<int>(chosen_) + columns + rows * columns_;
  if (wanted < 0 || wanted >= static_cast<int>(berths_.size())) return choose(chosen());
  choose(model_.view().berths[static_cast<std::size_t>(wanted)].nest.nest);
}

void BerthGrid::resizeEvent(QResizeEvent* event) {
  QScrollArea::resizeEvent(event);
  lay_out();
}

void BerthGrid::changeEvent(QEvent* event) {
  QScrollArea::changeEvent(event);
  if (event->type() != QEvent::LanguageChange) return;
  shown_.clear();
  show_view();
}

}  // namespace probewright::windows
