#include "station/pages/fact_blocks.h"

#include <QPainter>
#include <iterator>

#include "station/pages/table_blocks.h"

namespace probewright::pages {
namespace {

constexpr double names_mm = 26.0, fact_line_mm = 4.7;

// One line of a fact: its name in grey at the left of the first.
Block one_fact_line(const QString& name, const QString& line) {
  Block block;
  block.height_mm = fact_line_mm;
  block.draw = [name, line](const Canvas& canvas, QRectF box) {
    canvas.line(box, name, body_size_mm, Weight::plain, Align::left, ink::quiet);
    canvas.line(box.adjusted(names_mm, 0, 0, 0), line, body_size_mm, Weight::plain, Align::left, ink::text);
  };
  return block;
}

}  // namespace

void append(std::vector<Block>& to, std::vector<Block> blocks) {
  to.insert(to.end(), std::make_move_iterator(blocks.begin()), std::make_move_iterator(blocks.end()));
}

Block title_line(const std::string& text) {
  Block block;
  block.height_mm = 11.0;
  block.with_next = true;
  block.draw = [text](const Canvas& canvas, QRectF box) {
    canvas.line({box.x(), box.y(), box.width(), 8.0}, qt(text),
                canvas.fitting_mm(qt(text), Weight::bold, 6.6, box.width()), Weight::bold, Align::left, ink::text);
  };
  return block;
}

std::vector<Block> fact_lines(const std::vector<std::pair<std::string, std::string>>& pairs) {
  const Canvas measure = measuring_canvas();
  std::vector<Block> blocks;
  for (const auto& [name, value] : pairs) {
    QString first = qt(name);
    for (const QString& line : wrapped(measure, qt(value), measure.font(body_size_mm), column_mm - names_mm)) {
      blocks.push_back(one_fact_line(first, line));
      first.clear();
    }
  }
  return blocks;
}

std::vector<Block> seal_blocks(const std::string& seal, long long entry, const std::string& verify_command) {
  std::vector<Block> blocks{heading("Seal")};
  auto lines = fact_lines({{"entry", std::to_string(entry)}, {"seal", seal}, {"to compare", verify_command}});
  for (Block& line : lines) line.with_next = true;
  append(blocks, std::move(lines));
  blocks.push_back(gap(1.5));
  append(blocks, paragraph("The ledger that this report was made from held this seal as the hash of entry " +
                               std::to_string(entry) +
                               ", then its newest. A ledger that was changed or replaced since then does not.",
                           small_size_mm, ink::quiet));
  return blocks;
}

Shape shape_of(const std::string& verdict) {
  return verdict == "pass"   ? Shape::disc
         : verdict == "fail" ? Shape::cross
         : verdict == "void" ? Shape::bar
                             : Shape::ring;
}

void draw_shape(const Canvas& canvas, Shape shape, QPointF centre_mm, double size_mm, QColor colour) {
  const QPointF centre{canvas.px(centre_mm.x()), canvas.px(centre_mm.y())};
  const double half = canvas.px(size_mm / 2), thick = canvas.px(0.22 * size_mm);
  canvas.painter->save();
  canvas.painter->setRenderHint(QPainter::Antialiasing);
  canvas.painter->setBrush(shape == Shape::disc ? QBrush{colour} : QBrush{Qt::NoBrush});
  canvas.painter->setPen(shape == Shape::disc ? QPen{Qt::NoPen} : QPen{colour, thick, Qt::SolidLine, Qt::FlatCap});
  if (shape == Shape::disc) canvas.painter->drawEllipse(centre, half, half);
  if (shape == Shape::ring) canvas.painter->drawEllipse(centre, half - thick / 2, half - thick / 2);
  if (shape == Shape::bar) canvas.painter->drawLine(centre - QPointF{half, 0}, centre + QPointF{half, 0});
  if (shape == Shape::cross) {
    canvas.painter->drawLine(centre - QPointF{half, half}, centre + QPointF{half, half});
    canvas.painter->drawLine(centre - QPointF{half, -half}, centre + QPointF{half, -half});
  }
  canvas.painter->restore();
}

Block verdict_block(const std::string& verdict, const std::string& words, const std::string& why) {
  constexpr double word_mm = 6.4, shape_mm = 4.6, gap_mm = 6.0, line_mm = 4.6;
  const Canvas measure = measuring_canvas();
  const double word_width = measure.width_mm(qt(words), measure.font(word_mm, Weight::bold));
  const double room = column_mm - shape_mm - 2.5 - word_width - gap_mm;
  const bool beside = room > 60.0;  // else below
  const auto lines =
      why.empty() ? QStringList{} : wrapped(measure, qt(why), measure.font(body_size_mm), beside ? room : column_mm);
  const double why_mm = line_mm * static_cast<double>(lines.size());
  Block block;
  block.height_mm = (beside ? std::max(9.0, why_mm + 2.2) : 9.0 + why_mm) + 1.0;
  block.draw = [=](const Canvas& canvas, QRectF box) {
    const QColor colour = verdict == "fail" ? ink::outside : ink::text;
    draw_shape(canvas, shape_of(verdict), {box.x() + shape_mm / 2, box.y() + 4.0}, shape_mm, colour);
    canvas.line({box.x() + shape_mm + 2.5, box.y(), word_width, 8.0}, qt(words), word_mm, Weight::bold, Align::left,
                colour);
    double y = beside ? box.y() + (lines.size() == 1 ? 1.9 : 1.2) : box.y() + 9.0;
    const double x = beside ? box.x() + shape_mm + 2.5 + word_width + gap_mm : box.x();
    for (const QString& line : lines) {
      canvas.line({x, y, box.right() - x, line_mm}, line, body_size_mm, Weight::plain, Align::left, ink::text);
      y += line_mm;
    }
  };
  return block;
}

std::string minute_of(const std::string& local_text) { return local_text.substr(0, 16); }

}  // namespace probewright::pages
