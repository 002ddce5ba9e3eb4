// Damage of every kind is found, by the program and by a python3 script that was written from CHAIN.md alone.
#include "db/verify.h"

#include <gmock/gmock.h>
#include <gtest/gtest.h>
#include <sqlite3.h>

#include <cstdio>
#include <fstream>
#include <functional>
#include <map>
#include <sstream>

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

}  // namespace
}  // namespace probewright::db
