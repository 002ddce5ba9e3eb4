#include "station/pages/table_blocks.h"

#include <algorithm>

namespace probewright::pages {
namespace {

constexpr double head_mm = 2.7;
constexpr double leading = 1.42;
constexpr double padding_mm = 1.0;

struct Style {
  double size_mm;
  double between_mm;
  Weight weight;
  QColor colour;
};

constexpr qsizetype most_lines = 12;  // of one cell: a row must fit on a page

// The cells of one row, wrapped.
std::vector<QStringList> wrapped_cells(const std::vector<Column>& columns, const Cells& cells, const Style& style) {
  const Canvas canvas = measuring_canvas();
  std::vector<QStringList> lines;
  for (std::size_t i = 0; i < columns.size(); ++i) {
    lines.push_back(wrapped(canvas, qt(i < cells.size() ? cells[i] : ""), canvas.font(style.size_mm, style.weight),
                            columns[i].width_mm - style.between_mm));
    if (lines[i].size() <= most_lines) continue;
    lines[i] = lines[i].first(most_lines);
    lines[i].last() = QString::fromUtf8("\u2026");
  }
  return lines;
}

Block row(const std::vector<Column>& columns, const Cells& cells, const Style& style) {
  auto lines = wrapped_cells(columns, cells, style);
  qsizetype most = 1;
  for (const QStringList& cell : lines) most = std::max(most, cell.size());
  const double line_mm = leading * style.size_mm;
  Block block;
  block.height_mm = static_cast<double>(most) * line_mm + 2 * padding_mm;
  block.draw = [columns, lines = std::move(lines), style, line_mm](const Canvas& canvas, QRectF box) {
    double x = box.x();
    for (std::size_t i = 0; i < columns.size(); ++i) {
      double y = box.y() + padding_mm;
      for (const QString& line : lines[i]) {
        canvas.line({x, y, columns[i].width_mm - style.between_mm, line_mm}, line, style.size_mm, style.weight,
                    columns[i].align, style.colour);
        y += line_mm;
      }
      x += columns[i].width_mm;
    }
    canvas.rule(box.x(), box.bottom(), box.width(), ink::rule, 0.15);
  };
  return block;
}

}  // namespace

std::vector<Block> table(const std::vector<Column>& columns, const std::vector<Cells>& rows, TableStyle style) {
  Cells titles;
  for (const Column& column : columns) titles.push_back(column.title);
  const auto head = std::make_shared<Block>(
      row(columns, titles, {std::min(head_mm, style.size_mm), style.between_mm, Weight::plain, ink::quiet}));
  head->with_next = true;
  std::vector<Block> blocks{*head};
  for (const Cells& cells : rows) {
    blocks.push_back(row(columns, cells, {style.size_mm, style.between_mm, Weight::plain, ink::text}));
    blocks.back().head = head;
  }
  blocks[1 < blocks.size() ? 1 : 0].head = nullptr;  // the first row stays with its head anyway
  return blocks;
}

Block heading(const std::string& text) {
  Block block;
  block.height_mm = 7.5;
  block.with_next = true;
  block.draw = [text](const Canvas& canvas, QRectF box) {
    canvas.line({box.x(), box.y(), box.width(), 5.5}, qt(text), 4.0, Weight::bold, Align::left, ink::text);
  };
  return block;
}

Block gap(double height_mm) { return {height_mm, nullptr, false, true, nullptr}; }

std::vector<Block> paragraph(const std::string& text, double size_mm, QColor colour) {
  const Canvas canvas = measuring_canvas();
  std::vector<Block> blocks;
  for (const QString& line : wrapped(canvas, qt(text), canvas.font(size_mm), column_mm)) {
    Block block;
    block.height_mm = leading * size_mm;
    block.draw = [line, size_mm, colour](const Canvas& to, QRectF box) {
      to.line(box, line, size_mm, Weight::plain, Align::left, colour);
    };
    blocks.push_back(std::move(block));
  }
  return blocks;
}

}  // namespace probewright::pages
