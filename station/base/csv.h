#pragma once
#include <string>
#include <string_view>
#include <vector>

#include "station/base/result.h"

namespace probewright {

/// A table of numbers with named columns, as a lab's own CSV file holds it.
struct CsvTable {
  std::vector<std::string> header;
  std::vector<std::vector<double>> columns;     ///< same order as header, all of one length
  std::vector<std::vector<std::string>> texts;  ///< the same cells as written
  /// Index of a column or -1.
  int column(std::string_view name) const;
};

struct CsvRules {
  std::vector<std::string> needed;        ///< columns that must be there
  std::vector<std::string> optional;      ///< columns that may be there; any other column is refused unless any_column
  std::vector<std::string> text_columns;  ///< columns that need not be numbers
  bool any_column = false;
  std::size_t max_bytes = 64u << 20;
};

/// Reads RFC 4180 text (comma, quotes, CRLF or LF, UTF-8 BOM allowed); lines that start with '#' are comments.
/// `file` names the text in faults. Errors, all of them with line and column (at most 50): csv_missing_column,
/// csv_unknown_column, csv_duplicate_column, csv_ragged, csv_not_a_number (also nan and inf), csv_empty, csv_quote,
/// csv_too_wide (over 1000 columns), text_not_utf8, text_control_character; file_too_large.
/// Blanks around numbers and column names do not count. A cell that need not be a number (text columns, columns that no
/// rule names) is NaN in `columns` when it is none.
ResultOrFaults<CsvTable> read_csv(std::string_view text, const CsvRules& rules, std::string_view file);

}  // namespace probewright
