#include "station/pages/life_line.h"

#include <algorithm>
#include <cmath>

#include "station/pages/fact_blocks.h"

namespace probewright::pages {
namespace {

constexpr std::size_t marks_in_a_row = 8;
constexpr double life_row_mm = 23.0, line_at_mm = 8.0;

// Equal steps: hours lie between tries and months between tests, which no scale of time shows at once.
double place_of(std::size_t i, std::size_t columns, const QRectF& box) {
  const double step = box.width() / static_cast<double>(columns);
  return box.x() + step * (static_cast<double>(i) + 0.5);
}

std::string span_words(std::int64_t us) {
  const double s = static_cast<double>(us) * 1e-6;
  const auto whole = [](double value) { return std::to_string(std::llround(value)); };
  if (s < 120.0) return whole(s) + " s";
  if (s < 2.0 * 3600.0) return whole(s / 60.0) + " min";
  if (s < 48.0 * 3600.0) return whole(s / 3600.0) + " h";
  return whole(s / 86400.0) + " days";
}

void draw_mark(const Canvas& canvas, const LifeMark& mark, double x, double room, const QRectF& box, const Zone& zone) {
  const QColor colour = mark.verdict == "fail" ? ink::outside : ink::text;
  const double y = box.y() + line_at_mm;
  if (mark.is_run)
    draw_shape(canvas, shape_of(mark.verdict), {x, y}, 3.6, colour);
  else
    canvas.fill({x - 0.2, y - 1.6, 0.4, 3.2}, ink::quiet);
  const auto words = [&](double top, const std::string& text, double size, QColor ink_of_it, Weight weight) {
    canvas.line({x - room / 2, top, room, 4.0}, qt(text), canvas.fitting_mm(qt(text), weight, size, room), weight,
                Align::centre, ink_of_it);
  };
  const std::string local = zone.local_text(mark.at);
  words(box.y() + 0.5, mark.words, 2.8, mark.is_run ? colour : ink::quiet, mark.is_run ? Weight::bold : Weight::plain);
  words(y + 3.2, local.substr(0, 10), 2.5, ink::quiet, Weight::plain);
  words(y + 6.6, local.substr(11, 5), 2.5, ink::quiet, Weight::plain);
}

Block life_row(std::vector<LifeMark> marks, std::size_t columns, bool goes_on, const Zone& zone) {
  Block block;
  block.height_mm = life_row_mm;
  block.draw = [marks = std::move(marks), columns, goes_on, zone](const Canvas& canvas, QRectF box) {
    const double step = box.width() / static_cast<double>(columns);
    const double y = box.y() + line_at_mm;
    const double end = goes_on ? box.right() : place_of(marks.size() - 1, columns, box);
    canvas.rule(place_of(0, columns, box), y, end - place_of(0, columns, box), ink::bar, 0.3);
    for (std::size_t i = 0; i < marks.size(); ++i) {
      const double x = place_of(i, columns, box);
      if (i + 1 < marks.size())
        canvas.line({x, y - 4.0, step, 3.4}, qt(span_words(marks[i + 1].at.microseconds - marks[i].at.microseconds)),
                    2.2, Weight::plain, Align::centre, ink::quiet);
      draw_mark(canvas, marks[i], x, step - 2.0, box, zone);
    }
  };
  return block;
}

}  // namespace

std::vector<Block> life_line(const std::vector<LifeMark>& marks, const Zone& zone) {
  std::vector<Block> blocks;
  const std::size_t columns = std::clamp<std::size_t>(marks.size(), 4, marks_in_a_row);
  for (std::size_t at = 0; at < marks.size(); at += marks_in_a_row) {
    const std::size_t count = std::min(marks_in_a_row, marks.size() - at);
    const auto from = marks.begin() + static_cast<std::ptrdiff_t>(at);
    blocks.push_back(
        life_row({from, from + static_cast<std::ptrdiff_t>(count)}, columns, at + count < marks.size(), zone));
  }
  return blocks;
}

}  // namespace probewright::pages
