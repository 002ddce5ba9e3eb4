#include "station/windows/look/look.h"

#include <QApplication>
#include <QPalette>

#include "station/windows/look/system_scheme.h"

namespace probewright::windows {
namespace {

/// For the tool kit's own widgets: fields, buttons, menus.
QPalette palette_of(const Colours& c) {
  QPalette palette{c.ink, c.card, c.card, c.hairline, c.edge, c.ink, c.ink, c.card, c.paper};
  palette.setColor(QPalette::Highlight, c.accent);
  palette.setColor(QPalette::HighlightedText, c.on_accent);
  palette.setColor(QPalette::PlaceholderText, c.quiet);
  palette.setColor(QPalette::Link, c.accent);
  palette.setColor(QPalette::AlternateBase, c.well);
  palette.setColor(QPalette::ToolTipBase, c.card);
  palette.setColor(QPalette::ToolTipText, c.ink);
  for (const auto role : {QPalette::Text, QPalette::WindowText, QPalette::ButtonText})
    palette.setColor(QPalette::Disabled, role, c.quiet);
  return palette;
}

}  // namespace

Look::Look(const SystemScheme& system, QObject* parent) : QObject(parent), system_(system) {
  connect(&system, &SystemScheme::changed, this, &Look::apply);
  apply();
}

void Look::set_scheme(Scheme scheme) {
  if (scheme == scheme_) return;
  scheme_ = scheme;
  apply();
}

void Look::set_percent(int percent) {
  const TypeScale type{percent};
  if (type.percent() == type_.percent()) return;
  type_ = type;
  apply();
}

void Look::apply() {
  dark_ = scheme_ == Scheme::dark || (scheme_ == Scheme::system && system_.dark());
  colours_ = dark_ ? dark_colours() : light_colours();
  QApplication::setPalette(palette_of(colours_));
  QApplication::setFont(type_.font(Text::body));
  emit changed();
}

}  // namespace probewright::windows
