// The chain against outside values, and CHAIN.md against the program.
#include "db/chain.h"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <fstream>
#include <set>

#include "db/hex.h"
#include "db/packing.h"
#include "db/projection.h"
#include "db/schema/schema.h"
#include "db/sha256.h"
#include "sample.h"
#include "tests/support/reference.h"

namespace probewright::db {
namespace {

using testing::HasSubstr;

std::string file_text(const std::string& path) {
  std::ifstream file(path, std::ios::binary);
  return {std::istreambuf_iterator<char>(file), {}};
}

/// The inputs that tests/reference/hash_vectors.csv names in words.
std::string message(const std::string& named) {
  if (named == "empty message") return {};
  if (named == "one million times the letter a") return std::string(1'000'000, 'a');
  return named.substr(std::string{"ASCII "}.size());
}

// Source: FIPS 180-4 examples and NIST CAVS, as listed in tests/reference/hash_vectors.csv.
TEST(Sha256, AgreesWithPublishedValues) {
  const auto table = reference::load("hash_vectors.csv");
  const auto algorithms = table.texts("algorithm"), inputs = table.texts("input"), digests = table.texts("digest");
  int checked = 0;
  for (std::size_t i = 0; i < algorithms.size(); ++i) {
    if (algorithms[i] != "SHA-256") continue;
    EXPECT_EQ(to_hex(sha256(message(inputs[i]))), digests[i]) << inputs[i];
    ++checked;
  }
  EXPECT_EQ(checked, 4);
}

TEST(Sha256, PiecesGiveTheSameAsTheWhole) {
  const std::string text = message("one million times the letter a");
  Sha256 hash;
  for (std::size_t at = 0; at < text.size(); at += 997) hash.add(std::string_view{text}.substr(at, 997));
  EXPECT_EQ(hash.finish(), sha256(text));
  EXPECT_EQ(hash.add("abc").finish(), sha256("abc")) << "begins anew";
}

TEST(Hex, GoesBothWaysAndRefusesTheRest) {
  const Digest digest = sha256("abc");
  EXPECT_EQ(digest_from_hex(to_hex(digest)), digest);
  EXPECT_EQ(hex(digest), to_hex(digest));
  EXPECT_FALSE(digest_from_hex("ba78"));
  EXPECT_FALSE(from_hex("abc"));
  EXPECT_FALSE(from_hex("BA"));
  EXPECT_FALSE(from_hex("0g"));
}

TEST(Packing, GivesBackWhatItTook) {
  SeededEntropy entropy(3);
  for (const std::size_t samples : {0u, 1u, 100u, 20000u}) {
    const Bytes wave = sample::wave(entropy, samples);
    const Packed packed = pack(wave);
    EXPECT_EQ(unpack(packed.packing, packed.stored, wave.size()).value(), wave);
    EXPECT_FALSE(unpack(packed.packing, packed.stored, wave.size() + 1));
    EXPECT_FALSE(unpack("lz4", packed.stored, wave.size()));
  }
  const Bytes noise = [&] {
    Bytes bytes;
    for (int i = 0; i < 1000; ++i) bytes.push_back(static_cast<std::byte>(entropy.next() >> 56));
    return bytes;
  }();
  EXPECT_EQ(pack(noise).packing, "none") << "noise does not pack";
}

TEST(Packing, NothingDamagedGetsThroughOrCrashes) {
  SeededEntropy entropy(4);
  const Bytes wave = sample::wave(entropy, 500);
  const Packed packed = pack(wave);
  ASSERT_EQ(packed.packing, "zstd");
  for (std::size_t i = 0; i < packed.stored.size(); ++i) {
    Bytes damaged = packed.stored;
    damaged[i] ^= std::byte{0x41};
    const auto decoded = unpack("zstd", damaged, wave.size());
    if (decoded) EXPECT_EQ(decoded->size(), wave.size());
    Bytes cut(packed.stored.begin(), packed.stored.begin() + static_cast<std::ptrdiff_t>(i));
    EXPECT_FALSE(unpack("zstd", cut, wave.size()));
  }
  EXPECT_FALSE(unpack("zstd", packed.stored, std::size_t{1} << 40)) << "refused before memory is taken";
}

const EntryHead example_head{1, "2026-12-01T05:36:12.000000Z", "ledger_begun", "station"};

Body example_data() {
  return Body::Object{{"emulated", true},
                      {"layout", newest_step},
                      {"layout_digest", to_hex(schema_digest(expected_schema()))},
                      {"previous_seal", nullptr},
                      {"software_commit", "0000000"},
                      {"software_version", "0.1.0"},
                      {"station", "Quay-1"},
                      {"volume", 1}};
}

TEST(ChainPage, StatesTheLayoutDigestAndAWorkedExample) {
  const std::string page = file_text(PW_SOURCE_DIR "/db/CHAIN.md");
  const std::string script = file_text(PW_SOURCE_DIR "/tests/db/verify_ledger.py");
  for (std::int64_t step = 1; step <= newest_step; ++step) {
    const std::string layout = to_hex(schema_digest(expected_schema(step)));
    EXPECT_THAT(page, HasSubstr("| " + std::to_string(step) + " | `" + layout + "` |"))
        << "a released step is never edited; a new step has a row of its own";
    EXPECT_THAT(script, HasSubstr(std::to_string(step) + ": \"" + layout));
  }
  const std::string body = entry_body(example_head, example_data());
  EXPECT_THAT(page, HasSubstr(body));
  EXPECT_THAT(page, HasSubstr(to_hex(entry_hash(Digest{}, body))));
  EXPECT_THAT(page, HasSubstr(std::to_string(application_id)));
}

TEST(ChainPage, NamesEveryDigestedColumnInOrder) {
  const std::string page = file_text(PW_SOURCE_DIR "/db/CHAIN.md");
  constexpr const char* words[] = {"integer", "text", "maybe text", "maybe real", "flag", "digest"};
  for (const auto columns : {reading_columns(), capture_columns()}) {
    std::size_t at = page.find("`" + std::string{columns.front().name} + "` integer,");
    ASSERT_NE(at, std::string::npos);
    for (const DigestedColumn& column : columns) {
      const std::string wanted = "`" + std::string{column.name} + "` " + words[static_cast<int>(column.field)];
      std::string flat = page.substr(at);
      std::replace(flat.begin(), flat.end(), '\n', ' ');
      const auto next = flat.find(wanted);
      ASSERT_NE(next, std::string::npos) << wanted;
      at += next;
    }
  }
}

/// Columns of every table of a fresh ledger, as "table.column".
std::set<std::string> columns_of_layout() {
  Connection scratch(":memory:", Access::create_read_write);
  for (std::int64_t step = 1; step <= newest_step; ++step) scratch.run(std::string{schema_step(step)});
  std::set<std::string> columns;
  Statement statement(scratch,
                      "SELECT m.name || '.' || c.name FROM sqlite_schema AS m JOIN pragma_table_xinfo(m.name) AS c"
                      " WHERE m.type = 'table'");
  for (Row row = statement.begin(); row.step();) columns.insert(row.text(0));
  return columns;
}

// No column without a counterpart in a body or a digest (the damage test changes each of them and must be noticed).
TEST(Layout, EveryColumnHasItsCounterpart) {
  std::set<std::string> covered;
  for (const ProjectedTable& table : projected_tables())
    for (const ProjectedColumn& column : table.columns) covered.insert(std::string{table.table} + "." + column.name);
  for (const DigestedColumn& column : reading_columns()) covered.insert(std::string{"reading."} + column.name);
  for (const DigestedColumn& column : capture_columns()) covered.insert(std::string{"capture."} + column.name);
  // The run leads the proof of its readings and captures; the capture's number leads its row, its digest covers the
  // bytes.
  for (const char* column : {"reading.run", "capture.run", "capture_bytes.capture", "capture_bytes.bytes"})
    covered.insert(column);
  // The body repeats number, time, kind and who; the hash is made over the body.
  for (const char* column : {"number", "time", "kind", "who", "body", "hash"})
    covered.insert(std::string{"entry."} + column);
  EXPECT_EQ(covered, columns_of_layout());
}

TEST(Layout, ItsPageNamesEveryTableAndColumn) {
  const std::string page = file_text(PW_SOURCE_DIR "/db/schema.md");
  for (const std::string& name : columns_of_layout()) {
    const auto dot = name.find('.');
    const auto section = page.find("\n## " + name.substr(0, dot) + "\n");
    ASSERT_NE(section, std::string::npos) << name;
    const std::string text = page.substr(section, page.find("\n## ", section + 4) - section);
    EXPECT_THAT(text, HasSubstr("`" + name.substr(dot + 1) + "`")) << name;
  }
  for (const SchemaObject& object : expected_schema())
    if (object.type == "view") EXPECT_THAT(page, HasSubstr("`" + object.name + "`"));
}

/// Runs SQL on a ledger with a run of every kind of row, as another program would; what SQLite said.
class LayoutTest : public testing::Test {
 protected:
  LayoutTest() {
    sample::begin_second_volume(path, clock);
    auto store = sample::open(sample::options(path), clock);
    SeededEntropy entropy(5);
    sample::whole_run(*store, "AQ20-048-00001", entropy);
    sample::demand(store->commit([](Change& change) {
      const Digest sheet = sha256(sample::sheet().text);
      change.add_signature({sheet, "Dalia Oduya", "engineer", "drafted", "", ""});
      change.add_signature({sheet, "Maren Quill", "quality", "approved", "", ""});
      change.put_in_force(sheet, {1896105772000000}, "Maren Quill", "first");
      const std::int64_t capture = 1;
      change.prune({&capture, 1}, "Piet Hallgrim", "over");
      change.add_entry("lot_opened", "Maren Quill", Body::Object{{"lot", "AQ20-W48-07"}});
    }));
  }
  std::string complaint(const std::string& sql) {
    Connection connection(path, Access::read_write);
    connection.run("PRAGMA foreign_keys=ON");
    try {
      connection.run("BEGIN; " + sql + "; ROLLBACK");
    } catch (const Error& error) {
      return error.problem().arguments.front().second;
    }
    return "";
  }
  sample::HandClock clock;
  sample::Folder folder;
  std::string path = folder.file("ledger.db");
};

TEST_F(LayoutTest, NothingIsChangedTakenAwayOrPutOverSomethingElse) {
  std::set<std::string> tables;
  for (const std::string& name : columns_of_layout()) tables.insert(name.substr(0, name.find('.')));
  EXPECT_EQ(tables.size(), 14u);
  for (const std::string& table : tables) {
    Connection connection(path, Access::read_write);
    ASSERT_GT(connection.ask_number("SELECT count(*) FROM " + table), 0) << table << " has no row to try on";
    const std::string column = connection.ask("SELECT name FROM pragma_table_info('" + table + "') LIMIT 1");
    EXPECT_THAT(complaint("UPDATE " + table + " SET " + column + " = " + column), HasSubstr("what is written stays"));
    EXPECT_THAT(complaint("DELETE FROM " + table),
                testing::AnyOf(HasSubstr("what is written stays"), HasSubstr("no prune entry names this capture")));
    const std::string replace = "INSERT OR REPLACE INTO " + table + " SELECT * FROM " + table + " LIMIT 1";
    EXPECT_THAT(complaint(replace), testing::AnyOf(HasSubstr("this key is taken"), HasSubstr("newest plus one"),
                                                   HasSubstr("the run is closed")))
        << table;
  }
}

TEST_F(LayoutTest, AnotherKeyThatIsTakenIsRefusedToo) {
  EXPECT_THAT(
      complaint(
          "INSERT OR REPLACE INTO document SELECT 1, digest, kind, name, revision, size, 'x' FROM document LIMIT 1"),
      HasSubstr("this key is taken"));
  EXPECT_THAT(
      complaint(
          "INSERT OR REPLACE INTO run_closed SELECT 999, entry, verdict, cause, cause_words, failing, provisional,"
          " readings, captures, proof FROM run_closed"),
      HasSubstr("this key is taken"));
  EXPECT_THAT(complaint("INSERT INTO entry VALUES (99, 't', 'k', 'w', '{}', zeroblob(32))"),
              HasSubstr("newest plus one"));
  EXPECT_THAT(complaint("INSERT INTO entry(time, kind, who, body, hash) VALUES ('t', 'k', 'w', '{}', zeroblob(32))"),
              HasSubstr("newest plus one"));
  EXPECT_THAT(
      complaint("INSERT INTO reading SELECT run, 99, 'x', value, none_reason, expanded_uncertainty, unit, lower_limit,"
                " upper_limit, acceptance_lower, acceptance_upper, margin, conformance_probability, ok, definition,"
                " cut_short FROM reading LIMIT 1"),
      HasSubstr("the run is closed"));
}

TEST_F(LayoutTest, BytesGoOnlyWhereAPruneEntryNamesThem) {
  EXPECT_THAT(complaint("DELETE FROM capture_bytes WHERE capture = 2"), HasSubstr("no prune entry names this capture"));
  EXPECT_THAT(complaint("INSERT INTO pruned SELECT 2, 99"), HasSubstr("FOREIGN KEY"));
}

TEST_F(LayoutTest, ViewsReadAsTheyAreMeant) {
  Connection connection(path, Access::read_only);
  EXPECT_EQ(connection.ask("SELECT verdict || ' ' || serial FROM run"), "pass AQ20-048-00001");
  EXPECT_EQ(connection.ask("SELECT count(*) FROM open_run"), "0");
  EXPECT_EQ(connection.ask("SELECT count(*) FROM run_reading WHERE lot = 'AQ20-W48-07'"), "7");
  EXPECT_EQ(connection.ask("SELECT signed_by FROM document_list WHERE kind = 'sheet'"),
            "Dalia Oduya (engineer), Maren Quill (quality)");
  EXPECT_EQ(connection.ask("SELECT hash FROM seal"),
            connection.ask("SELECT lower(hex(hash)) FROM entry ORDER BY number DESC"));
}

}  // namespace
}  // namespace probewright::db
