#include "station/windows/line/line_model.h"

#include <utility>

namespace probewright::windows {

using namespace sequence;

LineModel::LineModel(LineDoor& door, QObject* parent)
    : QObject(parent), door_(door), view_(door.view()), closed_late_(door.closed_late()) {}

const RunOutcome* LineModel::last_outcome(int nest) const {
  const auto found = outcomes_.find(nest);
  return found == outcomes_.end() ? nullptr : &found->second;
}

void LineModel::scan(const QString& text) { door_.request(Scan{text.toStdString()}); }

void LineModel::stop(int nest) { door_.request(StopNest{nest, view_->person ? view_->person->name : std::string{}}); }

void LineModel::sign_out() { door_.request(SignOut{}); }

void LineModel::close_lot() { door_.request(CloseLot{}); }

void LineModel::take(std::shared_ptr<const LineView> view) {
  view_ = std::move(view);
  emit view_changed();
}

void LineModel::hear(const LineEvent& event) {
  if (const auto* ended = std::get_if<RunEnded>(&event)) {
    outcomes_[ended->outcome.nest] = ended->outcome;
    emit run_ended(ended->outcome.nest);
  } else if (const auto* answer = std::get_if<Answered>(&event)) {
    answer_ = *answer;
    emit answered();
  }
}

void LineModel::break_off(const std::string& what) {
  broken_ = QString::fromStdString(what);
  emit broke();
}

}  // namespace probewright::windows
