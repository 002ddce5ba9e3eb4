#include "station/pages/shift_report.h"

#include <gtest/gtest.h>

#include <QImage>
#include <algorithm>
#include <cmath>
#include <limits>

#include "looking.h"
#include "station/pages/paper.h"

namespace probewright::pages {
namespace {

const std::string seal = "3f1c9a0be47d5526810fa9c4d2b7e6608f3a1d5c7b92e04466aa5d19c8e7f203";

// A wave without randomness: enough for a drawing.
std::vector<double> centroids(int count) {
  std::vector<double> values;
  for (int i = 0; i < count; ++i) values.push_back(660.0 + 0.9 * std::sin(0.37 * i) + 0.5 * std::sin(2.11 * i + 1.0));
  return values;
}

ShiftReport usual() {
  ShiftReport report;
  report.station = "Quay-1";
  report.zone = Zone::read("Europe/Amsterdam").value();
  report.begin = parse_utc("2026-12-01T05:00:00Z").value();
  report.end = parse_utc("2026-12-01T13:00:00Z").value();
  report.printed = parse_utc("2026-12-01T13:02:11Z").value();
  report.people = {{"Imre Vasko", "operator"}, {"Dalia Oduya", "engineer"}};
  report.lots = {"AQ20-W48-07, model AQ-20, sheet revision 4"};
  report.counts = {136, 129, 126, 5, 2};
  report.failing_checks = {{"secondary emission", 1, "red LED out of its bin"},
                           {"saturation error 70 %", 2, "infrared LED out of its bin"},
                           {"dark current", 4, "leaky detector or a soiled lens"}};
  report.nests = {{"nest 1", 36, 34, 1, 1, 23.9, "dark current"},
                  {"nest 2", 35, 33, 2, 0, 24.1, "dark current"},
                  {"nest 3", 35, 32, 3, 0, 24.0, "saturation error 70 %"},
                  {"nest 4", 35, 34, 0, 1, 23.8, ""}};
  report.charts = {RunChart{"red centroid", "nm", centroids(141), 657.4, 662.6}};
  report.charts[0].values[40] = 663.1;
  report.charts[0].values[77] = std::numeric_limits<double>::quiet_NaN();
  report.seal = seal;
  report.entry = 4711;
  report.verify_command = "probewright ledger verify /var/lib/probewright/Quay-1/ledger.db --seal " + seal;
  report.cautions =
      "A pass is production evidence: this probe met its limit sheet on this station. It does not show the accuracy of "
      "saturation readings in people.\nThe limits, models and certificates that come with this program are a "
      "demonstration.";
  return report;
}

// Words as pdftotext gives them, with line breaks as spaces.
std::string flat(std::string text) {
  std::replace(text.begin(), text.end(), '\n', ' ');
  return text;
}

void expect_words(const std::string& text, std::initializer_list<const char*> words) {
  for (const char* word : words) EXPECT_NE(text.find(word), std::string::npos) << word << "\nis not in\n" << text;
}

std::size_t times_in(const std::string& text, const std::string& words) {
  std::size_t count = 0;
  for (auto at = text.find(words); at != std::string::npos; at = text.find(words, at + 1)) ++count;
  return count;
}

TEST(ShiftReport, SaysWhatTheShiftDid) {
  const looking::Folder folder;
  const auto pages = write_shift_report(usual(), folder / "shift.pdf");
  ASSERT_FALSE(pages.has_error()) << pages.error().text();
  const auto facts = looking::facts_of(folder / "shift.pdf");
  EXPECT_EQ(facts.pages, *pages);
  EXPECT_NEAR(facts.width_mm, 210.0, 0.2);  // A4; the tool kit rounds to whole points, 0.35 mm
  EXPECT_NEAR(facts.height_mm, 297.0, 0.2);
  const std::string text = flat(looking::text_of(folder / "shift.pdf"));
  expect_words(text, {"Shift report, Quay-1",
                      "2026-12-01 06:00 to 14:00 (Europe/Amsterdam)",
                      "Imre Vasko (operator)",
                      "Dalia Oduya (engineer)",
                      "AQ20-W48-07, model AQ-20, sheet revision 4",
                      "dark current",
                      "saturation error 70 %",
                      "secondary emission",
                      "leaky detector",
                      "nest 4",
                      "red centroid, nm",
                      "4711",
                      seal.c_str(),
                      "ledger verify",
                      "It does not show the accuracy",
                      "printed 2026-12-01 14:02",
                      "upper acceptance limit 662.6",
                      "129 in all",
                      "page 1 of 2",
                      "page 2 of 2"});
  EXPECT_EQ(text.find("DEMONSTRATION"), std::string::npos);
}

// By hand: 129 / (129 + 5) = 96.27 %, 126 / 134 = 94.03 %; nest 3: 32 / 35 = 91.43 %. The tests run under a German
// locale, so a comma would show.
TEST(ShiftReport, YieldIsOfProbesWithAVerdictAndHasAPoint) {
  const looking::Folder folder;
  ASSERT_FALSE(write_shift_report(usual(), folder / "shift.pdf").has_error());
  const std::string text = flat(looking::text_of(folder / "shift.pdf"));
  expect_words(text, {"96.3 %", "94.0 %", "of 134", "91.4 %", "24.0 s"});
  EXPECT_EQ(text.find("96,3"), std::string::npos);
}

/// How many pixels of the first page differ between two PDFs.
int difference(const std::filesystem::path& a, const std::filesystem::path& b) {
  const QImage one{QString::fromStdString(looking::picture_of(a, 50).string())};
  const QImage two{QString::fromStdString(looking::picture_of(b, 50).string())};
  EXPECT_EQ(one.size(), two.size());
  int count = 0;
  for (int y = 0; y < std::min(one.height(), two.height()); ++y)
    for (int x = 0; x < std::min(one.width(), two.width()); ++x) count += one.pixel(x, y) != two.pixel(x, y) ? 1 : 0;
  return count;
}

// At the head of each page, where it can be read in the text, and large across it. At 50 dpi A4 has 241 000 pixels;
// letters of 20 mm and more along the diagonal cover over 3 % of them, all other differences far below 1 %.
TEST(ShiftReport, DemonstrationStandsOnEveryPage) {
  const looking::Folder folder;
  ShiftReport report = usual();
  ASSERT_FALSE(write_shift_report(report, folder / "shift.pdf").has_error());
  report.emulated = true;
  const auto pages = write_shift_report(report, folder / "demo.pdf");
  ASSERT_FALSE(pages.has_error());
  const std::string text = looking::text_of(folder / "demo.pdf");
  EXPECT_EQ(times_in(text, "DEMONSTRATION"), static_cast<std::size_t>(*pages)) << text;
  EXPECT_GT(difference(folder / "shift.pdf", folder / "demo.pdf"), 241'000 * 3 / 100);
}

TEST(ShiftReport, AnotherPurposeStandsOnEveryPage) {
  const looking::Folder folder;
  ShiftReport report = usual();
  report.purpose = "training";
  const auto pages = write_shift_report(report, folder / "training.pdf");
  ASSERT_FALSE(pages.has_error());
  EXPECT_EQ(times_in(looking::text_of(folder / "training.pdf"), "TRAINING"), static_cast<std::size_t>(*pages));
}

// Ligatures once made "first" of the page another word than what people type into a search field.
TEST(ShiftReport, WordsCanBeSearchedFor) {
  const looking::Folder folder;
  ASSERT_FALSE(write_shift_report(usual(), folder / "shift.pdf").has_error());
  expect_words(flat(looking::text_of(folder / "shift.pdf")), {"passed first time", "first-pass yield", "certificates"});
}

TEST(ShiftReport, AnEmptyShiftIsToldInWords) {
  const looking::Folder folder;
  ShiftReport report = usual();
  report.people.clear();
  report.lots.clear();
  report.counts = {};
  report.failing_checks.clear();
  report.nests.clear();
  report.charts = {RunChart{"red centroid", "nm", {}, 657.4, 662.6}};
  ASSERT_FALSE(write_shift_report(report, folder / "empty.pdf").has_error());
  const std::string text = flat(looking::text_of(folder / "empty.pdf"));
  expect_words(text, {"nobody signed in", "none open", "no verdict yet", "No check failed in this shift.",
                      "No nest was used in this shift.", "No run of this shift has such a reading.", "page 1 of 1",
                      seal.c_str()});
  EXPECT_EQ(text.find("nan"), std::string::npos);
}

TEST(ShiftReport, OddChartsAreDrawn) {
  const looking::Folder folder;
  const double none = std::numeric_limits<double>::quiet_NaN();
  ShiftReport report = usual();
  const RunChart charts[] = {{"one value", "nm", {660.0}, {}, {}},
                             {"all alike", "nA", {0.0, 0.0, 0.0}, {}, {}},
                             {"first and last missing", "", {none, 1.0, none}, {}, 2.0},
                             {"infinite", "mV", {std::numeric_limits<double>::infinity(), 1.0}, 0.0, {}},
                             {"many", "nm", centroids(5000), 657.4, 662.6}};
  for (const RunChart& chart : charts) {
    report.charts = {chart};
    ASSERT_FALSE(write_shift_report(report, folder / ("chart " + chart.name + ".pdf")).has_error()) << chart.name;
    const std::string text = flat(looking::text_of(folder / ("chart " + chart.name + ".pdf")));
    expect_words(text, {("Run chart: " + chart.name).c_str(), "run of the shift"});
  }
}

TEST(ShiftReport, LongTablesRunOnWithTheirHeads) {
  const looking::Folder folder;
  ShiftReport report = usual();
  report.emulated = true;
  report.people.clear();
  for (int i = 0; i < 14; ++i)
    report.people.push_back({"Wilhelmina-Alexandra van der Quayhaven-Castellan " + std::to_string(i), "operator"});
  report.lots.assign(30, "AQ35-W48-LONG-LOT-07, model AQ-35, sheet revision 12, a wrap for the smallest patients");
  report.failing_checks.clear();
  for (int i = 0; i < 60; ++i)
    report.failing_checks.push_back(
        {"a check with quite a long name that has to wrap somewhere " + std::to_string(i), i + 1,
         "Donaudampfschifffahrtselektrizitaetenhauptbetriebswerkbauunterbeamtengesellschaft"});
  report.nests.clear();
  for (int i = 0; i < 60; ++i)
    report.nests.push_back({"nest " + std::to_string(i + 1), 1000, 990, 8, 2, 24.0, "dark current"});
  const auto pages = write_shift_report(report, folder / "long.pdf");
  ASSERT_FALSE(pages.has_error());
  EXPECT_GE(*pages, 5);
  const std::string text = looking::text_of(folder / "long.pdf");
  expect_words(flat(text),
               {("page 1 of " + std::to_string(*pages)).c_str(), "nest 60", "The 10 commonest of 60 are drawn"});
  EXPECT_GE(times_in(text, "likely cause"), 3u) << "the head of a table stands on each of its pages";
}

TEST(ShiftReport, ALongStationNameStaysOnThePage) {
  const looking::Folder folder;
  ShiftReport report = usual();
  report.station = "Quay-1 of the western hall, behind the second lock, by the window that does not open";
  ASSERT_FALSE(write_shift_report(report, folder / "station.pdf").has_error());
  expect_words(flat(looking::text_of(folder / "station.pdf")), {("Shift report, " + report.station).c_str()});
}

TEST(ShiftReport, TheFileTellsWhenItWasPrinted) {
  const looking::Folder folder;
  ASSERT_FALSE(write_shift_report(usual(), folder / "shift.pdf").has_error());
  expect_words(looking::output_of("pdfinfo", {"-isodates", (folder / "shift.pdf").string()}), {"2026-12-01T13:02:11Z"});
}

TEST(ShiftReport, CountsThatDoNotAddUpAreRefused) {
  const looking::Folder folder;
  const ShiftCounts wrong[] = {{137, 129, 126, 5, 2}, {136, 129, 135, 5, 2}, {-1, -1, 0, 0, 0}, {0, 1, 1, -1, 0}};
  for (const ShiftCounts& counts : wrong) {
    ShiftReport report = usual();
    report.counts = counts;
    const auto written = write_shift_report(report, folder / "wrong.pdf");
    ASSERT_TRUE(written.has_error()) << counts.tested;
    EXPECT_EQ(written.error().id, "report_counts");
  }
  EXPECT_FALSE(std::filesystem::exists(folder / "wrong.pdf"));
}

TEST(ShiftReport, WithoutASealThereIsNone) {
  const looking::Folder folder;
  for (const std::string& text : {std::string{}, seal.substr(1), seal + "0", std::string(64, 'G')}) {
    ShiftReport report = usual();
    report.seal = text;
    const auto written = write_shift_report(report, folder / "wrong.pdf");
    ASSERT_TRUE(written.has_error()) << text;
    EXPECT_EQ(written.error().id, "report_no_seal");
  }
}

// --- filling pages

Block block(double height_mm, bool with_next = false) { return {height_mm, nullptr, with_next, false, nullptr}; }

std::vector<std::size_t> sizes(const std::vector<std::vector<const Block*>>& pages) {
  std::vector<std::size_t> all;
  for (const auto& page : pages) all.push_back(page.size());
  return all;
}

using Sizes = std::vector<std::size_t>;

TEST(Paper, BlocksFillPages) {
  EXPECT_EQ(sizes(paginated({}, 100)), (Sizes{0}));
  EXPECT_EQ(sizes(paginated({block(50), block(50)}, 100)), (Sizes{2}));
  EXPECT_EQ(sizes(paginated({block(50), block(51), block(10)}, 100)), (Sizes{1, 2}));
  EXPECT_EQ(sizes(paginated({block(500), block(10)}, 100)), (Sizes{1, 1})) << "one too high stands alone";
}

TEST(Paper, AHeadingStaysWithWhatFollows) {
  EXPECT_EQ(sizes(paginated({block(85), block(10, true), block(10)}, 100)), (Sizes{1, 2}));
  EXPECT_EQ(sizes(paginated({block(75), block(10, true), block(10, true), block(10)}, 100)), (Sizes{1, 3}));
  EXPECT_EQ(sizes(paginated({block(85), block(10, true)}, 100)), (Sizes{2})) << "nothing follows";
}

TEST(Paper, NoPageBeginsWithWhiteSpace) {
  Block white = block(20);
  white.space = true;
  EXPECT_EQ(sizes(paginated({block(90), white, block(10), white, block(60)}, 100)), (Sizes{2, 1}));
  EXPECT_EQ(sizes(paginated({block(70), white, block(10), white, block(60)}, 100)), (Sizes{3, 1}));
}

TEST(Paper, AHeadIsPutInAgain) {
  const auto head = std::make_shared<Block>(block(10, true));
  Block row = block(30);
  row.head = head;
  const std::vector<Block> blocks{*head, block(30), row, row, row};
  const auto pages = paginated(blocks, 100);
  ASSERT_EQ(sizes(pages), (Sizes{4, 2}));
  EXPECT_EQ(pages[1][0], head.get());
}

}  // namespace
}  // namespace probewright::pages
