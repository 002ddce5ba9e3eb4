#include <limits>
#include <memory>
#include <vector>

#include "db/chain.h"
#include "db/glance.h"
#include "db/hex.h"
#include "db/projection.h"
#include "db/sha256.h"
#include "db/statement.h"
#include "db/walk.h"
#include "station/base/numbers.h"

namespace probewright::db {

/// Statements for the projected tables, found by the kind of entry, and how many rows agreed since the last count.
class Projections {
 public:
  explicit Projections(Connection& connection);
  std::optional<Fault> fault(std::string_view kind, std::int64_t number, const Body& data);
  /// Whether the rows are surely those of the entry, told without making any of them. False says nothing: `fault` must
  /// look.
  bool surely_agree(std::string_view kind, std::int64_t number, const Glance& body, std::uint32_t data);
  /// A row of a table whose entry's number lies from first to last and that no entry has made: looked for only where
  /// there are more rows than agreed.
  std::optional<Fault> stray(Connection& connection, std::int64_t first, std::int64_t last);
  void count_anew();

 private:
  struct Projected {
    const ProjectedTable* table;
    std::unique_ptr<Statement> select, count;
    std::int64_t agreed = 0;
  };
  std::vector<Projected> tables_;
};

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

/// Rows of one entry in one table; how many there must be is added to `rows`.
std::optional<Fault> rows_fault(Statement& select, const ProjectedTable& table, std::int64_t number, const Body& data,
                                std::int64_t& rows) {
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
  rows += static_cast<std::int64_t>(place);
  return std::nullopt;
}

bool is_hex_of(std::string_view text, std::span<const std::byte> bytes) {
  constexpr std::string_view digits = "0123456789abcdef";
  if (text.size() != 2 * bytes.size()) return false;
  for (std::size_t i = 0; i < bytes.size(); ++i) {
    const auto byte = std::to_integer<unsigned>(bytes[i]);
    if (text[2 * i] != digits[byte >> 4] || text[2 * i + 1] != digits[byte & 15]) return false;
  }
  return true;
}

using Node = Glance::Node;

bool is_text_of(const Row& row, int column, const Node& node) {
  return node.kind == Glance::Kind::string && row.is_text(column) && row.text_view(column) == node.text;
}

bool is_integer_of(const Row& row, int column, const Node& node) {
  return node.kind == Glance::Kind::integer && row.is_integer(column) && row.integer(column) == Glance::integer(node);
}

bool is_flag_of(const Row& row, int column, const Node& node) {
  if (!row.is_integer(column)) return false;
  return (node.kind == Glance::Kind::yes && row.integer(column) == 1) ||
         (node.kind == Glance::Kind::no && row.integer(column) == 0);
}

bool is_decimal_of(const Row& row, int column, const Node& node) {
  if (node.kind == Glance::Kind::null) return row.is_null(column);
  const auto value = node.kind == Glance::Kind::string ? parse_double(node.text) : std::nullopt;
  return value && row.is_real(column) && row.real(column) == *value;
}

bool is_digest_of(const Row& row, int column, const Node& node) {
  return node.kind == Glance::Kind::string && row.is_blob(column) && row.blob(column).size() == 32 &&
         is_hex_of(node.text, row.blob(column));
}

/// Only the empty list is simple enough.
bool are_no_words(const Row& row, int column, const Node& node, std::uint32_t place) {
  return node.kind == Glance::Kind::array && node.end == place + 1 && row.is_text(column) &&
         row.text_view(column).empty();
}

bool is_member_of(const ProjectedColumn& column, const Row& row, int c, const Node& node, std::uint32_t place) {
  switch (column.source) {
    case Source::text:
      return is_text_of(row, c, node);
    case Source::integer:
      return is_integer_of(row, c, node);
    case Source::flag:
      return is_flag_of(row, c, node);
    case Source::decimal:
      return is_decimal_of(row, c, node);
    case Source::maybe_digest:
      return node.kind == Glance::Kind::null ? row.is_null(c) : is_digest_of(row, c, node);
    case Source::digest:
      return is_digest_of(row, c, node);
    case Source::words:
      return are_no_words(row, c, node, place);
    default:
      return false;
  }
}

/// Whether a row is surely the one that `from` (data, or an item of its list) makes.
bool is_row_of(const ProjectedTable& table, const Row& row, std::int64_t number, std::int64_t at, const Glance& body,
               std::uint32_t from) {
  for (std::size_t i = 0; i < table.columns.size(); ++i) {
    const ProjectedColumn& column = table.columns[i];
    const int c = static_cast<int>(i);
    if (column.source == Source::entry_number || column.source == Source::place) {
      if (!row.is_integer(c) || row.integer(c) != (column.source == Source::place ? at : number)) return false;
      continue;
    }
    if (body.at(from).kind != Glance::Kind::object) return false;
    const auto member = body.find(from, column.key);
    if (!member || !is_member_of(column, row, c, body.at(*member), *member)) return false;
  }
  return true;
}

/// As entry_fault_of below, for bodies that are simple: true where all surely agrees.
bool surely_agrees(const Row& row, std::int64_t number, Glance& body, Projections& projections) {
  if (!body.take(row.text_view(4))) return false;
  constexpr std::string_view names[] = {"data", "kind", "number", "recipe", "time", "who"};
  std::uint32_t places[6], node = Glance::first(0);
  for (int i = 0; i < 6; ++i) {
    if (node >= body.at(0).end || body.at(node).key != names[i]) return false;
    places[i] = node;
    node = body.at(node).end;
  }
  if (node != body.at(0).end || !is_text_of(row, 2, body.at(places[1])) || !is_text_of(row, 1, body.at(places[4])) ||
      !is_text_of(row, 3, body.at(places[5])) || !is_integer_of(row, 0, body.at(places[2])) ||
      body.at(places[3]).kind != Glance::Kind::integer || Glance::integer(body.at(places[3])) != recipe ||
      body.at(places[0]).kind != Glance::Kind::object || (number == 1) != (row.text_view(2) == "ledger_begun"))
    return false;
  return projections.surely_agree(row.text_view(2), number, body, places[0]);
}

/// One entry: what follows from the hash before it, and what its columns and rows say.
std::optional<Fault> entry_fault_of(const Row& row, std::int64_t number, const Digest& previous,
                                    Projections& projections, Sha256& hash, Glance& glance) {
  if (row.integer(0) != number) return entry_fault(number, "number", "is missing");
  if (!row.is_text(4)) return entry_fault(number, "body", "is not text");
  if (!row.is_blob(5) || row.blob(5).size() != 32) return entry_fault(number, "hash", "is not 32 bytes");
  if (hash.add(previous).add(row.text_view(4)).finish() != row.digest(5))
    return entry_fault(number, "hash", "is not that of the hash before it and this body");
  if (surely_agrees(row, number, glance, projections)) return std::nullopt;
  const auto body = parse_body(row.text_view(4));
  if (!body) return entry_fault(number, "body", "is not canonical: " + body.error().what());
  if (auto fault = head_fault(row, number, *body)) return fault;
  if ((number == 1) != (row.text_view(2) == "ledger_begun"))
    return entry_fault(number, "kind", "ledger_begun is the first entry and no other");
  return projections.fault(row.text_view(2), number, *body->find("data"));
}

std::optional<Digest> hash_before(Connection& connection, std::int64_t from) {
  if (from <= 1) return Digest{};
  Row row = connection.begin("SELECT hash FROM entry WHERE number = ?");
  if (!row.values(from - 1).step()) return std::nullopt;
  return row.digest(0);
}

Fault stray_fault(std::int64_t entry, const std::string& table, const std::string& key, std::int64_t value) {
  return {entry, table, key + " " + std::to_string(value), key, "belongs to nothing"};
}

/// The lowest key from first to last of a table's rows for which `counterpart` finds nothing.
std::optional<std::int64_t> lowest_stray(Connection& connection, const std::string& table, const std::string& key,
                                         const std::string& counterpart, std::int64_t first, std::int64_t last) {
  Statement statement(connection, "SELECT min(" + key + ") FROM " + table + " AS t WHERE t." + key +
                                      " BETWEEN ? AND ? AND NOT EXISTS (SELECT 1 FROM " + counterpart + " = t." + key +
                                      ")");
  Row row = statement.begin();
  if (!row.values(first, last).step() || row.is_null(0)) return std::nullopt;
  return row.integer(0);
}

std::string of_kind(const ProjectedTable& table) {
  const std::string kind = table.kind;
  const std::string of = kind.empty() ? "NOT IN ('run_opened', 'run_closed')" : "= '" + kind + "'";
  return "entry AS e WHERE e.kind " + of + " AND e.number";
}

std::string count_sql(const ProjectedTable& table) {
  return std::string{"SELECT count(*) FROM "} + table.table + " WHERE " + table.entry_key + " BETWEEN ? AND ?";
}

}  // namespace

