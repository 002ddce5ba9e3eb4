#pragma once
#include <QString>
#include <QWidget>

namespace probewright::windows {

class AnswerLine;
class BerthGrid;
class LineModel;
class Look;
class ScanField;
class Sheet;
class Tally;

/// The operators' workspace: berths, scan field, answer, tally.
class LinePage : public QWidget {
  Q_OBJECT
 public:
  /// All of it outlives the page.
  LinePage(LineModel& model, const Look& look, Sheet& sheet, QWidget* parent = nullptr);

  ScanField& scan_field() { return *scan_; }
  /// Where the scan field begins, from the top of the page.
  int scan_top() const;
  BerthGrid& grid() { return *grid_; }
  /// Readings of the chosen nest's last run, over the berths.
  void show_readings(int nest);
  void show_late_notice();
  /// These two ask first: the same key once more within five seconds does it.
  void stop_chosen();
  void close_lot();
  void sign_out();

 protected:
  void resizeEvent(QResizeEvent* event) override;

 private:
  void take_scan(const QString& text);
  void take_enter();
  /// Whether the same was asked within the last seconds; else asks.
  bool asked_twice(const QString& question);
  void dress();

  LineModel& model_;
  const Look& look_;
  Sheet& sheet_;
  BerthGrid* grid_;
  ScanField* scan_;
  AnswerLine* answer_;
  Tally* tally_;
  QString question_;
  class QTimer* question_ends_;
};

}  // namespace probewright::windows
