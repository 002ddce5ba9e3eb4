#include "station/windows/look/written.h"

#include <QColor>
#include <QFontMetricsF>
#include <QPainter>
#include <QTextLayout>
#include <QTextOption>
#include <algorithm>
#include <vector>

namespace probewright::windows {
namespace {

/// Where each line begins.
std::vector<int> starts_of(const Written& written, double width) {
  QTextLayout layout{written.words, written.font};
  QTextOption option;
  option.setWrapMode(QTextOption::WrapAtWordBoundaryOrAnywhere);
  layout.setTextOption(option);
  std::vector<int> starts;
  layout.beginLayout();
  for (QTextLine line = layout.createLine(); line.isValid(); line = layout.createLine()) {
    line.setLineWidth(width);
    starts.push_back(line.textStart());
  }
  layout.endLayout();
  return starts;
}

}  // namespace

int lines_of(const Written& written, double width) {
  return written.words.isEmpty() ? 0 : static_cast<int>(starts_of(written, width).size());
}

double write(QPainter& painter, const QRectF& place, const Written& written, const QColor& colour) {
  if (written.words.isEmpty() || written.most_lines < 1) return 0.0;
  const std::vector<int> starts = starts_of(written, place.width());
  const QFontMetricsF metrics{written.font};
  const int count = std::min(static_cast<int>(starts.size()), written.most_lines);
  painter.setFont(written.font);
  painter.setPen(colour);
  for (int i = 0; i < count; ++i) {
    const int from = starts[static_cast<std::size_t>(i)];
    const bool cut = i + 1 == count && count < static_cast<int>(starts.size());
    const int length =
        cut || i + 1 >= static_cast<int>(starts.size()) ? -1 : starts[static_cast<std::size_t>(i) + 1] - from;
    QString line = written.words.mid(from, length).trimmed();
    if (cut) line = metrics.elidedText(line, Qt::ElideRight, place.width());
    painter.drawText(QPointF{place.left(), place.top() + i * metrics.height() + metrics.ascent()}, line);
  }
  return count * metrics.height();
}

QFont fitting(const QFont& font, const QString& words, double width) {
  const double wanted = QFontMetricsF{font}.horizontalAdvance(words);
  if (wanted <= width) return font;
  QFont smaller = font;
  smaller.setPixelSize(std::max(static_cast<int>(font.pixelSize() * width / wanted), font.pixelSize() * 7 / 10));
  return smaller;
}

void write_line(QPainter& painter, const QRectF& place, const QString& words, const QFont& font, const QColor& colour,
                Qt::Alignment alignment) {
  if (words.isEmpty()) return;
  painter.setFont(font);
  painter.setPen(colour);
  painter.drawText(place, static_cast<int>(alignment | Qt::AlignVCenter | Qt::TextSingleLine),
                   QFontMetricsF{font}.elidedText(words, Qt::ElideRight, place.width() + 0.5));
}

}  // namespace probewright::windows