Projections::Projections(Connection& connection) {
  for (const ProjectedTable& table : projected_tables_at(connection.ask_number("PRAGMA user_version")))
    tables_.push_back({&table, std::make_unique<Statement>(connection, select_sql(table)),
                       std::make_unique<Statement>(connection, count_sql(table))});
}

std::optional<Fault> Projections::fault(std::string_view kind, std::int64_t number, const Body& data) {
  for (Projected& projected : tables_)
    if (makes_rows(*projected.table, kind))
      if (auto fault = rows_fault(*projected.select, *projected.table, number, data, projected.agreed)) return fault;
  return std::nullopt;
}

bool Projections::surely_agree(std::string_view kind, std::int64_t number, const Glance& body, std::uint32_t data) {
  std::int64_t counts[16] = {};
  for (std::size_t t = 0; t < tables_.size(); ++t) {
    const ProjectedTable& table = *tables_[t].table;
    if (!makes_rows(table, kind)) continue;
    if (*table.kind == '\0' || t >= std::size(counts)) return false;  // what other entries are about: they are few
    std::uint32_t from = data, end = body.at(data).end;
    if (*table.list != '\0') {
      const auto list = body.find(data, table.list);
      if (!list || body.at(*list).kind != Glance::Kind::array) return false;
      from = Glance::first(*list), end = body.at(*list).end;
    }
    Row row = tables_[t].select->begin();
    row.values(number);
    for (; from < end; from = *table.list == '\0' ? end : body.at(from).end)
      if (!row.step() || !is_row_of(table, row, number, counts[t]++, body, from)) return false;
    if (row.step()) return false;
  }
  for (std::size_t t = 0; t < tables_.size() && t < std::size(counts); ++t) tables_[t].agreed += counts[t];
  return true;
}

