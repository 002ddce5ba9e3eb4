#pragma once
#include <map>
#include <string>
#include <string_view>
#include <vector>

/// Published data in tests/reference; tests/reference/INDEX.md says what each file is and where it comes from.
namespace reference {

/// Full path of a file of tests/reference, "nist_strd/Norris.csv".
std::string path(std::string_view name);

/// A table of the folder: comma-separated, no quotes, '#' starts a comment, the first other line is the header.
/// It has its own small reader, so that a mistake in ours cannot bend what ours is held against.
class Table {
 public:
  std::vector<std::string> header;
  std::vector<std::vector<std::string>> rows;
  std::map<std::string, std::string>
      notes;  ///< "# name = value" comments: {"certified_B0", "-0.26..."}; the name is one word

  /// A column as written, or as numbers (an empty cell is NaN). Throws std::runtime_error: no such column, not a
  /// number.
  std::vector<std::string> texts(std::string_view column) const;
  std::vector<double> numbers(std::string_view column) const;
  /// The cell of `wanted` in the first row whose `column` holds `key`. Throws std::runtime_error: no such row or
  /// column.
  std::string text_where(std::string_view column, std::string_view key, std::string_view wanted) const;
  double number_where(std::string_view column, std::string_view key, std::string_view wanted) const;

 private:
  std::size_t index(std::string_view column) const;
};

/// Throws std::runtime_error when the file is not there, has no rows, or a row is not as long as the header.
Table load(std::string_view name);

/// A number at the front of a text ("0.92", "-0.262323073774029 , ..."). Throws std::runtime_error if there is none.
double number_in(std::string_view text);

}  // namespace reference
