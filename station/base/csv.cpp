#include "station/base/csv.h"

#include <algorithm>
#include <limits>
#include <optional>
#include <set>

#include "station/base/numbers.h"
#include "station/base/utf8.h"

namespace probewright {
namespace {

constexpr std::size_t max_faults = 50;
constexpr std::size_t max_columns = 1000;

/// A cell knows its place by offsets; a column in characters is counted only when a fault asks for it, since counting
/// for every cell of a long line would take the square of its length.
struct Cell {
  std::string text;
  std::size_t line, line_start, at;
};
using Record = std::vector<Cell>;

std::string_view trimmed(std::string_view text) {
  while (!text.empty() && (text.front() == ' ' || text.front() == '\t')) text.remove_prefix(1);
  while (!text.empty() && (text.back() == ' ' || text.back() == '\t')) text.remove_suffix(1);
  return text;
}

class FaultList {
 public:
  FaultList(std::string_view file, std::string_view text) : file_(file), text_(text) {}
  void add(const Cell& cell, std::string_view id,
           std::initializer_list<std::pair<std::string, std::string>> arguments = {}) {
    if (full()) return;
    add(cell.line, 1 + count_characters(text_.substr(cell.line_start, cell.at - cell.line_start)), id, arguments);
  }
  void add(std::size_t line, std::size_t column, std::string_view id,
           std::initializer_list<std::pair<std::string, std::string>> arguments = {}) {
    if (full()) return;
    faults_.emplace_back(id, file_ + ":" + std::to_string(line) + ":" + std::to_string(column), arguments);
  }
  bool full() const { return faults_.size() >= max_faults; }
  bool empty() const { return faults_.empty(); }
  Problems take() { return std::move(faults_); }

 private:
  std::string file_;
  std::string_view text_;
  Problems faults_;
};

/// Thrown at a line with more cells than any table has; the rest is not read.
struct TooWide {
  Cell cell;
};

/// Splits text into records by RFC 4180; knows the place of every cell.
class Splitter {
 public:
  Splitter(std::string_view text, FaultList& faults) : text_(text), faults_(faults) {}

  /// The next record that is neither a comment nor an empty line.
  std::optional<Record> next() {
    while (at_ < text_.size()) {
      if (peek() == '#') {
        skip_line();
      } else if (!line_ends()) {
        return record();
      }
    }
    return std::nullopt;
  }

 private:
  char peek() const { return at_ < text_.size() ? text_[at_] : '\0'; }
  Cell here() const { return {{}, line_, line_start_, at_}; }

  /// Steps over an end of line, LF or CRLF, if one stands here.
  bool line_ends() {
    const std::string_view rest = text_.substr(at_);
    const std::size_t length = rest.starts_with("\r\n") ? 2 : rest.starts_with('\n') ? 1 : 0;
    at_ += length;
    if (length != 0) start_line();
    return length != 0;
  }
  void start_line() {
    ++line_;
    line_start_ = at_;
  }
  void skip_line() {
    while (at_ < text_.size() && !line_ends()) ++at_;
  }

  Record record() {
    Record cells;
    for (;;) {
      cells.push_back(peek() == '"' ? quoted() : plain());
      if (cells.size() > max_columns) throw TooWide{cells.back()};
      if (at_ >= text_.size() || line_ends()) return cells;
      ++at_;  // the comma
    }
  }

  bool cell_ends() const {
    const std::string_view rest = text_.substr(at_);
    return rest.empty() || rest.front() == ',' || rest.front() == '\n' || rest.starts_with("\r\n");
  }

  Cell plain() {
    Cell cell = here();
    bool told = false;
    while (!cell_ends()) {
      if (peek() == '"' && !told) faults_.add(here(), "csv_quote"), told = true;
      cell.text += text_[at_++];
    }
    return cell;
  }

  Cell quoted() {
    Cell cell = here();
    ++at_;
    for (;;) {
      if (at_ >= text_.size()) {
        faults_.add(cell, "csv_quote");  // opened here, never closed
        return cell;
      }
      if (text_.substr(at_).starts_with("\"\"")) {
        cell.text += '"';
        at_ += 2;
      } else if (peek() == '"') {
        break;
      } else {
        cell.text += text_[at_++];
        if (cell.text.back() == '\n') start_line();
      }
    }
    ++at_;
    if (!cell_ends()) faults_.add(here(), "csv_quote");
    while (!cell_ends()) ++at_;
    return cell;
  }

