#include "station/pages/canvas.h"

#include <QFontMetricsF>
#include <QPainter>
#include <QTextLayout>
#include <QTextOption>
#include <algorithm>
#include <cmath>

namespace probewright::pages {

void without_ligatures(QFont& font) {
  // The tool kit leaves ligatures out where letters are spaced; a sixty-fourth of a pixel is spacing enough.
  font.setLetterSpacing(QFont::AbsoluteSpacing, 1.0 / 64);
}

QFont Canvas::font(double size_mm, Weight weight) const {
  QFont font{font_family};
  font.setPixelSize(std::max(1, static_cast<int>(std::lround(px(size_mm)))));
  font.setBold(weight == Weight::bold);
  font.setHintingPreference(QFont::PreferNoHinting);  // widths in proportion to the size, on every device
  without_ligatures(font);
  return font;
}

double Canvas::width_mm(const QString& text, const QFont& font) const {
  return QFontMetricsF{font}.horizontalAdvance(text) / px_per_mm;
}

double Canvas::fitting_mm(const QString& text, Weight weight, double most_mm, double room_mm) const {
  const double width = width_mm(text, font(most_mm, weight));
  if (width <= room_mm) return most_mm;
  // The size becomes a whole number of pixels; take the one below, and some for the rounding of widths.
  return std::floor(px(most_mm * room_mm / width)) / px_per_mm * 0.995;
}

void Canvas::line(const QRectF& box_mm, const QString& text, double size_mm, Weight weight, Align align,
                  QColor colour) const {
  const QFont used = font(size_mm, weight);
  const QFontMetricsF metrics{used};
  const QRectF box = px(box_mm);
  const double spare = box.width() - metrics.horizontalAdvance(text);
  const double x = box.x() + (align == Align::left ? 0.0 : align == Align::right ? spare : spare / 2);
  painter->setFont(used);
  painter->setPen(colour);
  painter->drawText(QPointF{x, box.center().y() + metrics.capHeight() / 2}, text);
}

void Canvas::fill(const QRectF& box_mm, QColor colour) const { painter->fillRect(px(box_mm), colour); }

void Canvas::rule(double x_mm, double y_mm, double width_mm, QColor colour, double thick_mm) const {
  fill({x_mm, y_mm - thick_mm / 2, width_mm, thick_mm}, colour);
}

QStringList wrapped(const Canvas& canvas, const QString& text, const QFont& font, double width_mm) {
  QStringList lines;
  for (const QString& paragraph : text.split('\n')) {
    if (paragraph.isEmpty()) {
      lines << QString{};
      continue;
    }
    QTextLayout layout{paragraph, font};
    QTextOption option;
    option.setWrapMode(QTextOption::WrapAtWordBoundaryOrAnywhere);
    layout.setTextOption(option);
    layout.beginLayout();
    for (QTextLine line = layout.createLine(); line.isValid(); line = layout.createLine()) {
      line.setLineWidth(canvas.px(width_mm));
      lines << paragraph.mid(line.textStart(), line.textLength()).trimmed();
    }
    layout.endLayout();
  }
  return lines;
}

std::string overprint_of(std::string_view purpose, bool emulated) {
  std::string words = emulated ? "DEMONSTRATION" : "";
  if (purpose == "production") return words;
  if (!words.empty()) words += ' ';
  for (const char c : purpose) words += c >= 'a' && c <= 'z' ? static_cast<char>(c - 'a' + 'A') : c;
  return words;
}

}  // namespace probewright::pages
