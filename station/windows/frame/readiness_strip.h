#pragma once
#include <QWidget>

namespace probewright::windows {

class Label;
class LineModel;
class Look;
class Mark;

/// The top of the window: ready or not in words, why, and what is due next; who is signed in; which lot, model and
/// sheet.
class ReadinessStrip : public QWidget {
  Q_OBJECT
 public:
  ReadinessStrip(LineModel& model, const Look& look, QWidget* parent = nullptr);

 protected:
  void changeEvent(QEvent* event) override;

 private:
  void show_view();
  void show_readiness();
  void show_person_and_lot();

  LineModel& model_;
  Mark* mark_;
  Label *state_, *reason_, *person_, *lot_;
};

}  // namespace probewright::windows
