#include "station/windows/look/label.h"

#include <utility>

#include "station/windows/look/look.h"

namespace probewright::windows {

Label::Label(const Look& look, Text text, Tone tone, QWidget* parent)
    : QLabel(parent), look_(look), text_(text), tone_(tone) {
  setTextFormat(Qt::PlainText);
  setFocusPolicy(Qt::NoFocus);
  connect(&look, &Look::changed, this, &Label::dress);
  dress();
}

void Label::set_tone(Tone tone) {
  if (std::exchange(tone_, tone) != tone) dress();
}

void Label::say(const QString& words) {
  if (words != text()) setText(words);
}

void Label::dress() {
  setFont(look_.type().font(text_));
  QPalette colours = palette();
  colours.setColor(QPalette::WindowText, look_.colours().of(tone_));
  setPalette(colours);
}

}  // namespace probewright::windows