void Projections::count_anew() {
  for (Projected& projected : tables_) projected.agreed = 0;
}

std::optional<Fault> Projections::stray(Connection& connection, std::int64_t first, std::int64_t last) {
  std::optional<Fault> lowest;
  for (Projected& projected : tables_) {
    const ProjectedTable& table = *projected.table;
    Row row = projected.count->begin();
    row.values(first, last).step();
    if (row.integer(0) == projected.agreed) continue;
    const auto key = lowest_stray(connection, table.table, table.entry_key, of_kind(table), first, last);
    if (key && (!lowest || *key < lowest->entry)) lowest = stray_fault(*key, table.table, table.entry_key, *key);
  }
  return lowest;
}

RangeWalker::RangeWalker(Connection& connection)
    : connection_(connection),
      projections_(std::make_unique<Projections>(connection)),
      runs_(make_run_walker(connection)) {}

RangeWalker::~RangeWalker() = default;

RangeWalk RangeWalker::walk_entries(std::int64_t first, std::int64_t last) {
  RangeWalk walk;
  const auto before = hash_before(connection_, first);
  if (!before) {
    walk.fault = entry_fault(first - 1, "number", "is missing");
    return walk;
  }
  walk.seal = {first - 1, *before};
  Sha256 hash;
  Glance glance;
  Row row = connection_.begin(
      "SELECT number, time, kind, who, body, hash FROM entry WHERE number BETWEEN ? AND ? ORDER BY number");
  for (row.values(first, last); row.step();) {
    const std::int64_t number = walk.seal.entry + 1;
    walk.fault = entry_fault_of(row, number, walk.seal.hash, *projections_, hash, glance);
    if (walk.fault) return walk;
    walk.seal = {number, row.digest(5)};
    ++walk.entries;
  }
  if (walk.seal.entry != last) walk.fault = entry_fault(walk.seal.entry + 1, "number", "is missing");
  return walk;
}

