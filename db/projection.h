#pragma once
#include <functional>
#include <optional>
#include <span>
#include <string>
#include <variant>
#include <vector>

#include "station/base/canonical_json.h"
#include "station/base/digest.h"

// Tables whose rows are made from entry bodies alone: one list says, for each column, where in the body it comes from.
// The store writes by this list and `verify` compares by it.
namespace probewright::db {

/// Where a column comes from.
enum class Source {
  entry_number,   ///< the number of the entry itself
  place,          ///< the item's place in its list, from 0
  item,           ///< the item of the list, an integer
  text,           ///< member `key`, a string
  integer,        ///< member `key`, an integer
  flag,           ///< member `key`, true or false, as 1 or 0
  decimal,        ///< member `key`, a number written as a string, or null
  digest,         ///< member `key`, a SHA-256 as 64 hexadecimal digits
  maybe_digest,   ///< the same, or null
  words,          ///< member `key`, a list of strings, joined with ", "
  digested_text,  ///< not in the body: text whose SHA-256 is member `key`
  about_subject,  ///< which of lot, person, serial the row is for
  about_name      ///< the member of data with that name
};

struct ProjectedColumn {
  const char* name;
  Source source;
  const char* key;  ///< JSON key, or "" where the source needs none
};

struct ProjectedTable {
  const char* table;
  const char* kind;       ///< the kind of entry that makes its rows; "": every kind but run_opened and run_closed
  const char* list;       ///< member of data with one row each, or "" for one row an entry
  const char* entry_key;  ///< the column that holds the entry's number
  std::span<const ProjectedColumn> columns;
  int since = 1;  ///< the step of the layout that made the table
};

/// All of them, in the order in which rows must be put in.
std::span<const ProjectedTable> projected_tables();
/// Those that a ledger has after `step` steps of the layout.
std::span<const ProjectedTable> projected_tables_at(std::int64_t step);
/// Whether entries of this kind make rows of the table.
bool makes_rows(const ProjectedTable& table, std::string_view kind);
/// True where entries of this kind have rows in a table for this kind alone, so that only their own function may add
/// them.
bool is_projected(std::string_view kind);

/// One cell: NULL, INTEGER, REAL, TEXT or BLOB.
using Cell = std::variant<std::nullptr_t, std::int64_t, double, std::string, Bytes>;
/// For people, in faults.
std::string shown(const Cell& cell);

/// Rows that an entry makes in a table. `digested` gives the text for Source::digested_text columns.
/// Nothing where the body lacks what a column needs.
std::optional<std::vector<std::vector<Cell>>> project(const ProjectedTable& table, std::int64_t entry, const Body& data,
                                                      const std::string& digested);

/// "INSERT INTO t(a, b) VALUES (?, ?)"
std::string insert_sql(const ProjectedTable& table);
/// Rows of one entry, in the order of `project`.
std::string select_sql(const ProjectedTable& table);

}  // namespace probewright::db
