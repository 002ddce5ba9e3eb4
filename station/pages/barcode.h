#pragma once
#include <string>
#include <vector>

#include "station/base/result.h"

namespace probewright::pages {

/// A code as black and white modules, without quiet zone. A linear code has one row.
struct Modules {
  int width = 0;
  int height = 0;
  std::vector<bool> black;  ///< width * height, row by row from the top
  bool at(int column, int row) const { return black[static_cast<std::size_t>(row * width + column)]; }
};

/// GS1 DataMatrix (ISO/IEC 16022, ECC 200, square) of elements with their AIs in square brackets, "[01]...[21]...".
/// Errors: code_not_made (what does not fit the symbol or the rules of its elements). Any thread.
Result<Modules> gs1_data_matrix(const std::string& elements_in_brackets);

/// Code 128 (ISO/IEC 15417) of printable ASCII. Errors: code_not_made. Any thread.
Result<Modules> code_128(const std::string& text);

}  // namespace probewright::pages
