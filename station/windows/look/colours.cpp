#include "station/windows/look/colours.h"

namespace probewright::windows {

// Hues are those of the palette of M. Okabe and K. Ito ("Color Universal Design", 2008): bluish green 009E73, vermilion
// D55E00, reddish purple CC79A7, blue 0072B2, sky blue 56B4E9; darker or lighter where text needs the contrast.

const QColor& Colours::of(Tone tone) const {
  switch (tone) {
    case Tone::quiet:
      return quiet;
    case Tone::pass:
      return pass;
    case Tone::fail:
      return fail;
    case Tone::void_run:
      return void_run;
    case Tone::wait:
      return wait;
    case Tone::plain:
      break;
  }
  return ink;
}

const QColor& Colours::wash_of(Tone tone) const {
  switch (tone) {
    case Tone::pass:
      return pass_wash;
    case Tone::fail:
      return fail_wash;
    case Tone::void_run:
      return void_wash;
    case Tone::wait:
      return wait_wash;
    case Tone::plain:
    case Tone::quiet:
      break;
  }
  return card;
}

Colours light_colours() {
  Colours c;
  c.paper = 0xF7F5F0, c.card = 0xFFFFFF, c.well = 0xF1F1EC;
  c.ink = 0x1B1F24, c.quiet = 0x565C63, c.hairline = 0xD9D7CF, c.edge = 0x7E8285, c.guard = 0x8C8F8C;
  c.accent = 0x0068A6, c.on_accent = 0xFFFFFF;
  c.pass = 0x006B4E, c.fail = 0xA84300, c.void_run = 0x8A3F6E, c.wait = 0x00639E;
  c.pass_wash = 0xE2F1EB, c.fail_wash = 0xFBE9DE, c.void_wash = 0xF6E6F0, c.wait_wash = 0xE1EFF8;
  c.red = 0xB04600, c.infrared = 0x0068A6;
  return c;
}

Colours dark_colours() {
  Colours c;
  c.paper = 0x14171A, c.card = 0x1E2226, c.well = 0x262B30;
  c.ink = 0xECEAE4, c.quiet = 0xA9AEB3, c.hairline = 0x343A40, c.edge = 0x7C838A, c.guard = 0x757C83;
  c.accent = 0x56B4E9, c.on_accent = 0x101418;
  c.pass = 0x3FC79B, c.fail = 0xFF8A4C, c.void_run = 0xDFA0C4, c.wait = 0x56B4E9;
  c.pass_wash = 0x17322A, c.fail_wash = 0x3B2417, c.void_wash = 0x37242F, c.wait_wash = 0x182F3D;
  c.red = 0xFF8A4C, c.infrared = 0x56B4E9;
  return c;
}

}  // namespace probewright::windows
