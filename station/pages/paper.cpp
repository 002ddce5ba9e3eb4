#include "station/pages/paper.h"

#include <QBuffer>
#include <QByteArray>
#include <QPageSize>
#include <QPdfWriter>
#include <cmath>

#include <qcustomplot.h>

namespace probewright::pages {
namespace {

constexpr int dots_per_inch = 1200;
constexpr double mm_per_inch = 25.4;

// Slanted over the page, behind all text.
void overprint(const Canvas& canvas, const QString& words) {
  if (words.isEmpty()) return;
  const double slant = std::atan2(paper_height_mm, paper_width_mm);
  const double room_mm = 0.78 * std::hypot(paper_width_mm, paper_height_mm);
  const double size_mm = canvas.fitting_mm(words, Weight::bold, 30.0, room_mm);
  canvas.painter->save();
  canvas.painter->translate(canvas.px(paper_width_mm / 2), canvas.px(paper_height_mm / 2));
  canvas.painter->rotate(-slant * 180.0 / M_PI);
  canvas.line({-room_mm / 2, -size_mm, room_mm, 2 * size_mm}, words, size_mm, Weight::bold, Align::centre,
              ink::overprint);
  canvas.painter->restore();
}

void foot(const Canvas& canvas, const Paper& paper, std::size_t number, std::size_t of) {
  const double y = paper_height_mm - 13.0;
  canvas.rule(paper_left_mm, y, column_mm, ink::rule, 0.2);
  const QRectF box{paper_left_mm, y + 1.0, column_mm, 4.0};
  const std::string words = "page " + std::to_string(number) + " of " + std::to_string(of);
  canvas.line(box, qt(words), 2.7, Weight::plain, Align::right, ink::quiet);
  const double size_mm = canvas.fitting_mm(qt(paper.foot), Weight::plain, 2.7, column_mm - 30.0);
  canvas.line(box, qt(paper.foot), size_mm, Weight::plain, Align::left, ink::quiet);
  if (paper.overprint.empty()) return;
  canvas.line({paper_left_mm, 8.0, column_mm, 5.0}, qt(paper.overprint), 3.4, Weight::bold, Align::right, ink::outside);
}

void draw_page(const Canvas& canvas, const std::vector<const Block*>& blocks) {
  double y = paper_top_mm;
  for (const Block* block : blocks) {
    if (block->draw) block->draw(canvas, {paper_left_mm, y, column_mm, block->height_mm});
    y += block->height_mm;
  }
}

// How high a block stands with those that it must not be parted from.
double height_with_next(const std::vector<Block>& blocks, std::size_t at) {
  double height = blocks[at].height_mm;
  for (; blocks[at].with_next && at + 1 < blocks.size(); ++at) height += blocks[at + 1].height_mm;
  return height;
}

}  // namespace

std::vector<std::vector<const Block*>> paginated(const std::vector<Block>& blocks, double room_mm) {
  std::vector<std::vector<const Block*>> pages(1);
  double used_mm = 0.0;
  for (std::size_t i = 0; i < blocks.size(); ++i) {
    const Block& block = blocks[i];
    if (!pages.back().empty() && used_mm + height_with_next(blocks, i) > room_mm) {
      if (block.space) continue;
      pages.emplace_back();
      used_mm = 0.0;
      if (block.head != nullptr) {
        pages.back().push_back(block.head.get());
        used_mm = block.head->height_mm;
      }
    }
    pages.back().push_back(&block);
    used_mm += block.height_mm;
  }
  return pages;
}

Canvas measuring_canvas() { return {nullptr, dots_per_inch / mm_per_inch, nullptr}; }

QByteArray pdf_of(const Paper& paper, int& pages) {
  const auto filled = paginated(paper.blocks, paper_height_mm - paper_top_mm - paper_bottom_mm);
  pages = static_cast<int>(filled.size());
  QByteArray bytes;
  QBuffer buffer{&bytes};
  buffer.open(QIODevice::WriteOnly);
  QPdfWriter writer{&buffer};
  writer.setCreator("probewright");
  writer.setTitle(qt(paper.title));
  writer.setResolution(dots_per_inch);
  writer.setPageSize(QPageSize{QPageSize::A4});
  writer.setPageMargins({});
  QCPPainter painter;
  painter.begin(&writer);
  painter.setModes(QCPPainter::pmVectorized | QCPPainter::pmNoCaching);
  const Canvas canvas{&painter, dots_per_inch / mm_per_inch, &painter};
  for (std::size_t i = 0; i < filled.size(); ++i) {
    if (i > 0) writer.newPage();
    overprint(canvas, qt(paper.overprint));
    draw_page(canvas, filled[i]);
    foot(canvas, paper, i + 1, filled.size());
  }
  painter.end();
  return bytes;
}

}  // namespace probewright::pages
