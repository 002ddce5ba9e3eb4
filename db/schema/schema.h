#pragma once
#include <string>
#include <string_view>
#include <vector>

#include "db/connection.h"
#include "station/base/digest.h"

namespace probewright::db {

/// "PWLG": says in the file's header that it is a ledger of this program.
inline constexpr std::int64_t application_id = 0x50574c47;
/// The newest step of the layout that this program knows; `user_version` of the file.
inline constexpr std::int64_t newest_step = 3;

/// SQL that fills what a step added from the entries that a ledger has already; empty where there is nothing to fill.
std::string_view schema_filling(std::int64_t step);
/// SQL of one step, 1 to newest_step.
std::string_view schema_step(std::int64_t step);

/// One object of sqlite_schema: table, index, trigger or view, with its exact text.
struct SchemaObject {
  std::string type, name, table, sql;
  auto operator<=>(const SchemaObject&) const = default;
};

/// Objects of a database, sorted by type and name. Automatic indexes have an empty text.
std::vector<SchemaObject> schema_objects(Connection& connection);
/// What schema_objects must give after `step` steps, 1 to newest_step.
const std::vector<SchemaObject>& expected_schema(std::int64_t step = newest_step);
/// SHA-256 over type, name, table and text of each object in that order, each followed by a zero byte.
Digest schema_digest(const std::vector<SchemaObject>& objects);
/// The first difference between a file and the text expected after `step` steps, in words; empty where they agree.
struct SchemaDifference {
  std::string name, what;
};
SchemaDifference schema_difference(Connection& connection, std::int64_t step = newest_step);

}  // namespace probewright::db