  std::string_view text_;
  FaultList& faults_;
  std::size_t at_ = 0, line_ = 1, line_start_ = 0;
};

bool holds(const std::vector<std::string>& names, std::string_view name) {
  return std::find(names.begin(), names.end(), name) != names.end();
}

/// Refuses what no table of text may hold: bytes that are not UTF-8, control characters.
bool is_text(std::string_view text, FaultList& faults) {
  const auto tell = [&](std::size_t at, std::string_view id) {
    const std::string_view before = text.substr(0, at);
    const auto line_start = before.rfind('\n') + 1;  // npos + 1 is 0
    const auto line = 1 + std::count(before.begin(), before.end(), '\n');
    faults.add(static_cast<std::size_t>(line), 1 + count_characters(before.substr(line_start)), id);
    return false;
  };
  if (const auto at = first_bad_utf8(text); at != std::string_view::npos) return tell(at, "text_not_utf8");
  if (const auto at = first_control_character(text); at != std::string_view::npos)
    return tell(at, "text_control_character");
  return true;
}

void read_header(const Record& record, const CsvRules& rules, CsvTable& table, FaultList& faults) {
  std::set<std::string> seen;
  for (const Cell& cell : record) {
    std::string name{trimmed(cell.text)};
    if (!seen.insert(name).second) faults.add(cell, "csv_duplicate_column", {{"column", name}});
    const bool known =
        rules.any_column || holds(rules.needed, name) || holds(rules.optional, name) || holds(rules.text_columns, name);
    if (!known) faults.add(cell, "csv_unknown_column", {{"column", name}});
    table.header.push_back(std::move(name));
  }
  for (const std::string& name : rules.needed)
    if (!seen.contains(name)) faults.add(record.front().line, 1, "csv_missing_column", {{"column", name}});
}

/// Whether every cell of this column must be a number: columns that the rules name and do not call text.
bool must_be_number(const std::string& name, const CsvRules& rules) {
  return !holds(rules.text_columns, name) && (holds(rules.needed, name) || holds(rules.optional, name));
}

void read_row(Record record, const CsvRules& rules, CsvTable& table, FaultList& faults) {
  if (record.size() != table.header.size()) {
    faults.add(record.front().line, 1, "csv_ragged",
               {{"found", std::to_string(record.size())}, {"wanted", std::to_string(table.header.size())}});
    return;
  }
  for (std::size_t i = 0; i < record.size(); ++i) {
    const auto number = parse_double(trimmed(record[i].text));
    if (!number && must_be_number(table.header[i], rules))
      faults.add(record[i], "csv_not_a_number", {{"text", record[i].text}, {"column", table.header[i]}});
    table.columns[i].push_back(number.value_or(std::numeric_limits<double>::quiet_NaN()));
    table.texts[i].push_back(std::move(record[i].text));
  }
}

void read_table(std::string_view text, const CsvRules& rules, CsvTable& table, FaultList& faults) {
  Splitter splitter{text, faults};
  const auto header = splitter.next();
  if (!header) return faults.add(1, 1, "csv_empty");
  read_header(*header, rules, table, faults);
  table.columns.resize(table.header.size());
  table.texts.resize(table.header.size());
  std::size_t rows = 0;
  for (auto row = splitter.next(); row && !faults.full(); row = splitter.next(), ++rows)
    read_row(std::move(*row), rules, table, faults);
  if (rows == 0 && faults.empty()) faults.add(header->front().line, 1, "csv_empty");
}

}  // namespace

int CsvTable::column(std::string_view name) const {
  const auto found = std::find(header.begin(), header.end(), name);
  return found == header.end() ? -1 : static_cast<int>(found - header.begin());
}

ResultOrFaults<CsvTable> read_csv(std::string_view text, const CsvRules& rules, std::string_view file) {
  if (text.size() > rules.max_bytes)
    return Problems{
        {"file_too_large", file, {{"size", std::to_string(text.size())}, {"bound", std::to_string(rules.max_bytes)}}}};
  if (text.starts_with("\xEF\xBB\xBF")) text.remove_prefix(3);  // the mark that spreadsheets put before UTF-8
  FaultList faults{file, text};
  CsvTable table;
  try {
    if (is_text(text, faults)) read_table(text, rules, table, faults);
  } catch (const TooWide& too_wide) {
    faults.add(too_wide.cell, "csv_too_wide", {{"bound", std::to_string(max_columns)}});
  }
  if (!faults.empty()) return faults.take();
  return table;
}

}  // namespace probewright
