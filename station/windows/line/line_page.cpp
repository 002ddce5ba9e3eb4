#include "station/windows/line/line_page.h"

#include <QTimer>
#include <QVBoxLayout>

#include "station/windows/frame/sheet.h"
#include "station/windows/line/answer_line.h"
#include "station/windows/line/berth_grid.h"
#include "station/windows/line/late_notice.h"
#include "station/windows/line/line_model.h"
#include "station/windows/line/run_details.h"
#include "station/windows/line/scan_field.h"
#include "station/windows/line/tally.h"
#include "station/windows/look/look.h"

namespace probewright::windows {
namespace {

constexpr int question_ms = 5000;
/// Lower windows, in lines of text, get the tally in one row.
constexpr double low_lines = 34.0;

}  // namespace

LinePage::LinePage(LineModel& model, const Look& look, Sheet& sheet, QWidget* parent)
    : QWidget(parent),
      model_(model),
      look_(look),
      sheet_(sheet),
      grid_(new BerthGrid(model, look)),
      scan_(new ScanField(look)),
      answer_(new AnswerLine(model, look)),
      tally_(new Tally(model, look)),
      question_ends_(new QTimer(this)) {
  auto* column = new QVBoxLayout(this);
  column->addWidget(grid_, 1);
  column->addWidget(scan_);
  column->addWidget(answer_);
  column->addWidget(tally_);
  setFocusProxy(scan_);
  question_ends_->setSingleShot(true);
  connect(question_ends_, &QTimer::timeout, this, [this] { question_.clear(); });
  connect(scan_, &ScanField::scanned, this, &LinePage::take_scan);
  connect(scan_, &ScanField::entered, this, &LinePage::take_enter);
  connect(scan_, &ScanField::moved, this,
          [this](int columns, int rows) { sheet_.is_open() ? sheet_.scroll(rows) : grid_->move(columns, rows); });
  connect(grid_, &BerthGrid::opened, this, &LinePage::show_readings);
  connect(&look, &Look::changed, this, &LinePage::dress);
  dress();
}

void LinePage::dress() {
  const int side = static_cast<int>(look_.type().length(16)), gap = static_cast<int>(look_.type().length(9));
  layout()->setContentsMargins(side, gap, side, gap);
  layout()->setSpacing(gap);
  tally_->set_low(height() < low_lines * look_.type().line(Text::body));
}

int LinePage::scan_top() const { return scan_->y(); }

void LinePage::resizeEvent(QResizeEvent* event) {
  QWidget::resizeEvent(event);
  dress();
}

void LinePage::take_scan(const QString& text) {
  question_.clear();
  sheet_.shut();
  model_.scan(text);
}

void LinePage::take_enter() { sheet_.is_open() ? sheet_.shut() : show_readings(grid_->chosen()); }

void LinePage::show_readings(int nest) {
  if (const auto* outcome = model_.last_outcome(nest))
    sheet_.open(QStringLiteral("readings"), run_title(*outcome), make_run_page(*outcome, look_));
  else if (nest > 0)
    answer_->say_ourselves(tr("Nest %1 has no finished run yet.").arg(nest));
}

void LinePage::show_late_notice() {
  if (model_.closed_late().empty()) return;
  sheet_.open(QStringLiteral("late"), tr("These probes were being tested"),
              make_text_page(look_, late_notice(model_.closed_late())));
}

bool LinePage::asked_twice(const QString& question) {
  const bool again = question_ == question;
  question_ = again ? QString{} : question;
  if (again) return true;
  answer_->say_ourselves(question);
  question_ends_->start(question_ms);
  return false;
}

void LinePage::stop_chosen() {
  const int nest = grid_->chosen();
  if (nest > 0 && asked_twice(tr("Stop nest %1? Press F8 once more.").arg(nest))) model_.stop(nest);
}

void LinePage::close_lot() {
  if (asked_twice(tr("Close the lot? Choose it once more."))) model_.close_lot();
}

void LinePage::sign_out() { model_.sign_out(); }

}  // namespace probewright::windows
