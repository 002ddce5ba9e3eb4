#pragma once
#include <QWidget>

class QScrollArea;

namespace probewright::windows {

class Label;
class Look;
class WordButton;

/// A page that lies over the workspace: readings, help, notices. The scan field below goes on taking what is scanned,
/// and a scan closes the sheet. Esc closes it, too.
class Sheet : public QWidget {
  Q_OBJECT
 public:
  /// Covers `parent`'s whole area below `top` px while it is open.
  Sheet(const Look& look, QWidget* parent);

  /// Takes `page` over; an earlier one goes. `kind` tells the same page again.
  void open(const QString& kind, const QString& title, QWidget* page);
  void shut();
  bool is_open() const { return isVisibleTo(parentWidget()); }
  const QString& kind() const { return kind_; }
  /// By steps of a line (1), or of a page (10).
  void scroll(int steps);
  void set_room(const QRect& room);

 signals:
  void closed();

 protected:
  void paintEvent(QPaintEvent* event) override;
  void changeEvent(QEvent* event) override;

 private:
  void say();
  void dress();

  const Look& look_;
  Label* title_;
  WordButton* close_;
  QScrollArea* area_;
  QString kind_;
};

}  // namespace probewright::windows
