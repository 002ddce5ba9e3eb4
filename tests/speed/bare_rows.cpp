#include "tests/speed/bare_rows.h"

#include <sqlite3.h>

#include <chrono>
#include <ctime>
#include <stdexcept>

#include "db/schema/schema.h"

namespace probewright::speed {
namespace {

void demand(int code, sqlite3* db) {
  if (code != SQLITE_OK && code != SQLITE_DONE && code != SQLITE_ROW) throw std::runtime_error(sqlite3_errmsg(db));
}

struct Table {
  const char* name;
  const char* entry_of_row;  ///< SQL for the entry that a row belongs to
};
constexpr Table tables[] = {{"entry", "number"},
                            {"document", "entry"},
                            {"run_opened", "run"},
                            {"run_document", "run"},
                            {"run_device", "run"},
                            {"capture", "run"},
                            {"capture_bytes", "(SELECT run FROM capture WHERE number = capture)"},
                            {"reading", "run"},
                            {"run_closed", "entry"}};

using Values = std::vector<sqlite3_value*>;

struct Rows {
  std::string insert;
  std::vector<std::vector<Values>> of_group;
};

Rows read(sqlite3* db, const Table& table, const std::vector<std::int64_t>& ends) {
  Rows rows;
  rows.of_group.resize(ends.size());
  const std::string name = table.name, of = table.entry_of_row;
  sqlite3_stmt* select = nullptr;
  demand(sqlite3_prepare_v2(db, ("SELECT " + of + " AS of_entry, * FROM " + name + " ORDER BY of_entry").c_str(), -1,
                            &select, nullptr),
         db);
  std::size_t group = 0;
  while (sqlite3_step(select) == SQLITE_ROW) {
    while (sqlite3_column_int64(select, 0) > ends[group]) ++group;
    Values values;
    for (int i = 1; i < sqlite3_column_count(select); ++i)
      values.push_back(sqlite3_value_dup(sqlite3_column_value(select, i)));
    rows.of_group[group].push_back(std::move(values));
  }
  std::string marks = "?";
  for (int i = 2; i < sqlite3_column_count(select); ++i) marks += ",?";
  rows.insert = "INSERT INTO " + name + " VALUES (" + marks + ")";
  sqlite3_finalize(select);
  return rows;
}

}  // namespace

BareTime write_bare(const std::string& from, const std::string& to, const std::vector<std::int64_t>& ends) {
  sqlite3 *source = nullptr, *target = nullptr;
  demand(sqlite3_open_v2(from.c_str(), &source, SQLITE_OPEN_READONLY, nullptr), source);
  std::vector<Rows> all;
  for (const Table& table : tables) all.push_back(read(source, table, ends));
  demand(sqlite3_open(to.c_str(), &target), target);
  const auto run = [&](const std::string& sql) {
    demand(sqlite3_exec(target, sql.c_str(), nullptr, nullptr, nullptr), target);
  };
  run("PRAGMA auto_vacuum=INCREMENTAL; PRAGMA journal_mode=WAL; PRAGMA synchronous=FULL; PRAGMA foreign_keys=ON;"
      " PRAGMA recursive_triggers=ON");
  for (std::int64_t step = 1; step <= db::newest_step; ++step) run(std::string{db::schema_step(step)});
  std::vector<sqlite3_stmt*> inserts;
  for (const Rows& rows : all)
    demand(sqlite3_prepare_v2(target, rows.insert.c_str(), -1, &inserts.emplace_back(), nullptr), target);
  const auto begin = std::chrono::steady_clock::now();
  const std::clock_t cpu_begin = std::clock();
  for (std::size_t group = 0; group < ends.size(); ++group) {
    run("BEGIN IMMEDIATE");
    // An entry's run must be there before its readings, and the closing row after them.
    for (std::size_t t = 0; t < all.size(); ++t)
      for (const Values& values : all[t].of_group[group]) {
        for (std::size_t i = 0; i < values.size(); ++i)
          sqlite3_bind_value(inserts[t], static_cast<int>(i) + 1, values[i]);
        demand(sqlite3_step(inserts[t]), target);
        sqlite3_reset(inserts[t]);
      }
    run("COMMIT");
  }
  const BareTime took{std::chrono::duration<double>(std::chrono::steady_clock::now() - begin).count(),
                      static_cast<double>(std::clock() - cpu_begin) / CLOCKS_PER_SEC};
  for (sqlite3_stmt* insert : inserts) sqlite3_finalize(insert);
  for (Rows& rows : all)
    for (auto& group : rows.of_group)
      for (Values& values : group)
        for (sqlite3_value* value : values) sqlite3_value_free(value);
  sqlite3_close(source);
  sqlite3_close(target);
  return took;
}

}  // namespace probewright::speed