RangeWalk RangeWalker::walk(std::int64_t first, std::int64_t last) {
  projections_->count_anew();
  RangeWalk walk = walk_entries(first, last);
  const auto keep_first = [&](std::optional<Fault> other) {
    if (other && (!walk.fault || other->entry < walk.fault->entry)) walk.fault = std::move(other);
  };
  const bool whole = !walk.fault;
  keep_first(walk_runs(*runs_, first, last, walk));
  // Counting finds strays only where everything was counted; after a fault they are looked for in any case.
  if (!whole) projections_->count_anew();
  keep_first(projections_->stray(connection_, first, last));
  if (!walk.fault) keep_first(stray_run_row(connection_, first, last, walk));
  return walk;
}

std::optional<Fault> RangeWalker::run_fault(std::int64_t run, RangeWalk& walk) {
  return walk_runs(*runs_, run, run, walk);
}

std::optional<Fault> row_out_of_range(Connection& connection, std::int64_t first, std::int64_t last) {
  const auto look = [&](const std::string& table, const std::string& key) -> std::optional<Fault> {
    for (const char* where : {" < ?", " > ?"}) {
      Statement statement(
          connection, "SELECT " + key + " FROM " + table + " WHERE " + key + where + " ORDER BY " + key + " LIMIT 1");
      Row row = statement.begin();
      if (row.values(where[1] == '<' ? first : last).step())
        return stray_fault(row.integer(0), table, key, row.integer(0));
    }
    return std::nullopt;
  };
  for (const ProjectedTable& table : projected_tables_at(connection.ask_number("PRAGMA user_version")))
    if (auto fault = look(table.table, table.entry_key)) return fault;
  for (const char* table : {"reading", "capture"})
    if (auto fault = look(table, "run")) return fault;
  return std::nullopt;
}

std::optional<Fault> stray_run_row(Connection& connection, std::int64_t first, std::int64_t last,
                                   const RangeWalk& walked) {
  const auto rows = [&](const char* sql) {
    Row row = connection.begin(sql);
    row.values(first, last).step();
    return row.integer(0);
  };
  if (rows("SELECT count(*) FROM reading WHERE run BETWEEN ? AND ?") == walked.readings &&
      rows("SELECT count(*) FROM capture WHERE run BETWEEN ? AND ?") == walked.captures)
    return std::nullopt;
  for (const char* table : {"reading", "capture"})
    if (const auto run = lowest_stray(connection, table, "run", "run_opened AS o WHERE o.run", first, last))
      return stray_fault(*run, table, "run", *run);
  return std::nullopt;
}

std::optional<Fault> stray_bytes(Connection& connection) {
  const auto capture = lowest_stray(connection, "capture_bytes", "capture", "capture AS c WHERE c.number",
                                    std::numeric_limits<std::int64_t>::min(), std::numeric_limits<std::int64_t>::max());
  if (!capture) return std::nullopt;
  return stray_fault(0, "capture_bytes", "capture", *capture);
}

}  // namespace probewright::db
