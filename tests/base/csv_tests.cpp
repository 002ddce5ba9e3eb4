#include "station/base/csv.h"

#include <gtest/gtest.h>

#include <cmath>

#include "station/base/files.h"
#include "tests/support/reference.h"

namespace probewright {
namespace {

const CsvRules spectrum{{"wavelength_nm", "signal"}, {"dark"}, {}, false, 1u << 20};
const CsvRules anything{{}, {}, {}, true, 1u << 20};

std::vector<std::string> faults_of(std::string_view text, const CsvRules& rules) {
  std::vector<std::string> all;
  const auto table = read_csv(text, rules, "f");
  if (table.has_error())
    for (const Problem& problem : table.error()) all.push_back(problem.id + "@" + problem.where.substr(2));
  return all;
}
using Told = std::vector<std::string>;

TEST(Csv, ReadsASpectrum) {
  const auto table = read_csv("# my spectrometer\nwavelength_nm, signal\n650, 1.5\r\n650.5,-2e-3\n", spectrum, "f");
  ASSERT_TRUE(table.has_value());
  EXPECT_EQ(table->header, (std::vector<std::string>{"wavelength_nm", "signal"}));
  EXPECT_EQ(table->columns[0], (std::vector<double>{650.0, 650.5}));
  EXPECT_EQ(table->columns[1], (std::vector<double>{1.5, -0.002}));
  EXPECT_EQ(table->column("signal"), 1);
  EXPECT_EQ(table->column("dark"), -1);
}

// Source: RFC 4180 section 2, its examples of rules 1 to 7 (the last cell is spelt www here).
TEST(Csv, Rfc4180Examples) {
  const auto texts = [](std::string_view text) { return read_csv(text, anything, "f").value().texts; };
  using Columns = std::vector<std::vector<std::string>>;
  EXPECT_EQ(texts("x,y,z\r\naaa,bbb,ccc\r\nzzz,yyy,www\r\n"),
            (Columns{{"aaa", "zzz"}, {"bbb", "yyy"}, {"ccc", "www"}}));
  EXPECT_EQ(texts("x,y,z\r\naaa,bbb,ccc\r\nzzz,yyy,www"), (Columns{{"aaa", "zzz"}, {"bbb", "yyy"}, {"ccc", "www"}}));
  EXPECT_EQ(texts("x,y,z\r\n\"aaa\",\"bbb\",\"ccc\"\r\nzzz,yyy,www"),
            (Columns{{"aaa", "zzz"}, {"bbb", "yyy"}, {"ccc", "www"}}));
  EXPECT_EQ(texts("x,y,z\r\n\"aaa\",\"b\r\nbb\",\"ccc\"\r\nzzz,yyy,www"),
            (Columns{{"aaa", "zzz"}, {"b\r\nbb", "yyy"}, {"ccc", "www"}}));
  EXPECT_EQ(texts("x,y,z\r\n\"aaa\",\"b\"\"bb\",\"ccc\""), (Columns{{"aaa"}, {"b\"bb"}, {"ccc"}}));
}

TEST(Csv, FieldsMayHoldCommasAndBeEmpty) {
  const auto table = read_csv("a,b\n\"1,5\",\n,\"\"\n", anything, "f").value();
  EXPECT_EQ(table.texts[0], (std::vector<std::string>{"1,5", ""}));
  EXPECT_EQ(table.texts[1], (std::vector<std::string>{"", ""}));
  EXPECT_TRUE(std::isnan(table.columns[0][0]));
}

TEST(Csv, TellsEveryFaultWithItsPlace) {
  EXPECT_EQ(faults_of("wavelength_nm,sginal\n650,1\n", spectrum),
            (Told{"csv_unknown_column@1:15", "csv_missing_column@1:1"}));
  EXPECT_EQ(faults_of("wavelength_nm,signal,signal\n650,1,1\n", spectrum), (Told{"csv_duplicate_column@1:22"}));
  EXPECT_EQ(faults_of("wavelength_nm,signal\n650\n651,1,2\n652,1\n", spectrum),
            (Told{"csv_ragged@2:1", "csv_ragged@3:1"}));
  EXPECT_EQ(faults_of("# c\nwavelength_nm,signal\n650,nan\n651,1.2.3\n\"652\",inf\nx,\n", spectrum),
            (Told{"csv_not_a_number@3:5", "csv_not_a_number@4:5", "csv_not_a_number@5:7", "csv_not_a_number@6:1",
                  "csv_not_a_number@6:3"}));
  EXPECT_EQ(faults_of("wavelength_nm,signal\n650,\"1\n", spectrum), (Told{"csv_quote@2:5", "csv_not_a_number@2:5"}));
  EXPECT_EQ(faults_of("a,b\n1,2\"3\n", anything), (Told{"csv_quote@2:4"}));
  EXPECT_EQ(faults_of("a,b\n1,\"2\"3\n", anything), (Told{"csv_quote@2:6"}));
}

TEST(Csv, LinesInsideQuotesAreCounted) {
  EXPECT_EQ(faults_of("a,wavelength_nm\n\"one\ntwo\",x\n", CsvRules{{"wavelength_nm"}, {}, {"a"}, false, 100}),
            (Told{"csv_not_a_number@3:6"}));
}

TEST(Csv, EmptyTables) {
  for (const char* text : {"", "\n\n", "# only this\n", "a,b\n", "a,b\n\n# no rows\n"})
    EXPECT_EQ(faults_of(text, anything).size(), 1u) << text;
  EXPECT_EQ(faults_of("", anything), (Told{"csv_empty@1:1"}));
}

TEST(Csv, RefusesWhatIsNoText) {
  EXPECT_EQ(faults_of(std::string_view{"a\n1\0\n", 5}, anything), (Told{"text_control_character@2:2"}));
  EXPECT_EQ(faults_of("a\n\xE4\n", anything), (Told{"text_not_utf8@2:1"}));  // Latin-1
  EXPECT_EQ(faults_of("\xEF\xBB\xBF"
                      "a\n1\n",
                      CsvRules{{"a"}, {}, {}, false, 100}),
            Told{});
  EXPECT_EQ(read_csv("a\n1\n", CsvRules{{}, {}, {}, true, 3}, "f").error()[0].id, "file_too_large");
}

// A file of one endless line once took the square of its length, for the place of each cell.
TEST(Csv, AnEndlessLineIsRefusedAtOnce) {
  EXPECT_EQ(faults_of(std::string(1'000'000, ','), anything), (Told{"csv_too_wide@1:1001"}));
}

TEST(Csv, TellsAtMostFiftyFaults) {
  std::string text = "wavelength_nm,signal\n";
  for (int i = 0; i < 1000; ++i) text += "x,y\n";
  EXPECT_EQ(faults_of(text, spectrum).size(), 50u);
}

// Outside data: the NIST set read by our reader and by the tests' own.
TEST(Csv, ReadsThePublishedTables) {
  const auto text = read_file(reference::path("nist_strd/Norris.csv"), 1u << 20);
  const auto ours = read_csv(text.value(), CsvRules{{"x", "y"}, {}, {}, false, 1u << 20}, "Norris.csv");
  const auto theirs = reference::load("nist_strd/Norris.csv");
  ASSERT_TRUE(ours.has_value());
  EXPECT_EQ(ours->columns[0], theirs.numbers("y"));
  EXPECT_EQ(ours->columns[1], theirs.numbers("x"));
  EXPECT_EQ(ours->columns[0].size(), 36u);  // NIST: 36 observations
}

}  // namespace
}  // namespace probewright
