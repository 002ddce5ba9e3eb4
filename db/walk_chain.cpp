#include <map>

#include "db/chain.h"
#include "db/hex.h"
#include "db/projection.h"
#include "db/sha256.h"
#include "db/statement.h"
#include "db/walk.h"

namespace probewright::db {
namespace {

Cell cell_of(const Row& row, int column) {
  if (row.is_null(column)) return nullptr;
  if (row.is_integer(column)) return row.integer(column);
  if (row.is_real(column)) return row.real(column);
  if (row.is_text(column)) return row.text(column);
  return row.bytes(column);
}

Fault entry_fault(std::int64_t number, std::string column, std::string what) {
  return {number, "entry", std::to_string(number), std::move(column), std::move(what)};
}

/// The body's own members against the columns beside it. The row holds number, time, kind, who, body, hash.
std::optional<Fault> head_fault(const Row& row, std::int64_t number, const Body& body) {
  if (!body.object() || body.object()->size() != 6 || !body.find("data"))
    return entry_fault(number, "body", "does not hold data, kind, number, recipe, time and who alone");
  if (body.number("recipe", -1) != recipe) return entry_fault(number, "body", "names a recipe that is not known");
  if (body.number("number", -1) != number) return entry_fault(number, "number", "is not the number in the body");
  constexpr std::pair<int, const char*> texts[] = {{1, "time"}, {2, "kind"}, {3, "who"}};
  for (const auto& [column, name] : texts) {
    const Body* member = body.find(name);
    if (!member || !member->string() || !row.is_text(column) || row.text_view(column) != *member->string())
      return entry_fault(number, name, "is " + shown(cell_of(row, column)) + ", not what the body says");
  }
  return std::nullopt;
}

std::string row_name(const ProjectedTable& table, std::int64_t number, std::size_t place) {
  const std::string name = std::string{table.entry_key} + " " + std::to_string(number);
  return *table.list ? name + ", place " + std::to_string(place) : name;
}

/// True where a cell is what the body says; text that only its digest stands for is digested.
bool agrees(const ProjectedColumn& column, const Cell& found, const Cell& expected, const Body& data) {
  if (column.source != Source::digested_text) return found == expected;
  const auto* text = std::get_if<std::string>(&found);
  return text && to_hex(sha256(*text)) == data.text(column.key);
}

/// Rows of one entry in one table.
std::optional<Fault> rows_fault(Statement& select, const ProjectedTable& table, std::int64_t number, const Body& data) {
  const auto expected = project(table, number, data, "");
  if (!expected) return entry_fault(number, "body", std::string{"lacks what table "} + table.table + " shows");
  Row row = select.begin();
  row.values(number);
  std::size_t place = 0;
  for (; row.step(); ++place) {
    if (place == expected->size())
      return Fault{number, table.table, row_name(table, number, place), "", "is a row too many"};
    for (std::size_t c = 0; c < table.columns.size(); ++c) {
      const Cell found = cell_of(row, static_cast<int>(c));
      const Cell& wanted = (*expected)[place][c];
      if (agrees(table.columns[c], found, wanted, data)) continue;
      const bool digested = table.columns[c].source == Source::digested_text;
      return Fault{number, table.table, row_name(table, number, place), table.columns[c].name,
                   digested ? "does not have the digest that the entry says"
                            : "is " + shown(found) + ", the entry says " + shown(wanted)};
    }
  }
  if (place < expected->size()) return Fault{number, table.table, row_name(table, number, place), "", "is missing"};
  return std::nullopt;
}

/// One statement for each projected table, found by the kind of entry.
class Projections {
 public:
  explicit Projections(Connection& connection) {
    for (const ProjectedTable& table : projected_tables())
      by_kind_[table.kind].push_back({&table, std::make_unique<Statement>(connection, select_sql(table))});
  }
  std::optional<Fault> fault(const std::string& kind, std::int64_t number, const Body& data) {
    const auto found = by_kind_.find(kind);
    if (found == by_kind_.end()) return std::nullopt;
    for (auto& [table, select] : found->second)
      if (auto fault = rows_fault(*select, *table, number, data)) return fault;
    return std::nullopt;
  }

