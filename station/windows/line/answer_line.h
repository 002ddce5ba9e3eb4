#pragma once
#include <QWidget>

namespace probewright::windows {

class Label;
class LineModel;
class Look;
class Mark;

/// The answer to what was scanned last, one sentence below the field; before the first scan, what to begin with.
class AnswerLine : public QWidget {
  Q_OBJECT
 public:
  AnswerLine(LineModel& model, const Look& look, QWidget* parent = nullptr);
  QString words() const;
  /// Says a sentence of the window's own, such as a question, until the next answer.
  void say_ourselves(const QString& words);

 protected:
  void changeEvent(QEvent* event) override;

 private:
  void show_answer();
  void show_beginning();

  LineModel& model_;
  Mark* mark_;
  Label* label_;
  bool answered_ = false;
};

}  // namespace probewright::windows
