// Damage of every kind is found, by the program and by a python3 script that was written from CHAIN.md alone.
#include "db/verify.h"

#include <gmock/gmock.h>
#include <gtest/gtest.h>
#include <sqlite3.h>

#include <cstdio>
#include <fstream>
#include <functional>
#include <map>
#include <set>
#include <sstream>
#include <thread>

#include "db/background_verify.h"
#include "db/chain.h"
#include "db/hex.h"
#include "db/schema/schema.h"
#include "db/sha256.h"
#include "sample.h"

namespace probewright::db {
namespace {

using namespace sample;
namespace fs = std::filesystem;

Bytes file_bytes(const std::string& path) {
  std::ifstream file(path, std::ios::binary);
  const std::string text{std::istreambuf_iterator<char>(file), {}};
  const auto* begin = reinterpret_cast<const std::byte*>(text.data());
  return {begin, begin + text.size()};
}

void write_file(const std::string& path, std::span<const std::byte> bytes) {
  std::ofstream(path, std::ios::binary)
      .write(reinterpret_cast<const char*>(bytes.data()), static_cast<std::streamsize>(bytes.size()));
}

/// A connection without any of our guards, as an attacker or a stray program has it.
class Raw {
 public:
  explicit Raw(const std::string& path) {
    if (sqlite3_open(path.c_str(), &handle_) != SQLITE_OK) throw std::runtime_error("cannot open");
    run("PRAGMA foreign_keys=OFF; PRAGMA ignore_check_constraints=ON; PRAGMA synchronous=OFF");
  }
  ~Raw() { sqlite3_close(handle_); }
  /// False where SQLite refuses (a key that is taken).
  bool run(const std::string& sql) {
    return sqlite3_exec(handle_, sql.c_str(), nullptr, nullptr, nullptr) == SQLITE_OK;
  }
  int changes() { return sqlite3_changes(handle_); }
  std::vector<std::vector<std::string>> rows(const std::string& sql) {
    std::vector<std::vector<std::string>> found;
    sqlite3_stmt* statement = nullptr;
    if (sqlite3_prepare_v2(handle_, sql.c_str(), -1, &statement, nullptr) != SQLITE_OK)
      throw std::runtime_error(sqlite3_errmsg(handle_));
    while (sqlite3_step(statement) == SQLITE_ROW) {
      auto& row = found.emplace_back();
      for (int i = 0; i < sqlite3_column_count(statement); ++i) {
        const void* blob = sqlite3_column_blob(statement, i);
        row.emplace_back(static_cast<const char*>(blob), static_cast<std::size_t>(sqlite3_column_bytes(statement, i)));
      }
    }
    sqlite3_finalize(statement);
    return found;
  }

 private:
  sqlite3* handle_ = nullptr;
};

/// Everything that a file says, as one digest.
Digest content_digest(const std::string& path) {
  Raw raw(path);
  Sha256 hash;
  for (const auto& table : raw.rows("SELECT name FROM sqlite_schema WHERE type = 'table' ORDER BY name"))
    for (const auto& row : raw.rows("SELECT * FROM " + table[0] + " ORDER BY 1, 2"))
      for (const auto& cell : row) hash.add(cell).add("|");
  return hash.finish();
}

/// What was done to a copy of the good ledger.
struct Damage {
  std::string name, path;
  std::string table;   ///< where the fault is expected; empty: anywhere
  std::string column;  ///< empty: any
};

class VerifyTest : public testing::Test {
 protected:
  VerifyTest() {
    SeededEntropy entropy(21);
    begin_second_volume(good, clock);
    auto store = open(options(good), clock);
    whole_run(*store, "AQ20-048-00001", entropy, "pass");
    whole_run(*store, "AQ20-048-00002", entropy, "fail");
    whole_run(*store, "AQ20-048-00002", entropy, "void");
    demand(store->commit([](Change& change) {
      const Digest digest = sha256(sheet().text);
      change.add_signature({digest, "Dalia Oduya", "engineer", "drafted", "", ""});
      change.add_signature({digest, "Maren Quill", "quality", "approved", "", ""});
      change.put_in_force(digest, {1896105772000000}, "Maren Quill", "first");
      const std::int64_t capture = 1;
      change.prune({&capture, 1}, "Piet Hallgrim", "record period is over");
      change.add_entry("cleaning", "Imre Vasko", Body::Object{{"nest", 1}, {"words", "lens wiped, \"dry\"\n\x01"}});
      change.add_entry("rework", "Imre Vasko",
                       Body::Object{{"lot", "AQ20-W48-07"}, {"person", "Imre Vasko"}, {"serial", "AQ20-048-00002"}});
      change.add_entry("cleaning", "Imre Vasko", Body::Object{{"nest", 2}});
    }));
    seal = store->seal();
  }

