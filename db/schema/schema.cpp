#include "db/schema/schema.h"

#include <map>
#include <stdexcept>

#include "db/sha256.h"
#include "db/statement.h"

namespace probewright::db {
namespace {

constexpr std::string_view step_1 =
#include "db/schema/step_1.inc"
    ;
constexpr std::string_view step_2 =
#include "db/schema/step_2.inc"
    ;
constexpr std::string_view step_3 =
#include "db/schema/step_3.inc"
    ;

/// The layout after each step, the first one at place 0.
std::vector<std::vector<SchemaObject>> schemas_of_steps() {
  Connection scratch(":memory:", Access::create_read_write);
  std::vector<std::vector<SchemaObject>> after;
  for (std::int64_t step = 1; step <= newest_step; ++step) {
    scratch.run(std::string{schema_step(step)});
    after.push_back(schema_objects(scratch));
  }
  return after;
}

}  // namespace

std::string_view schema_step(std::int64_t step) {
  if (step == 1) return step_1;
  if (step == 2) return step_2;
  if (step == 3) return step_3;
  throw std::logic_error("no such step of the layout");
}

std::string_view schema_filling(std::int64_t step) {
  if (step != 3) return {};
  return "INSERT INTO entry_about(entry, subject, name)"
         " SELECT e.number, s.value, json_extract(e.body, '$.data.' || s.value) AS name"
         " FROM entry AS e, json_each('[\"lot\",\"person\",\"serial\"]') AS s"
         " WHERE e.kind NOT IN ('run_opened', 'run_closed')"
         " AND json_type(e.body, '$.data.' || s.value) = 'text' AND name <> ''";
}

std::vector<SchemaObject> schema_objects(Connection& connection) {
  Statement statement(connection,
                      "SELECT type, name, tbl_name, coalesce(sql, '') FROM sqlite_schema ORDER BY type, name");
  std::vector<SchemaObject> objects;
  for (Row row = statement.begin(); row.step();)
    objects.push_back({row.text(0), row.text(1), row.text(2), row.text(3)});
  return objects;
}

const std::vector<SchemaObject>& expected_schema(std::int64_t step) {
  static const std::vector<std::vector<SchemaObject>> expected = schemas_of_steps();
  return expected.at(static_cast<std::size_t>(step - 1));
}

Digest schema_digest(const std::vector<SchemaObject>& objects) {
  const std::string_view end{"\0", 1};
  Sha256 hash;
  for (const auto& [type, name, table, sql] : objects)
    hash.add(type).add(end).add(name).add(end).add(table).add(end).add(sql).add(end);
  return hash.finish();
}

SchemaDifference schema_difference(Connection& connection, std::int64_t step) {
  std::map<std::pair<std::string, std::string>, SchemaObject> found;
  for (SchemaObject& object : schema_objects(connection)) found[{object.type, object.name}] = object;
  for (const SchemaObject& expected : expected_schema(step)) {
    const auto at = found.find({expected.type, expected.name});
    if (at == found.end()) return {expected.name, expected.type + " is missing"};
    if (at->second != expected) return {expected.name, expected.type + " has another text"};
    found.erase(at);
  }
  if (found.empty()) return {};
  const SchemaObject& extra = found.begin()->second;
  return {extra.name, extra.type + " does not belong here"};
}

}  // namespace probewright::db
