#pragma once
#include <string>
#include <vector>

#include "station/base/zone.h"
#include "station/pages/paper.h"

/// A serial's life drawn along time. Private to pages. Main thread only.
namespace probewright::pages {

struct LifeMark {
  UtcTime at;
  std::string verdict;  ///< of a run: "pass", "fail", "void", empty: open
  std::string words;    ///< beside the mark, short
  bool is_run = true;   ///< else an entry such as a label: a small tick below the line
};

/// Marks in the order of their entries, from left to right at equal steps, eight in a row; between them how much time
/// went by, below them the zone's clock. At least one mark.
std::vector<Block> life_line(const std::vector<LifeMark>& marks, const Zone& zone);

}  // namespace probewright::pages