  /// Does `change` to a copy with all triggers out of the way, and puts them back word for word.
  std::string damaged(const std::string& name, const std::function<bool(Raw&)>& change) {
    const std::string path = folder.file(name + ".db");
    fs::copy_file(good, path, fs::copy_options::overwrite_existing);
    Raw raw(path);
    raw.run("BEGIN");
    const auto triggers = raw.rows("SELECT name, sql FROM sqlite_schema WHERE type = 'trigger'");
    for (const auto& trigger : triggers) raw.run("DROP TRIGGER " + trigger[0]);
    const bool done = change(raw);
    for (const auto& trigger : triggers) raw.run(trigger[1]);
    raw.run("COMMIT");
    return done ? path : "";
  }
  void add(std::vector<Damage>& all, const std::string& name, const std::string& table, const std::string& column,
           const std::function<bool(Raw&)>& change) {
    const std::string path = damaged("damage-" + std::to_string(all.size()), change);
    if (path.empty()) {
      ADD_FAILURE() << "could not do: " << name;
      return;
    }
    all.push_back({name, path, table, column});
  }
  void add_sql(std::vector<Damage>& all, const std::string& name, const std::string& table, const std::string& sql) {
    add(all, name, table, "", [&](Raw& raw) { return raw.run(sql) && raw.changes() > 0; });
  }

  /// What the python script says of each file: true where it agrees.
  std::vector<bool> python_answers(const std::vector<std::string>& paths, bool with_seal = true) {
    const std::string list = folder.file("list.txt");
    {
      std::ofstream lines(list);
      for (const std::string& path : paths) {
        lines << path;
        if (with_seal) lines << '\t' << seal.entry << '\t' << to_hex(seal.hash);
        lines << '\n';
      }
    }
    const std::string command = std::string{PW_PYTHON} + " " PW_SOURCE_DIR "/tests/db/verify_ledger.py --list " + list;
    std::FILE* pipe = popen(command.c_str(), "r");
    std::string output;
    char piece[4096];
    for (std::size_t got; (got = std::fread(piece, 1, sizeof piece, pipe)) > 0;) output.append(piece, got);
    pclose(pipe);
    std::vector<bool> answers;
    std::istringstream lines(output);
    for (std::string line; std::getline(lines, line);) {
      answers.push_back(line.find("\"ok\": true") != std::string::npos);
      python_lines.push_back(line);
    }
    return answers;
  }
  VerifyReport verified(const std::string& path) {
    VerifyOptions with;
    with.printed = seal;
    return verify(path, with).value();
  }

