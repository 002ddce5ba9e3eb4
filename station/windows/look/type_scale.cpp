#include "station/windows/look/type_scale.h"

#include <QFontDatabase>
#include <QFontMetricsF>
#include <QString>
#include <algorithm>
#include <utility>

namespace probewright::windows {
namespace {

/// Size in px at 100 % and whether it is bold.
std::pair<int, bool> size_of(Text text) {
  switch (text) {
    case Text::small:
      return {12, false};
    case Text::strong:
      return {14, true};
    case Text::headline:
      return {19, true};
    case Text::verdict:
      return {32, true};
    case Text::figure:
      return {29, true};
    case Text::workspace:
      return {20, false};
    case Text::serial:
      return {13, false};
    case Text::scan:
      return {20, false};
    case Text::body:
      break;
  }
  return {13, false};
}

QString first_of(std::initializer_list<const char*> families) {
  for (const char* family : families)
    if (QFontDatabase::hasFamily(family)) return family;
  return QFont{}.family();
}

}  // namespace

TypeScale::TypeScale(int percent)
    : percent_(std::clamp(percent, 100, 200)),
      family_(first_of({"Open Sans", "DejaVu Sans"})),
      fixed_family_(first_of({"DejaVu Sans Mono"})) {}

QFont TypeScale::font(Text text) const {
  const auto [px, bold] = size_of(text);
  QFont font{text == Text::serial || text == Text::scan ? fixed_family_ : family_};
  font.setPixelSize(static_cast<int>(length(px) + 0.5));
  font.setBold(bold);
  return font;
}

double TypeScale::line(Text text) const { return QFontMetricsF{font(text)}.height(); }

double TypeScale::width(Text text, const QString& words) const {
  return QFontMetricsF{font(text)}.horizontalAdvance(words);
}

}  // namespace probewright::windows
