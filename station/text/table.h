#pragma once
#include <string>
#include <vector>

namespace probewright::text {

/// Which way the cells of a column stand.
enum class Side { left, right };

/// Text in columns, two blanks apart; a column is as wide as its widest cell, counted in characters.
class Table {
 public:
  /// `heads` name the columns. An empty table of no heads prints nothing.
  explicit Table(std::vector<std::string> heads, std::vector<Side> sides = {});
  /// One row; cells that are left out are empty. Throws std::logic_error for more cells than columns.
  void add(std::vector<std::string> cells);
  bool empty() const { return rows_.size() == 1; }
  /// The whole, each line moved in by `indent` blanks, without blanks at the ends of lines or a line feed at the end.
  std::string text(int indent = 0) const;

 private:
  std::vector<std::vector<std::string>> rows_;  ///< the first one holds the heads
  std::vector<Side> sides_;
};

}  // namespace probewright::text
