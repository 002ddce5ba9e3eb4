#pragma once
#include <QLineEdit>
#include <QRegularExpression>
#include <QWidget>
#include <vector>

namespace probewright::windows {

class Label;
class Look;

/// The line of text itself. It keeps the focus, and gives arrows away while it is empty.
class ScanEdit : public QLineEdit {
  Q_OBJECT
 public:
  using QLineEdit::QLineEdit;

 signals:
  void moved(int columns, int rows);

 protected:
  void keyPressEvent(QKeyEvent* event) override;
  void focusOutEvent(QFocusEvent* event) override;
  bool focusNextPrevChild(bool next) override;
};

/// Where everything that is scanned or typed goes in. What could be a badge is not shown while it is read.
class ScanField : public QWidget {
  Q_OBJECT
 public:
  explicit ScanField(const Look& look, QWidget* parent = nullptr);

  /// Regular expressions of whole texts that may be shown: serials of the station's models. Lot cards and "nest 3" are
  /// known. Text that can no longer become one of them is shown as dots.
  void set_shown_forms(const QStringList& patterns);
  QLineEdit* edit() const { return edit_; }

 signals:
  void scanned(const QString& text);
  void moved(int columns, int rows);
  /// Enter on the empty field.
  void entered();

 protected:
  void paintEvent(QPaintEvent* event) override;
  void changeEvent(QEvent* event) override;

 private:
  void say();
  void dress();
  void take();
  void hide_or_show(const QString& text);

  const Look& look_;
  Label* caption_;
  ScanEdit* edit_;
  std::vector<QRegularExpression> forms_;
};

}  // namespace probewright::windows
