#pragma once
#include <string>
#include <vector>

#include "station/pages/paper.h"

/// Blocks of text and tables. Private to pages. Main thread only.
namespace probewright::pages {

struct Column {
  std::string title;
  double width_mm = 0.0;
  Align align = Align::left;
};

using Cells = std::vector<std::string>;

/// How a table is set.
struct TableStyle {
  double size_mm = 3.1;     ///< of its text: 8.8 points
  double between_mm = 4.5;  ///< of neighbouring columns
};

/// A head and a block for each row. Cells wrap within their column; the head stands again on each page.
std::vector<Block> table(const std::vector<Column>& columns, const std::vector<Cells>& rows, TableStyle style = {});

/// A heading that stays with what follows it.
Block heading(const std::string& text);
/// White space.
Block gap(double height_mm);
/// One block a line, wrapped at the column's width.
std::vector<Block> paragraph(const std::string& text, double size_mm, QColor colour);

}  // namespace probewright::pages
