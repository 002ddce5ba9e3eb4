#include "station/pages/pdf_bytes.h"

#include <algorithm>
#include <cmath>
#include <string>

#include "station/base/numbers.h"

namespace probewright::pages {
namespace {

constexpr double points_per_mm = 72 / 25.4;

// Puts `value` between the only `open` of the file and the next `close`, then `close`, then spaces.
bool replace_between(QByteArray& pdf, const QByteArray& open, char close, const std::string& value) {
  const qsizetype start = pdf.indexOf(open), end = pdf.indexOf(close, start);
  if (start < 0 || end < 0 || pdf.indexOf(open, end) >= 0) return false;
  const qsizetype from = start + open.size(), room = end + 1 - from;
  const QByteArray text = QByteArray::fromStdString(value + close);
  if (text.size() > room) return false;
  pdf.replace(from, room, text.leftJustified(room, ' '));
  return true;
}

}  // namespace

QSize whole_points(double width_mm, double height_mm) {
  return {static_cast<int>(std::ceil(width_mm * points_per_mm)),
          static_cast<int>(std::ceil(height_mm * points_per_mm))};
}

// Clauses 7.7.3.3 (MediaBox) and 7.9.5 (rectangles: two corners, y from the foot).
bool set_page_size(QByteArray& pdf, double width_mm, double height_mm) {
  const int top = whole_points(width_mm, height_mm).height();
  return replace_between(pdf, "/MediaBox [", ']',
                         "0 " + fixed(top - height_mm * points_per_mm, 3) + " " + fixed(width_mm * points_per_mm, 3) +
                             " " + std::to_string(top));
}

// Clause 7.9.4: D:YYYYMMDDHHmmSSZ.
bool set_creation_time(QByteArray& pdf, UtcTime time) {
  std::string digits = to_text(time).substr(0, 19);
  std::erase_if(digits, [](char c) { return c < '0' || c > '9'; });
  return replace_between(pdf, "/CreationDate (", ')', "D:" + digits + "Z");
}

}  // namespace probewright::pages
