#include "tests/support/reference.h"

#include <algorithm>
#include <charconv>
#include <fstream>
#include <limits>
#include <stdexcept>

namespace reference {
namespace {

std::vector<std::string> split(std::string_view line) {
  std::vector<std::string> cells;
  for (;;) {
    const auto comma = line.find(',');
    cells.emplace_back(line.substr(0, comma));
    if (comma == std::string_view::npos) return cells;
    line.remove_prefix(comma + 1);
  }
}

void keep_note(std::string_view comment, std::map<std::string, std::string>& notes) {
  const auto sign = comment.find(" = ");
  if (sign == std::string_view::npos) return;
  const std::string_view name = comment.substr(0, sign);
  if (name.find(' ') == std::string_view::npos) notes.emplace(name, comment.substr(sign + 3));
}

}  // namespace

std::string path(std::string_view name) { return std::string{PW_REFERENCE_DIR} + "/" + std::string{name}; }

double number_in(std::string_view text) {
  while (text.starts_with(' ')) text.remove_prefix(1);
  double value = 0.0;
  if (std::from_chars(text.data(), text.data() + text.size(), value).ec != std::errc{})
    throw std::runtime_error("reference: no number in \"" + std::string{text} + "\"");
  return value;
}

Table load(std::string_view name) {
  std::ifstream file{path(name)};
  if (!file) throw std::runtime_error("reference: cannot read " + path(name));
  Table table;
  for (std::string line; std::getline(file, line);) {
    if (line.starts_with("# ")) {
      keep_note(std::string_view{line}.substr(2), table.notes);
    } else if (line.empty() || line.starts_with('#')) {
      continue;
    } else if (table.header.empty()) {
      table.header = split(line);
    } else {
      table.rows.push_back(split(line));
      if (table.rows.back().size() != table.header.size())
        throw std::runtime_error("reference: ragged line in " + path(name) + ": " + line);
    }
  }
  if (table.rows.empty()) throw std::runtime_error("reference: no rows in " + path(name));
  return table;
}

std::size_t Table::index(std::string_view column) const {
  const auto found = std::find(header.begin(), header.end(), column);
  if (found == header.end()) throw std::runtime_error("reference: no column " + std::string{column});
  return static_cast<std::size_t>(found - header.begin());
}

std::vector<std::string> Table::texts(std::string_view column) const {
  const std::size_t at = index(column);
  std::vector<std::string> cells;
  for (const auto& row : rows) cells.push_back(row[at]);
  return cells;
}

std::vector<double> Table::numbers(std::string_view column) const {
  std::vector<double> values;
  for (const std::string& cell : texts(column))
    values.push_back(cell.empty() ? std::numeric_limits<double>::quiet_NaN() : number_in(cell));
  return values;
}

std::string Table::text_where(std::string_view column, std::string_view key, std::string_view wanted) const {
  const std::size_t by = index(column);
  const auto row = std::find_if(rows.begin(), rows.end(), [&](const auto& cells) { return cells[by] == key; });
  if (row == rows.end()) throw std::runtime_error("reference: no row " + std::string{key});
  return (*row)[index(wanted)];
}

double Table::number_where(std::string_view column, std::string_view key, std::string_view wanted) const {
  return number_in(text_where(column, key, wanted));
}

}  // namespace reference
