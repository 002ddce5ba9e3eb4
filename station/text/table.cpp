#include "station/text/table.h"

#include <algorithm>
#include <stdexcept>

#include "station/base/utf8.h"

namespace probewright::text {
namespace {

std::string padded(const std::string& cell, std::size_t width, Side side) {
  const std::size_t characters = count_characters(cell);
  const std::string blanks(width > characters ? width - characters : 0, ' ');
  return side == Side::right ? blanks + cell : cell + blanks;
}

}  // namespace

Table::Table(std::vector<std::string> heads, std::vector<Side> sides) : sides_(std::move(sides)) {
  sides_.resize(heads.size(), Side::left);
  rows_.push_back(std::move(heads));
}

void Table::add(std::vector<std::string> cells) {
  if (cells.size() > sides_.size()) throw std::logic_error("a row has more cells than the table has columns");
  cells.resize(sides_.size());
  rows_.push_back(std::move(cells));
}

std::string Table::text(int indent) const {
  std::vector<std::size_t> widths(sides_.size(), 0);
  for (const auto& row : rows_)
    for (std::size_t i = 0; i < row.size(); ++i) widths[i] = std::max(widths[i], count_characters(row[i]));
  std::string all;
  for (const auto& row : rows_) {
    std::string line(static_cast<std::size_t>(indent), ' ');
    for (std::size_t i = 0; i < row.size(); ++i) line += (i > 0 ? "  " : "") + padded(row[i], widths[i], sides_[i]);
    line.erase(line.find_last_not_of(' ') + 1);
    all += (all.empty() ? "" : "\n") + line;
  }
  return all;
}

}  // namespace probewright::text