  HandClock clock;
  Folder folder;
  std::string good = folder.file("good.db");
  Seal seal;
  std::vector<std::string> python_lines;
};

TEST_F(VerifyTest, AGoodLedgerAgreesInBoth) {
  const auto report = verified(good);
  EXPECT_TRUE(report.ok()) << canonical(report_body(report));
  EXPECT_EQ(report.entries, seal.entry);
  EXPECT_EQ(report.runs, 3);
  EXPECT_EQ(report.readings, 21);
  EXPECT_EQ(report.captures, 6);
  EXPECT_EQ(report.seal, seal);
  EXPECT_EQ(python_answers({good}), std::vector<bool>{true}) << python_lines[0];
  EXPECT_NE(python_lines[0].find(to_hex(seal.hash)), std::string::npos);
  EXPECT_NE(python_lines[0].find("\"readings\": 21, \"runs\": 3"), std::string::npos) << python_lines[0];
}

TEST_F(VerifyTest, TheReportHasTheShapeThatOthersBuildOn) {
  const Body body = report_body(verified(good));
  EXPECT_EQ(canonical(body),
            "{\"captures\":6,\"entries\":" + std::to_string(seal.entry) +
                ",\"first_fault\":null,\"ok\":true,\"open_runs\":0,\"readings\":21,\"runs\":3,\"seal\":\"" +
                to_hex(seal.hash) + "\"}");
}

/// SQL that gives the cell another value of its type.
std::string another_value(const std::string& column, const std::string& type, bool flag, std::uint64_t random) {
  if (flag) return "1 - " + column;
  if (type == "INTEGER") return column + " + " + std::to_string(1000 + random % 1000);
  if (type == "REAL") return "coalesce(" + column + " * 1.0000000000000002 + 1e-300, 0.0)";
  if (type == "TEXT" && random % 3 == 0) return "coalesce(" + column + ", '') || ' '";
  if (type == "TEXT" && random % 3 == 1) return "CASE WHEN " + column + " = '' THEN 'x' ELSE coalesce(NULL, 'x') END";
  if (type == "TEXT") return "coalesce(substr(" + column + ", 2), '') || 'y'";
  return "randomblob(max(length(coalesce(" + column + ", zeroblob(32))), 1))";
}

TEST_F(VerifyTest, AnotherValueInAnyCellOfAnyTableIsFoundByBoth) {
  std::vector<Damage> all;
  SeededEntropy random(99);
  Raw look(good);
  for (const auto& table : look.rows("SELECT name FROM sqlite_schema WHERE type = 'table' ORDER BY name")) {
    const std::string& name = table[0];
    const bool keyed = name == "reading" || name == "run_document" || name == "run_device" || name == "carried_try" ||
                       name == "entry_about";
    const std::string key = name == "carried_try"   ? "serial"
                            : name == "entry_about" ? "subject || entry"
                            : keyed                 ? "run || ' ' || place"
                                                    : "rowid";
    const auto rows = look.rows("SELECT " + key + " FROM " + name);
    for (const auto& column : look.rows("SELECT name, type, pk FROM pragma_table_info('" + name + "')")) {
      const bool flag = column[0] == "emulated" || column[0] == "provisional" || column[0] == "cut_short";
      for (int trial = 0; trial < 3; ++trial) {
        const std::string row = rows[random.next() % rows.size()][0];
        const std::string value = another_value(column[0], column[1], flag, random.next());
        add(all, name + "." + column[0] + " of " + row + " = " + value, name, column[2] == "0" ? column[0] : "",
            [&](Raw& raw) {
              return raw.run("UPDATE " + name + " SET " + column[0] + " = " + value + " WHERE " + key + " = '" + row +
                             "' OR " + key + " = " + (keyed ? "''" : row)) &&
                     raw.changes() == 1;
            });
        // NULL where a value was, and the other way, where the table allows it.
        if (trial == 0) {
          const std::string path = damaged("null", [&](Raw& raw) {
            return raw.run("UPDATE " + name + " SET " + column[0] + " = NULL WHERE " + key + " = '" + row + "' AND " +
                           column[0] + " IS NOT NULL") &&
                   raw.changes() == 1;
          });
          if (!path.empty()) EXPECT_FALSE(verified(path).ok()) << name << "." << column[0] << " = NULL";
        }
      }
    }
  }
  std::vector<std::string> paths;
  int exact = 0;
  for (const Damage& damage : all) {
    paths.push_back(damage.path);
    const auto report = verified(damage.path);
    ASSERT_FALSE(report.ok()) << damage.name;
    const Fault& fault = *report.first_fault;
    const std::string told = fault.table + "." + fault.column + ", row " + fault.row + ": " + fault.what;
    // A prune entry that names another capture leaves the bytes of the first one missing: the earlier entry is named.
    if (damage.table != "pruned") EXPECT_EQ(fault.table, damage.table) << damage.name << " gave " << told;
    EXPECT_FALSE(fault.what.empty());
    exact += fault.table == damage.table && fault.column == damage.column;
  }
  const auto answers = python_answers(paths);
  ASSERT_EQ(answers.size(), all.size());
  for (std::size_t i = 0; i < all.size(); ++i) EXPECT_FALSE(answers[i]) << "python: " << all[i].name << python_lines[i];
  std::printf("%zu cells changed, all found by both; table and column named exactly for %d\n", all.size(), exact);
  EXPECT_GT(exact, static_cast<int>(all.size()) * 3 / 4);
}

TEST_F(VerifyTest, RowsThatAreGoneAddedOrSwappedAreFoundByBoth) {
  std::vector<Damage> all;
  Raw look(good);
  for (const auto& table : look.rows("SELECT name FROM sqlite_schema WHERE type = 'table' ORDER BY name")) {
    const std::string& name = table[0];
    const bool keyed = name == "reading" || name == "run_document" || name == "run_device";
    const std::string where = name == "carried_try"   ? "serial"
                              : name == "entry_about" ? "subject || entry"
                              : keyed                 ? "run || ' ' || place"
                                                      : "rowid";
    const std::string from = " FROM " + name + ")";
    for (const std::string& which : {"(SELECT min(" + where + ")" + from, "(SELECT max(" + where + ")" + from})
      add_sql(all, name + ": a row deleted, " + which, "", "DELETE FROM " + name + " WHERE " + where + " = " + which);
    add_sql(all, name + ": all rows deleted", "", "DELETE FROM " + name);
  }
  add_sql(all, "an entry in the middle deleted", "entry", "DELETE FROM entry WHERE number = 6");
  add_sql(all, "the newest entry deleted", "entry", "DELETE FROM entry WHERE number = (SELECT max(number) FROM entry)");
  add_sql(
      all, "a reading added", "reading",
      "INSERT INTO reading SELECT run, 200, check_slug, value, none_reason, expanded_uncertainty, unit, lower_limit,"
      " upper_limit, acceptance_lower, acceptance_upper, margin, conformance_probability, ok, definition, cut_short"
      " FROM reading LIMIT 1");
  add_sql(all, "a capture added", "",
          "INSERT INTO capture SELECT 77, run, kind, set_label, packing, decoded_size, stored_size, decoded_digest,"
          " stored_digest FROM capture LIMIT 1");
  add_sql(
      all, "a reading of no run", "reading",
      "INSERT INTO reading SELECT 777, place, check_slug, value, none_reason, expanded_uncertainty, unit, lower_limit,"
      " upper_limit, acceptance_lower, acceptance_upper, margin, conformance_probability, ok, definition, cut_short"
      " FROM reading LIMIT 1");
  add_sql(all, "bytes of no capture", "capture_bytes", "INSERT INTO capture_bytes VALUES (99, x'00')");
  add_sql(all, "bytes of a pruned capture", "capture_bytes", "INSERT INTO capture_bytes VALUES (1, x'00')");
  add_sql(all, "a prune without an entry", "", "INSERT INTO pruned VALUES (2, 3)");
  add_sql(all, "a signature without an entry", "signature",
          "INSERT INTO signature SELECT 3, document, 'Noor Castellan', role, meaning, public_key, signature FROM "
          "signature LIMIT 1");
  add_sql(all, "an entry added at the end", "entry",
          "INSERT INTO entry SELECT max(number) + 1, time, kind, who, body, hash FROM entry");
  const auto swap = [](const std::string& table, const std::string& column, const std::string& key,
                       const std::string& a, const std::string& b) {
    return "UPDATE " + table + " SET " + column + " = (SELECT o." + column + " FROM " + table + " AS o WHERE o." + key +
           " = CASE " + table + "." + key + " WHEN " + a + " THEN " + b + " ELSE " + a + " END) WHERE " + key +
           " IN (" + a + ", " + b + ")";
  };
  add_sql(all, "bytes of two captures swapped", "capture_bytes", swap("capture_bytes", "bytes", "capture", "2", "4"));
  add_sql(all, "texts of two documents swapped", "document", swap("document", "text", "entry", "3", "4"));
  add_sql(all, "bodies of two entries swapped", "entry", swap("entry", "body", "number", "5", "6"));
  add_sql(all, "values of two readings swapped", "reading",
          "UPDATE reading SET value = (SELECT o.value FROM reading AS o WHERE o.run = reading.run AND o.check_slug ="
          " CASE reading.check_slug WHEN 'red_centroid' THEN 'infrared_centroid' ELSE 'red_centroid' END)"
          " WHERE run = 6 AND check_slug IN ('red_centroid', 'infrared_centroid')");
  add_sql(all, "a fail turned into a pass in the table", "run_closed",
          "UPDATE run_closed SET verdict = 'pass', failing = ''");

  std::vector<std::string> paths;
  for (const Damage& damage : all) {
    paths.push_back(damage.path);
    const auto report = verified(damage.path);
    ASSERT_FALSE(report.ok()) << damage.name;
    if (!damage.table.empty())
      EXPECT_EQ(report.first_fault->table, damage.table) << damage.name << report.first_fault->what;
  }
  const auto answers = python_answers(paths);
  ASSERT_EQ(answers.size(), all.size());
  for (std::size_t i = 0; i < all.size(); ++i) EXPECT_FALSE(answers[i]) << "python: " << all[i].name << python_lines[i];
  std::printf("%zu damages with whole rows, all found by both\n", all.size());
}

TEST_F(VerifyTest, ALedgerCutBackFailsOnlyAgainstAnEarlierSeal) {
  const std::string path = damaged("cut", [](Raw& raw) {
    return raw.run("DELETE FROM entry WHERE number = (SELECT max(number) FROM entry)") && raw.changes() == 1;
  });
  EXPECT_TRUE(verify(path)->ok()) << "a shorter chain agrees with itself: this is why seals are printed";
  EXPECT_EQ(python_answers({path}, false), std::vector<bool>{true});
  const auto report = verified(path);
  ASSERT_FALSE(report.ok());
  EXPECT_EQ(report.first_fault->entry, seal.entry);
  EXPECT_THAT(report.first_fault->what, testing::HasSubstr("before the printed seal"));
  EXPECT_EQ(python_answers({path}), std::vector<bool>{false});
  VerifyOptions other;
  other.printed = Seal{3, seal.hash};
  EXPECT_EQ(verify(good, other)->first_fault->entry, 3);
}

TEST_F(VerifyTest, ALayoutThatWasTouchedIsFoundByBoth) {
  const std::pair<const char*, const char*> changes[] = {
      {"entry_no_update", "DROP TRIGGER entry_no_update"},
      {"capture_bytes_no_delete",
       "DROP TRIGGER capture_bytes_no_delete; CREATE TRIGGER capture_bytes_no_delete BEFORE DELETE ON"
       " capture_bytes WHEN 0 BEGIN SELECT RAISE(ABORT, 'x'); END"},
      {"run", "DROP VIEW run; CREATE VIEW run AS SELECT * FROM run_opened"},
      {"run_opened_serial", "DROP INDEX run_opened_serial"},
      {"notes", "CREATE TABLE notes(a)"},
      {"extra", "CREATE TRIGGER extra AFTER INSERT ON reading BEGIN SELECT 1; END"},
      {"reading", "ALTER TABLE reading ADD COLUMN remark TEXT"}};
  std::vector<std::string> paths;
  for (const auto& [name, sql] : changes) {
    paths.push_back(folder.file(std::string{"layout-"} + name + ".db"));
    fs::copy_file(good, paths.back());
    ASSERT_TRUE(Raw(paths.back()).run(sql)) << sql;
    const auto report = verified(paths.back());
    ASSERT_FALSE(report.ok()) << sql;
    EXPECT_EQ(report.first_fault->table, "sqlite_schema");
    EXPECT_EQ(report.first_fault->row, name);
  }
  EXPECT_EQ(python_answers(paths), std::vector<bool>(paths.size(), false));
}

TEST_F(VerifyTest, FilesThatCannotBeReadGiveAFaultAndNoCrash) {
  const Bytes bytes = file_bytes(good);
  const auto fault_of = [&](std::span<const std::byte> content) {
    const std::string path = folder.file("broken.db");
    write_file(path, content);
    const auto report = verify(path);
    return report ? (report->ok() ? "ok" : report->first_fault->table) : report.error().id;
  };
  EXPECT_EQ(fault_of({}), "file");
  EXPECT_EQ(fault_of(std::as_bytes(std::span{"no database at all"})), "file");
  EXPECT_EQ(fault_of(Bytes(10000, std::byte{0x5a})), "file");
  for (std::size_t size : {100u, 1000u, 4096u, 8192u, 50000u, 100000u})
    EXPECT_NE(fault_of(std::span{bytes}.first(size)), "ok") << "cut to " << size;
  EXPECT_EQ(verify(folder.file("missing.db")).error().id, "ledger_cannot_open");
  const auto a_folder = verify(folder.path.string());
  EXPECT_FALSE(a_folder && a_folder->ok());
}

// Any byte may change anywhere. Where the file is still called good, every row of every table must be what it was.
TEST_F(VerifyTest, RandomBytesChangedAnywhere) {
  const Bytes bytes = file_bytes(good);
  const Digest content = content_digest(good);
  SeededEntropy random(5);
  int found = 0, harmless = 0;
  for (int trial = 0; trial < 400; ++trial) {
    Bytes broken = bytes;
    const std::size_t count = 1 + random.next() % 3;
    for (std::size_t i = 0; i < count; ++i)
      broken[random.next() % broken.size()] ^= static_cast<std::byte>(1 + random.next() % 255);
    const std::string path = folder.file("bytes.db");
    write_file(path, broken);
    VerifyOptions with;
    with.printed = seal;
    const auto report = verify(path, with);
    if (!report || !report->ok()) {
      ++found;
      continue;
    }
    ++harmless;
    ASSERT_EQ(content_digest(path), content) << "trial " << trial << ": changed and called good";
  }
  EXPECT_GT(found, 100);
  std::printf("400 files with bytes changed: %d found, %d changed only bytes that hold nothing\n", found, harmless);
}

TEST_F(VerifyTest, ALiveLedgerIsVerifiedBesideItsWriter) {
  auto store = open(options(good), clock);
  SeededEntropy entropy(8);
  whole_run(*store, "AQ20-048-00009", entropy);
  RunId open_run;
  demand(store->commit([&](Change& change) { open_run = change.open_run(opening("AQ20-048-00010")); }));
  demand(store->commit([&](Change& change) { change.add_readings(open_run, readings(entropy)); }));
  const auto report = verified(good);
  EXPECT_TRUE(report.ok()) << canonical(report_body(report));
  EXPECT_EQ(report.runs, 5);
  EXPECT_EQ(report.open_runs, 1);
  EXPECT_EQ(report.seal, store->seal());
  EXPECT_EQ(python_answers({good}), std::vector<bool>{true}) << python_lines[0];
}

TEST_F(VerifyTest, ArchivesAreOpenedOnlyWhenNoLogLiesBeside) {
  VerifyOptions archive;
  archive.archive = true;
  EXPECT_TRUE(verify(good, archive)->ok());
  auto store = open(options(good), clock);
  demand(store->commit([](Change& change) { change.add_entry("cleaning", "Imre Vasko", Body::Object{}); }));
  EXPECT_EQ(verify(good, archive).error().id, "ledger_has_wal");
  EXPECT_EQ(Reader::open(good, ReadFrom::archive).error().id, "ledger_has_wal");
}

TEST_F(VerifyTest, TheLowestRunIsNamedWhereverTheThreadsAre) {
  {
    auto store = open(options(good), clock);
    SeededEntropy entropy(31);
    std::vector<Store::Job> jobs;
    for (int i = 0; i < 1100; ++i)
      jobs.push_back([&entropy, i](Change& change) {
        const RunId run = change.open_run(opening("AQ20-049-" + std::to_string(i)));
        if (i % 5 == 0) change.add_readings(run, readings(entropy));
        change.close_run(closing(run, i % 5 == 0 ? "pass" : "void"));
      });
    for (const auto& outcome : store->commit_group(jobs)) demand(outcome);
  }
  EXPECT_TRUE(verify(good)->ok());
  const std::string path = damaged("two", [](Raw& raw) {
    return raw.run("UPDATE reading SET unit = 'um' WHERE run > 1400 AND check_slug = 'red_centroid'") &&
           raw.changes() > 1;
  });
  for (int again = 0; again < 5; ++again) {
    const auto report = verify(path).value();
    ASSERT_FALSE(report.ok());
    Raw raw(path);
    const auto lowest =
        raw.rows("SELECT min(run), min(entry) FROM run_closed WHERE run > 1400 AND readings > 0").front();
    EXPECT_EQ(report.first_fault->row, "run " + lowest[0] + ", check_slug red_centroid");
    EXPECT_EQ(std::to_string(report.first_fault->entry), lowest[1]);
    EXPECT_EQ(report.first_fault->column, "unit");
  }
}

/// The row of a table that a random number picks, as a WHERE clause over its whole key.
std::string picked_row(Raw& look, const std::string& table, std::uint64_t random) {
  std::string keys, list;
  for (const auto& column : look.rows("SELECT name FROM pragma_table_info('" + table + "') WHERE pk > 0")) {
    list += (list.empty() ? "" : ", ") + column[0];
    keys += (keys.empty() ? "" : " || ' AND ' || ") + ("'" + column[0] + " = ' || quote(" + column[0] + ")");
  }
  const auto rows = look.rows("SELECT " + keys + " FROM " + table + " ORDER BY " + list);
  return rows[random % rows.size()][0];
}

// An auditor's question in numbers: whatever single cell is changed, whichever row is taken away.
TEST_F(VerifyTest, FourHundredCellsAndFiftyRowsAtRandomOverAllTables) {
  std::vector<Damage> all;
  SeededEntropy random(2026);
  Raw look(good);
  std::vector<std::array<std::string, 3>> columns;
  std::vector<std::string> tables;
  for (const auto& table : look.rows("SELECT name FROM sqlite_schema WHERE type = 'table' ORDER BY name")) {
    tables.push_back(table[0]);
    for (const auto& column : look.rows("SELECT name, type FROM pragma_table_info('" + table[0] + "')"))
      columns.push_back({table[0], column[0], column[1]});
  }
  std::set<std::string> touched;
  while (all.size() < 400) {
    // Every column is reached: first each in turn, then at random.
    const auto& [table, column, type] =
        columns[all.size() < columns.size() ? all.size() : random.next() % columns.size()];
    const bool flag = column == "emulated" || column == "provisional" || column == "cut_short";
    const std::string row = picked_row(look, table, random.next());
    const std::string value = another_value(column, type, flag, random.next());
    const std::size_t before = all.size();
    add(all, table + "." + column + " WHERE " + row + " = " + value, table, column,
        [&, t = table, c = column](Raw& raw) {
          // Another value that is taken as a key would be refused: then any free one.
          return (raw.run("UPDATE " + t + " SET " + c + " = " + value + " WHERE " + row) && raw.changes() == 1) ||
                 (raw.run("UPDATE " + t + " SET " + c + " = " + c + " || 'z" + std::to_string(random.next() % 1000) +
                          "' WHERE " + row) &&
                  raw.changes() == 1);
        });
    ASSERT_EQ(all.size(), before + 1);
    touched.insert(table + "." + column);
  }
  EXPECT_EQ(touched.size(), columns.size());
  for (int i = 0; i < 50; ++i) {
    const std::string& table = tables[static_cast<std::size_t>(i) < tables.size() ? i : random.next() % tables.size()];
    const std::string row = picked_row(look, table, random.next());
    add_sql(all, table + ": deleted WHERE " + row, "", "DELETE FROM " + table + " WHERE " + row);
  }
  ASSERT_EQ(all.size(), 450u);
  std::vector<std::string> paths;
  int named = 0;
  for (const Damage& damage : all) {
    paths.push_back(damage.path);
    const auto report = verified(damage.path);
    ASSERT_FALSE(report.ok()) << damage.name;
    EXPECT_FALSE(report.first_fault->what.empty());
    EXPECT_FALSE(report.first_fault->row.empty()) << damage.name << ": " << report.first_fault->what;
    named += report.first_fault->table == damage.table && report.first_fault->column == damage.column;
  }
  const auto answers = python_answers(paths);
  ASSERT_EQ(answers.size(), all.size());
  for (std::size_t i = 0; i < all.size(); ++i) EXPECT_FALSE(answers[i]) << "python: " << all[i].name << python_lines[i];
  std::printf(
      "400 cells and 50 rows at random, all found by both; table and column named exactly for %d of 400 cells\n",
      named);
}

TEST_F(VerifyTest, TwentySwapsOfCapturedBytes) {
  {
    auto store = open(options(good), clock);
    SeededEntropy entropy(77);
    for (int i = 0; i < 4; ++i) whole_run(*store, "AQ20-051-0000" + std::to_string(i), entropy);
    seal = store->seal();
  }
  Raw look(good);
  const auto captures = look.rows("SELECT capture FROM capture_bytes ORDER BY capture");
  SeededEntropy random(4);
  std::vector<Damage> all;
  while (all.size() < 20) {
    const std::string a = captures[random.next() % captures.size()][0],
                      b = captures[random.next() % captures.size()][0];
    if (a == b) continue;
    add_sql(all, "bytes of " + a + " and " + b + " swapped", "capture_bytes",
            "UPDATE capture_bytes SET bytes = (SELECT o.bytes FROM capture_bytes AS o WHERE o.capture = CASE"
            " capture_bytes.capture WHEN " +
                a + " THEN " + b + " ELSE " + a + " END) WHERE capture IN (" + a + ", " + b + ")");
  }
  std::vector<std::string> paths;
  for (const Damage& damage : all) {
    paths.push_back(damage.path);
    const auto report = verified(damage.path);
    ASSERT_FALSE(report.ok()) << damage.name;
    EXPECT_EQ(report.first_fault->table, "capture_bytes");
    EXPECT_EQ(report.first_fault->column, "bytes");
  }
  EXPECT_EQ(python_answers(paths), std::vector<bool>(20, false));
}

/// Takes away the entries from `first` on and every row that they made: a shorter ledger that agrees with itself.
bool cut_from(Raw& raw, std::int64_t first) {
  const std::string from = " >= " + std::to_string(first);
  return raw.run("DELETE FROM capture_bytes WHERE capture IN (SELECT number FROM capture WHERE run" + from + ")") &&
         raw.run("DELETE FROM capture WHERE run" + from + "; DELETE FROM reading WHERE run" + from) &&
         raw.run("DELETE FROM run_document WHERE run" + from + "; DELETE FROM run_device WHERE run" + from) &&
         raw.run("DELETE FROM run_opened WHERE run" + from + "; DELETE FROM run_closed WHERE entry" + from) &&
         raw.run("DELETE FROM pruned WHERE entry" + from + "; DELETE FROM document_state WHERE entry" + from) &&
         raw.run("DELETE FROM signature WHERE entry" + from + "; DELETE FROM document WHERE entry" + from) &&
         raw.run("DELETE FROM entry_about WHERE entry" + from + "; DELETE FROM entry WHERE number" + from);
}

TEST_F(VerifyTest, TenTailsCutOffAreFoundAgainstTheSealAlone) {
  {
    auto store = open(options(good), clock);
    SeededEntropy entropy(78);
    for (int i = 0; i < 4; ++i) whole_run(*store, "AQ20-052-0000" + std::to_string(i), entropy);
    seal = store->seal();
  }
  std::vector<std::string> paths;
  for (std::int64_t cut = 1; cut <= 10; ++cut) {
    const std::string path =
        damaged("cut-" + std::to_string(cut), [&](Raw& raw) { return cut_from(raw, seal.entry - cut + 1); });
    ASSERT_FALSE(path.empty());
    paths.push_back(path);
    EXPECT_TRUE(verify(path)->ok()) << "a shorter ledger agrees with itself: this is why seals are printed";
    const auto report = verified(path);
    ASSERT_FALSE(report.ok());
    EXPECT_EQ(report.first_fault->entry, seal.entry);
    EXPECT_THAT(report.first_fault->what, testing::HasSubstr("ends at entry " + std::to_string(seal.entry - cut)));
  }
  EXPECT_EQ(python_answers(paths), std::vector<bool>(10, false));
  EXPECT_EQ(python_answers(paths, false), std::vector<bool>(10, true));
}

/// What somebody who knows everything can do: a value changed, proof, tags and all hashes from there made anew.
void rebuild(const std::string& path) {
  Connection connection(path, Access::read_write);
  const std::int64_t run = connection.ask_number("SELECT min(run) FROM reading WHERE check_slug = 'red_centroid'");
  const std::string id = std::to_string(run);
  connection.run("UPDATE reading SET value = 0.125 WHERE check_slug = 'red_centroid' AND run = " + id);
  const auto digest = [&](const std::string& select, std::span<const DigestedColumn> columns) {
    RowsDigest rows(columns);
    Row row = connection.begin(select.c_str());
    for (row.values(run); row.step();) rows.add(row);
    return rows;
  };
  const RowsDigest readings = digest(select_readings(), reading_columns()),
                   captures = digest(select_captures(), capture_columns());
  const std::string proof = to_hex(run_proof({run}, readings, captures));
  connection.run("UPDATE run_closed SET proof = x'" + proof + "' WHERE run = " + id);
  Digest hash{};
  for (std::int64_t number = 1;; ++number) {
    const std::string at = std::to_string(number);
    const std::string text = connection.ask("SELECT body FROM entry WHERE number = " + at);
    if (text.empty()) break;
    Body body = parse_body(text).value();
    Body& data = body.object()->at("data");
    if (body.text("kind") == "run_closed" && data.number("run") == run) {
      (*data.object())["proof"] = proof;
      (*data.object())["reading_row_tags"] = tags_text(readings.row_tags());
      (*data.object())["reading_column_tags"] = tags_text(readings.column_tags());
    }
    const std::string changed = canonical(body);
    hash = entry_hash(hash, changed);
    Row row = connection.begin("UPDATE entry SET body = ?, hash = ? WHERE number = ?");
    row.values(changed, hash, number).run();
  }
}

TEST_F(VerifyTest, ARebuiltChainIsFoundAgainstAPrintedSealAlone) {
  const std::string path = folder.file("rebuilt.db");
  fs::copy_file(good, path);
  std::vector<std::vector<std::string>> triggers;
  {
    Raw raw(path);
    triggers = raw.rows("SELECT name, sql FROM sqlite_schema WHERE type = 'trigger'");
    for (const auto& trigger : triggers) ASSERT_TRUE(raw.run("DROP TRIGGER " + trigger[0]));
  }
  rebuild(path);
  {
    Raw raw(path);
    for (const auto& trigger : triggers) ASSERT_TRUE(raw.run(trigger[1]));
  }
  const auto alone = verify(path).value();
  EXPECT_TRUE(alone.ok()) << altered_problem(path, alone.first_fault.value_or(Fault{})).text();
  EXPECT_EQ(python_answers({path}, false), std::vector<bool>{true}) << python_lines[0];
  const auto report = verified(path);
  ASSERT_FALSE(report.ok());
  EXPECT_EQ(report.first_fault->column, "hash");
  EXPECT_THAT(report.first_fault->what, testing::HasSubstr("rebuilt or replaced"));
  EXPECT_EQ(python_answers({path}), std::vector<bool>{false});
}

// Pages that hold nothing now will hold something later: a damaged list of them would overwrite live rows.
TEST_F(VerifyTest, ADamagedFreeListOrIndexIsFound) {
  const std::string lists = folder.file("list.db"), index = folder.file("index.db");
  {
    auto store = open(options(good), clock);
    SeededEntropy entropy(5);
    demand(store->commit([&](Change& change) {
      const RunId run = change.open_run(opening("AQ20-048-00077"));
      Bytes noise;
      for (int i = 0; i < 60000; ++i) noise.push_back(static_cast<std::byte>(entropy.next() >> 56));
      const std::int64_t capture = change.add_capture(run, "noise", "", noise);
      change.close_run(closing(run, "void"));
      change.prune({&capture, 1}, "Piet Hallgrim", "over");
    }));
  }
  {
    Connection connection(good, Access::read_write);
    ASSERT_GT(connection.ask_number("PRAGMA freelist_count"), 0) << "the prune left free pages";
    connection.ask("PRAGMA wal_checkpoint(TRUNCATE)");
  }
  Bytes bytes = file_bytes(good);
  // Source: sqlite.org/fileformat2.html, the database header: first trunk page of the free list at offset 32.
  for (int i = 32; i < 35; ++i) bytes[static_cast<std::size_t>(i)] = std::byte{0};
  bytes[35] = std::byte{4};
  write_file(lists, bytes);
  EXPECT_FALSE(verify(lists)->ok());
  fs::copy_file(good, index);
  {
    Raw raw(index);
    // An index that lacks a row, made as sqlite.org/pragma.html#pragma_writable_schema allows: the index is declared
    // over fewer rows, filled, and declared whole again.
    raw.run("PRAGMA writable_schema=ON");
    const std::string sql = raw.rows("SELECT sql FROM sqlite_schema WHERE name = 'run_opened_serial'")[0][0];
    ASSERT_TRUE(
        raw.run("DROP INDEX run_opened_serial; CREATE INDEX run_opened_serial ON run_opened(serial) WHERE run > 9"));
    ASSERT_TRUE(raw.run("UPDATE sqlite_schema SET sql = '" + sql + "' WHERE name = 'run_opened_serial'"));
  }
  const auto report = verify(index).value();
  ASSERT_FALSE(report.ok());
  EXPECT_EQ(report.first_fault->row, "run_opened");
}

TEST_F(VerifyTest, FromAnyEntryOnAndHowFarItIs) {
  VerifyOptions with;
  for (std::int64_t from = 1; from <= seal.entry; ++from) {
    with.from = from;
    const auto report = verify(good, with).value();
    EXPECT_TRUE(report.ok()) << "from " << from << ": "
                             << altered_problem(good, report.first_fault.value_or(Fault{})).text();
    EXPECT_EQ(report.entries, seal.entry - from + 1);
    EXPECT_EQ(report.seal, seal);
  }
  with.from = seal.entry + 1;
  EXPECT_EQ(verify(good, with).error().id, "verify_from_beyond");
  const std::string early = damaged(
      "early", [](Raw& raw) { return raw.run("UPDATE entry SET who = 'x' WHERE number = 3") && raw.changes() == 1; });
  with.from = 4;
  EXPECT_TRUE(verify(early, with)->ok()) << "what lies before is taken as it stands";
  with.from = 3;
  EXPECT_EQ(verify(early, with)->first_fault->entry, 3);
  const std::string late = damaged("late", [](Raw& raw) {
    return raw.run("UPDATE reading SET unit = 'um' WHERE run = (SELECT max(run) FROM run_closed)") && raw.changes() > 0;
  });
  with.from = std::stoll(Raw(late).rows("SELECT CAST(max(entry) AS TEXT) FROM run_closed")[0][0]);
  EXPECT_FALSE(verify(late, with)->ok()) << "a run that an earlier entry opened and a later one closed is looked at";

  std::int64_t last = -1, of = 0;
  VerifyOptions telling;
  telling.progress = [&](std::int64_t done, std::int64_t total) {
    EXPECT_GE(done, last);
    last = done, of = total;
  };
  EXPECT_TRUE(verify(good, telling)->ok());
  EXPECT_EQ(last, of);
  std::stop_source stop;
  stop.request_stop();
  VerifyOptions stopped;
  stopped.stop = stop.get_token();
  EXPECT_EQ(verify(good, stopped).error().id, "verify_stopped");
}

VerifyState finished(const BackgroundVerify& verify) {
  for (int i = 0; i < 2000 && !verify.state().finished; ++i) std::this_thread::sleep_for(std::chrono::milliseconds(5));
  return verify.state();
}

TEST_F(VerifyTest, InTheBackgroundBesideItsWriter) {
  auto store = open(options(good), clock);
  SeededEntropy entropy(9);
  {
    const BackgroundVerify beside(good);
    for (int i = 0; i < 5; ++i) whole_run(*store, "AQ20-053-0000" + std::to_string(i), entropy);
    const VerifyState state = finished(beside);
    EXPECT_TRUE(state.finished);
    EXPECT_FALSE(state.fault) << state.fault->what;
    EXPECT_FALSE(state.trouble) << state.trouble->text();
    EXPECT_GE(state.checked, seal.entry);
    EXPECT_EQ(state.checked, state.newest);
  }
  store.reset();
  const std::string path = damaged("background", [](Raw& raw) {
    return raw.run("UPDATE reading SET unit = 'um' WHERE run = 6 AND check_slug = 'red_centroid'") &&
           raw.changes() == 1;
  });
  StepwiseVerify steps(path, {});
  int count = 0;
  while (steps.step(2)) ++count;
  EXPECT_GT(count, 1);
  ASSERT_TRUE(steps.state().fault);
  EXPECT_EQ(steps.state().fault->column, "unit");
  EXPECT_FALSE(steps.step(2)) << "it has ended";
  const VerifyState missing = finished(BackgroundVerify(folder.file("none.db")));
  EXPECT_EQ(missing.trouble->id, "ledger_cannot_open");
  BackgroundVerify stopped(good);
  stopped.stop();
}

}  // namespace
}  // namespace probewright::db
