#pragma once
#include <QColor>

namespace probewright::windows {

/// What a word or shape says; its colour says the same a second time.
enum class Tone { plain, quiet, pass, fail, void_run, wait };

/// All colours of the windows by what they are for. LOOK.md tells where they come from and their contrasts.
struct Colours {
  QColor paper;     ///< the ground of a window
  QColor card;      ///< berths, fields, sheets of readings
  QColor well;      ///< where data is drawn, between the rails
  QColor ink;       ///< text and data
  QColor quiet;     ///< text that explains
  QColor hairline;  ///< parts the page; carries no meaning
  QColor edge;      ///< outlines that must be seen
  QColor guard;     ///< posts of the guard strip
  QColor accent;    ///< focus, the chosen workspace
  QColor on_accent;
  QColor pass, fail, void_run, wait;
  QColor pass_wash, fail_wash, void_wash, wait_wash;  ///< grounds of a berth's head
  QColor red, infrared;                               ///< lines of the two LEDs

  const QColor& of(Tone tone) const;
  /// The ground that belongs to a tone; the card's for those without one.
  const QColor& wash_of(Tone tone) const;
};

Colours light_colours();
Colours dark_colours();

}  // namespace probewright::windows
