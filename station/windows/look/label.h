#pragma once
#include <QLabel>

#include "station/windows/look/colours.h"
#include "station/windows/look/type_scale.h"

namespace probewright::windows {

class Look;

/// Words in one of the sizes and tones of the look; follows it.
class Label : public QLabel {
  Q_OBJECT
 public:
  Label(const Look& look, Text text, Tone tone, QWidget* parent = nullptr);
  void set_tone(Tone tone);
  /// Sets the words if they differ, and wraps them when they are longer than the room.
  void say(const QString& words);

 private:
  void dress();
  const Look& look_;
  Text text_;
  Tone tone_;
};

}  // namespace probewright::windows
