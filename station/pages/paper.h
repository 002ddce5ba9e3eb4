#pragma once
#include <QRectF>
#include <functional>
#include <memory>
#include <string>
#include <vector>

#include "station/base/result.h"
#include "station/pages/canvas.h"

class QByteArray;

/// A4 pages filled from top to bottom with blocks. Private to pages. Main thread only.
namespace probewright::pages {

inline constexpr double paper_width_mm = 210.0, paper_height_mm = 297.0;
inline constexpr double paper_left_mm = 20.0, paper_top_mm = 18.0, paper_bottom_mm = 20.0;
inline constexpr double column_mm = paper_width_mm - 2 * paper_left_mm;

/// What is never torn: a line, a row of a table, a plot.
struct Block {
  double height_mm = 0.0;
  std::function<void(const Canvas&, QRectF box_mm)> draw;
  bool with_next = false;             ///< a heading: it goes to the next page rather than stand alone at the foot
  bool space = false;                 ///< nothing but white: left out where a page would begin with it
  std::shared_ptr<const Block> head;  ///< drawn again above this block where it opens a page; may be null
};

struct Paper {
  std::string title;      ///< of the file
  std::string foot;       ///< left half of each page's foot
  std::string overprint;  ///< across each page; empty: none
  std::vector<Block> blocks;
};

/// The blocks page by page, heads put in again. No page is empty; at least one there is.
std::vector<std::vector<const Block*>> paginated(const std::vector<Block>& blocks, double room_mm);

/// A canvas to measure text with, sized as the pages will be.
Canvas measuring_canvas();

/// The pages as PDF. Sets `pages` to their number.
QByteArray pdf_of(const Paper& paper, int& pages);

}  // namespace probewright::pages
