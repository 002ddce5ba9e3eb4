#pragma once
#include <QObject>
#include <map>
#include <memory>
#include <optional>

#include "station/windows/line_door.h"

namespace probewright::windows {

/// The line for the widgets of the main thread: its newest view, what only events tell, and the way to ask. Main
/// thread only.
class LineModel : public QObject {
  Q_OBJECT
 public:
  /// `door` outlives the model.
  explicit LineModel(LineDoor& door, QObject* parent = nullptr);

  const sequence::LineView& view() const { return *view_; }
  /// The last run of a nest since this program started, with its readings; nullptr: none.
  const sequence::RunOutcome* last_outcome(int nest) const;
  /// The answer to the newest request of a person.
  const std::optional<sequence::Answered>& answer() const { return answer_; }
  const std::vector<sequence::ClosedLate>& closed_late() const { return closed_late_; }
  /// Why the line ended by itself; empty: it lives.
  const QString& broken() const { return broken_; }

  void scan(const QString& text);
  /// Stops the nest's run, or takes its arming back, in the name of who is signed in.
  void stop(int nest);
  void sign_out();
  void close_lot();

  /// From the line.
  void take(std::shared_ptr<const sequence::LineView> view);
  void hear(const sequence::LineEvent& event);
  void break_off(const std::string& what);

 signals:
  void view_changed();
  void answered();
  void run_ended(int nest);
  void broke();

 private:
  LineDoor& door_;
  std::shared_ptr<const sequence::LineView> view_;
  std::map<int, sequence::RunOutcome> outcomes_;
  std::optional<sequence::Answered> answer_;
  std::vector<sequence::ClosedLate> closed_late_;
  QString broken_;
};

}  // namespace probewright::windows
