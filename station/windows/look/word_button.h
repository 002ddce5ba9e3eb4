#pragma once
#include <QAbstractButton>

#include "station/windows/look/type_scale.h"

namespace probewright::windows {

class Look;

/// A button that is a word and nothing else. A checked one stands on a bar. It never takes the focus from the scanner;
/// each has a key.
class WordButton : public QAbstractButton {
  Q_OBJECT
 public:
  WordButton(const Look& look, Text text, QWidget* parent = nullptr);
  /// Draws an outline, for a word that invites to be pressed.
  void set_outlined(bool outlined);
  QSize sizeHint() const override;

 protected:
  void paintEvent(QPaintEvent* event) override;
  void enterEvent(QEnterEvent* event) override;
  void leaveEvent(QEvent* event) override;

 private:
  void draw_outline(QPainter& painter);
  const Look& look_;
  Text text_;
  bool outlined_ = false;
};

}  // namespace probewright::windows
