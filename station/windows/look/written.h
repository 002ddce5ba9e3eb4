#pragma once
#include <QFont>
#include <QRectF>
#include <QString>

class QColor;
class QPainter;

namespace probewright::windows {

/// Text that is written into a drawing, broken at words.
struct Written {
  QString words;
  QFont font;
  int most_lines = 1;  ///< the last of them ends with an ellipsis where there is more
};

/// How many lines the words need in this width.
int lines_of(const Written& written, double width);
/// Writes from the top left of `place` down; gives the height that it took.
double write(QPainter& painter, const QRectF& place, const Written& written, const QColor& colour);
/// One line, from the right or left, in the middle of the height.
void write_line(QPainter& painter, const QRectF& place, const QString& words, const QFont& font, const QColor& colour,
                Qt::Alignment alignment = Qt::AlignLeft);

/// The font, or where the words are too long for `width` the same one smaller, down to seven tenths.
QFont fitting(const QFont& font, const QString& words, double width);

}  // namespace probewright::windows
