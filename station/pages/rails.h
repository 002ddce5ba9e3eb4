#pragma once
#include <string>
#include <vector>

#include "station/pages/paper.h"
#include "station/trace/rails.h"

/// Margin rails as blocks. Private to pages. Main thread only.
namespace probewright::pages {

/// All marks on one scale, one a row: the acceptance limits are the rails at -1 and +1, the guard strips lie outside
/// them, each mark carries its uncertainty. `nearest` is the check that is named in bold; empty: none. The scale stands
/// above and again on each page. At least one mark.
std::vector<Block> margin_rails(const std::vector<trace::RailMark>& marks, const std::string& nearest);

}  // namespace probewright::pages
