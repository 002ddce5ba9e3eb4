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
  QSize sizeHint() const override;

 protected:
  void paintEvent(QPaintEvent* event) override;
  void enterEvent(QEnterEvent* event) override;
  void leaveEvent(QEvent* event) override;

 private:
  const Look& look_;
  Text text_;
};

}  // namespace probewright::windows