 private:
  std::map<std::string, std::vector<std::pair<const ProjectedTable*, std::unique_ptr<Statement>>>> by_kind_;
};

/// One entry: what follows from the hash before it, and what its columns and rows say.
std::optional<Fault> entry_fault_of(const Row& row, std::int64_t number, const Digest& previous,
                                    Projections& projections) {
  if (row.integer(0) != number) return entry_fault(number, "number", "is missing");
  if (!row.is_text(4)) return entry_fault(number, "body", "is not text");
  if (!row.is_blob(5) || row.blob(5).size() != 32) return entry_fault(number, "hash", "is not 32 bytes");
  if (entry_hash(previous, row.text_view(4)) != row.digest(5))
    return entry_fault(number, "hash", "is not that of the hash before it and this body");
  const auto body = parse_body(row.text_view(4));
  if (!body) return entry_fault(number, "body", "is not canonical: " + body.error().what());
  if (auto fault = head_fault(row, number, *body)) return fault;
  if ((number == 1) != (row.text_view(2) == "ledger_begun"))
    return entry_fault(number, "kind", "ledger_begun is the first entry and no other");
  return projections.fault(row.text(2), number, *body->find("data"));
}

std::optional<Digest> hash_before(Connection& connection, std::int64_t from) {
  if (from <= 1) return Digest{};
  Row row = connection.begin("SELECT hash FROM entry WHERE number = ?");
  if (!row.values(from - 1).step()) return std::nullopt;
  return row.digest(0);
}

/// The lowest key of a table's rows for which `counterpart` finds nothing.
std::optional<std::int64_t> lowest_stray(Connection& connection, const std::string& table, const std::string& key,
                                         const std::string& counterpart) {
  Statement statement(connection, "SELECT min(" + key + ") FROM " + table + " AS t WHERE NOT EXISTS (SELECT 1 FROM " +
                                      counterpart + " = t." + key + ")");
  Row row = statement.begin();
  if (!row.step() || row.is_null(0)) return std::nullopt;
  return row.integer(0);
}

Fault stray(std::int64_t entry, const std::string& table, const std::string& key, std::int64_t value) {
  return {entry, table, key + " " + std::to_string(value), key, "belongs to nothing"};
}

}  // namespace

ChainWalk walk_chain(Connection& connection, std::int64_t from) {
  ChainWalk walk;
  const auto before = hash_before(connection, from);
  if (!before) {
    walk.fault = entry_fault(from - 1, "number", "is missing");
    return walk;
  }
  walk.seal = {from - 1, *before};
  Projections projections(connection);
  Statement entries(connection,
                    "SELECT number, time, kind, who, body, hash FROM entry WHERE number >= ? ORDER BY number");
  Row row = entries.begin();
  for (row.values(from); row.step();) {
    const std::int64_t number = walk.seal.entry + 1;
    walk.fault = entry_fault_of(row, number, walk.seal.hash, projections);
    if (walk.fault) return walk;
    walk.seal = {number, row.digest(5)};
    ++walk.entries;
  }
  if (walk.seal.entry == 0) walk.fault = entry_fault(1, "number", "is missing");
  return walk;
}

std::optional<Fault> stray_projected_row(Connection& connection) {
  std::optional<Fault> first;
  for (const ProjectedTable& table : projected_tables()) {
    const std::string of_kind = "entry AS e WHERE e.kind = '" + std::string{table.kind} + "' AND e.number";
    const auto key = lowest_stray(connection, table.table, table.entry_key, of_kind);
    if (key && (!first || *key < first->entry)) first = stray(*key, table.table, table.entry_key, *key);
  }
  return first;
}

std::optional<Fault> stray_run_row(Connection& connection) {
  for (const char* table : {"reading", "capture"})
    if (const auto run = lowest_stray(connection, table, "run", "run_opened AS o WHERE o.run"))
      return stray(*run, table, "run", *run);
  if (const auto capture = lowest_stray(connection, "capture_bytes", "capture", "capture AS c WHERE c.number"))
    return stray(0, "capture_bytes", "capture", *capture);
  return std::nullopt;
}

}  // namespace probewright::db
