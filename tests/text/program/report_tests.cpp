#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <algorithm>
#include <cstdio>
#include <filesystem>
#include <fstream>
#include <memory>
#include <sstream>

#include "program.h"
#include "tests/made/ledger.h"

// Reports, labels and lists of a ledger that a test wrote, asked for as a person does.
namespace {

namespace fs = std::filesystem;
namespace made = probewright::made;
using probewright::Body;
using program::Folder;
using testing::AllOf;
using testing::ElementsAre;
using testing::HasSubstr;
using testing::Not;

std::string text_of_file(const std::string& path) {
  std::ifstream file{path};
  std::ostringstream text;
  text << file.rdbuf();
  return text.str();
}

/// The words of a PDF, as poppler reads them.
std::string pdf_text(const std::string& pdf) {
  const std::unique_ptr<FILE, int (*)(FILE*)> pipe{popen(("pdftotext -layout '" + pdf + "' -").c_str(), "r"), pclose};
  std::string text;
  char part[4096];
  while (const std::size_t got = fread(part, 1, sizeof part, pipe.get())) text.append(part, got);
  return text;
}

/// 00001 passed, 00002 failed by dark current, 00003 is void; an engineer tested 00001 once more for another purpose.
class Reports : public testing::Test {
 protected:
  Reports() {
    made::Ledger ledger{path};
    ledger.use(
        {"model", "AQ-20", "1", text_of_file(std::string{PW_SOURCE_DIR} + "/configs/models/aq-20.yaml"), "station"});
    ledger.clock().put("2026-03-10T06:00:00Z");
    ledger.entry("sign_in", "Imre Vasko", Body::Object{{"person", "Imre Vasko"}, {"role", "operator"}});
    ledger.entry("lot_opened", "Imre Vasko", Body::Object{{"lot", "AQ20-W48-07"}, {"model", "AQ-20"}});
    ledger.clock().put("2026-03-10T06:10:00Z");
    passed = ledger.run({.serial = "AQ20-048-00001", .cycle_s = 24.0}).value;
    failed = ledger
                 .run({.serial = "AQ20-048-00002",
                       .verdict = "fail",
                       .likely_cause = "leaky_detector",
                       .likely_cause_words = "a leaky detector",
                       .readings = {made::centroid(660.0), made::dark_current(6.4)}})
                 .value;
    ledger.run({.serial = "AQ20-048-00003", .verdict = "void", .readings = {}});
    ledger.clock().put("2026-03-11T09:00:00Z");
    ledger.run({.serial = "AQ20-048-00001", .purpose = "engineering", .lot = "", .operator_name = "Dalia Oduya"});
  }
  program::Ran ask(std::vector<std::string> arguments) {
    arguments.insert(arguments.end(), {"--ledger", path});
    return program::run(folder, arguments);
  }
  std::vector<std::string> files_in(const std::string& name) {
    std::vector<std::string> files;
    for (const auto& entry : fs::directory_iterator{folder.file(name)})
      files.push_back(entry.path().filename().string());
    std::sort(files.begin(), files.end());
    return files;
  }
  std::size_t labels_in_ledger() {
    std::size_t labels = 0;
    const auto told = ask({"trace", "--lot", "AQ20-W48-07", "--json"}).json();
    for (const auto& entry : told["entries"]) labels += entry["kind"] == "label_made" ? 1 : 0;
    return labels;
  }

  Folder folder;
  std::string path = folder.file("ledger.db");
  std::int64_t passed = 0, failed = 0;
};

TEST_F(Reports, ARunIsDrawnAndToldInText) {
  const auto told = ask({"report", "run", std::to_string(failed), "--out", folder.file("run.pdf")});
  EXPECT_EQ(told.status, 0) << told.err;
  EXPECT_EQ(told.err, "") << "the tool kit has nothing to say";
  EXPECT_THAT(told.out, AllOf(HasSubstr("FAIL"), HasSubstr("dark current"), HasSubstr("a leaky detector"),
                              HasSubstr("Report: " + folder.file("run.pdf") + ", ")));
  EXPECT_THAT(pdf_text(folder.file("run.pdf")),
              AllOf(HasSubstr("AQ20-048-00002"), HasSubstr("FAIL"), HasSubstr("6.40"), HasSubstr("DEMONSTRATION"),
                    HasSubstr("ISO 80601-2-61"), HasSubstr("2026-03-10 07:10")));
}

TEST_F(Reports, WithJsonAPageIsDrawnOnlyWhereItIsNamed) {
  const auto data = ask({"report", "run", std::to_string(passed), "--json"});
  EXPECT_EQ(data.status, 0);
  EXPECT_TRUE(data.json()["report"].is_null());
  EXPECT_EQ(data.json()["run"]["verdict"], "pass");
  const auto both = ask({"report", "run", std::to_string(passed + 1), "--json", "--out", folder.file("run.pdf")});
  EXPECT_EQ(both.json()["report"], folder.file("run.pdf"));
  EXPECT_EQ(both.json()["run"]["run"], passed) << "by its closing entry";
  EXPECT_TRUE(fs::exists(folder.file("run.pdf")));
}

TEST_F(Reports, ALifeIsDrawn) {
  const auto told = ask({"report", "serial", "AQ20-048-00001", "--out", folder.file("life.pdf")});
  EXPECT_EQ(told.status, 0) << told.err;
  EXPECT_THAT(told.out, AllOf(HasSubstr("2 runs, 2 pass"), HasSubstr("Other entries"), HasSubstr("sign_in")));
  EXPECT_THAT(pdf_text(folder.file("life.pdf")),
              AllOf(HasSubstr("Life of AQ20-048-00001"), HasSubstr("engineering"), HasSubstr("lot_opened")));
}

// The day of the newest entry had no production run; 2026-03-10 had one pass, one fail, one void: yields of 1 of 2.
TEST_F(Reports, AShiftIsTheDayThatIsAskedFor) {
  const auto newest = ask({"report", "shift", "--json"}).json();
  EXPECT_EQ(newest["from"], "2026-03-10T23:00:00.000000Z");
  EXPECT_EQ(newest["production"]["runs"], 0);
  EXPECT_EQ(newest["other_purposes"][0]["purpose"], "engineering");
  const auto day = ask({"report", "shift", "--day", "2026-03-10", "--json"}).json();
  EXPECT_EQ(day["probes"]["tested"], 3);
  EXPECT_EQ(day["probes"]["void"], 1);
  EXPECT_EQ(day["probes"]["first_pass_yield"], 0.5);
  EXPECT_EQ(day["failing"][0]["likely_cause_words"], "a leaky detector");
  EXPECT_EQ(day["nests"][0]["mean_cycle_s"], 24.0);
  const auto page = ask({"report", "shift", "--day", "2026-03-10", "--out", folder.file("shift.pdf")});
  EXPECT_EQ(page.status, 0) << page.err;
  EXPECT_THAT(page.out,
              AllOf(HasSubstr("first-pass yield 50.0 % (1 of 2 with a verdict)"), HasSubstr("DEMONSTRATION")));
  EXPECT_THAT(pdf_text(folder.file("shift.pdf")), AllOf(HasSubstr("50.0 %"), HasSubstr("a leaky detector")));
}

TEST_F(Reports, AShiftCanBeAskedForByTimesAndLot) {
  const auto hour = [&](const std::string& from, const std::string& to) {
    return ask({"report", "shift", "--from", from, "--to", to, "--json"}).json()["production"]["runs"];
  };
  EXPECT_EQ(hour("2026-03-10 07:00", "2026-03-10 08:00"), 3) << "the plant's clock is an hour ahead of UTC";
  EXPECT_EQ(hour("2026-03-10 06:00", "2026-03-10 07:00"), 0);
  EXPECT_EQ(hour("2026-03-10T06:00:00Z", "2026-03-10T07:00:00Z"), 3);
  const auto lot = ask({"report", "shift", "--lot", "AQ20-W48-07", "--json"}).json();
  EXPECT_EQ(lot["production"]["runs"], 3) << "a lot is asked for over all days";
  EXPECT_TRUE(lot["other_purposes"].empty());
}

TEST_F(Reports, WrongQuestionsAreRefused) {
  const auto refused = [&](const std::vector<std::string>& arguments, int status, const std::string& words) {
    const auto told = ask(arguments);
    EXPECT_EQ(told.status, status) << told.out << told.err;
    EXPECT_EQ(told.out, "");
    EXPECT_THAT(told.err, HasSubstr(words));
  };
  refused({"report", "run", "9999"}, 1, "no such entry");
  refused({"report", "run", "1"}, 1, "this entry is of no run");
  refused({"report", "serial", "AQ20-048-99999"}, 1, "holds no run of the serial");
  refused({"report", "shift", "--day", "10.03.2026"}, 2, "\"10.03.2026\" is not a day");
  refused({"report", "shift", "--from", "yesterday"}, 2, "\"yesterday\" is not a time");
  refused({"report", "shift", "--from", "2026-03-11", "--to", "2026-03-10"}, 2, "not before");
  refused({"report", "shift", "--day", "2026-03-10", "--from", "2026-03-10"}, 2, "cannot be asked for together");
  refused({"report", "run", std::to_string(passed), "--out", folder.file("none/run.pdf")}, 2, "could not be written");
  refused({"trace", "--lot", "AQ20-W48-99"}, 1, "holds nothing of lot AQ20-W48-99");
  refused({"trace", "--person", "Nobody"}, 1, "holds nothing of person Nobody");
  refused({"trace", "--day", "2026-02-30"}, 2, "is not a day");
  refused({"trace", "--entry", "9999"}, 1, "no such entry");
}

// --- labels

TEST_F(Reports, APassLabelIsMadeAfterItsEntry) {
  const auto told = ask({"label", "AQ20-048-00001", "--out", folder.file("labels"), "--operator", "Imre Vasko"});
  EXPECT_EQ(told.status, 0) << told.err;
  EXPECT_THAT(told.out, AllOf(HasSubstr("AQ20-048-00001: pass label of run " + std::to_string(passed)),
                              HasSubstr("DEMONSTRATION"), HasSubstr("AQ20-048-00001-pass.png")));
  EXPECT_THAT(files_in("labels"), ElementsAre("AQ20-048-00001-pass.pdf", "AQ20-048-00001-pass.png"));
  EXPECT_THAT(pdf_text(folder.file("labels/AQ20-048-00001-pass.pdf")),
              AllOf(HasSubstr("PASS"), HasSubstr("(01)09520000000202"), HasSubstr("(10)AQ20-W48-07"),
                    HasSubstr("(11)260310"), HasSubstr("(21)AQ20-048-00001"), HasSubstr("DEMONSTRATION")));
  const auto trace = ask({"trace", "AQ20-048-00001", "--json"}).json();
  const auto label = trace["entries"].back();
  EXPECT_EQ(label["kind"], "label_made");
  EXPECT_EQ(label["who"], "Imre Vasko");
  EXPECT_EQ(label["data"]["code"],
            "010952000000020211260310"
            "10AQ20-W48-07\x1d"
            "21AQ20-048-00001");
  EXPECT_EQ(label["data"]["run"], passed);
  EXPECT_EQ(program::run(folder, {"ledger", "verify", path}).status, 0);
}

TEST_F(Reports, AFailHasAFailLabelAndNoPassLabel) {
  const auto refused = ask({"label", "AQ20-048-00002", "--kind", "pass", "--out", folder.file("labels")});
  EXPECT_EQ(refused.status, 2);
  EXPECT_THAT(refused.err, HasSubstr("the last production run of AQ20-048-00002 ended as fail"));
  EXPECT_FALSE(fs::exists(folder.file("labels")));
  EXPECT_EQ(labels_in_ledger(), 0u);
  const auto made = ask({"label", "AQ20-048-00002", "--out", folder.file("labels"), "--json"});
  EXPECT_EQ(made.status, 0) << made.out;
  EXPECT_EQ(made.json()["kind"], "fail");
  EXPECT_EQ(made.json()["code"], "RUN-" + std::to_string(failed));
  EXPECT_THAT(pdf_text(folder.file("labels/AQ20-048-00002-fail.pdf")),
              AllOf(HasSubstr("FAIL"), Not(HasSubstr("(01)"))));
  const auto none = ask({"label", "AQ20-048-00003", "--out", folder.file("labels")});
  EXPECT_EQ(none.status, 2);
  EXPECT_THAT(none.err, HasSubstr("a void has no label"));
  EXPECT_EQ(ask({"label", "AQ20-048-99999"}).status, 2);
}

TEST_F(Reports, AReprintNeedsItsReasonAndSaysThatItIsOne) {
  const std::vector<std::string> first{"label", "AQ20-048-00001", "--out", folder.file("labels")};
  EXPECT_EQ(ask(first).status, 0);
  const auto refused = ask(first);
  EXPECT_EQ(refused.status, 2);
  EXPECT_THAT(refused.err, AllOf(HasSubstr("this would be copy 2"), HasSubstr("--reason")));
  EXPECT_EQ(labels_in_ledger(), 1u);
  auto again = first;
  again.insert(again.end(), {"--reason", "smudged", "--json"});
  const auto made = ask(again);
  EXPECT_EQ(made.status, 0) << made.out;
  EXPECT_EQ(made.json()["copy"], 2);
  EXPECT_THAT(files_in("labels"), ElementsAre("AQ20-048-00001-pass-copy2.pdf", "AQ20-048-00001-pass-copy2.png",
                                              "AQ20-048-00001-pass.pdf", "AQ20-048-00001-pass.png"));
  EXPECT_THAT(pdf_text(folder.file("labels/AQ20-048-00001-pass-copy2.pdf")), HasSubstr("copy 2"));
  EXPECT_THAT(ask({"trace", "AQ20-048-00001"}).out,
              HasSubstr("pass label of run " + std::to_string(passed) + ", copy 2: smudged"));
}

// What cannot be drawn is not on record as made, and leaves nothing behind.
TEST_F(Reports, ALabelThatCannotBeDrawnHasNoEntry) {
  const auto refused = ask({"label", "AQ20-048-00001", "--out", folder.file("labels"), "--height-mm", "10"});
  EXPECT_EQ(refused.status, 2);
  EXPECT_THAT(refused.err, HasSubstr("not legible"));
  EXPECT_TRUE(files_in("labels").empty());
  EXPECT_EQ(labels_in_ledger(), 0u);
  EXPECT_EQ(ask({"label", "AQ20-048-00001", "--out", "/proc/none"}).status, 2);
  EXPECT_EQ(labels_in_ledger(), 0u);
}

// --- lists

TEST_F(Reports, ALotTellsItsRunsAndEntries) {
  const auto told = ask({"trace", "--lot", "AQ20-W48-07"});
  EXPECT_EQ(told.status, 0);
  EXPECT_THAT(told.out, AllOf(HasSubstr("lot AQ20-W48-07: 3 runs, 1 pass, 1 fail, 1 void"), HasSubstr("lot_opened"),
                              HasSubstr("failing: dark current; likely: a leaky detector"),
                              HasSubstr("the adapter was lost"), HasSubstr("DEMONSTRATION")));
  const auto json = ask({"trace", "--lot", "AQ20-W48-07", "--json"}).json();
  EXPECT_EQ(json["lot"], "AQ20-W48-07");
  EXPECT_EQ(json["runs"].size(), 3u);
  EXPECT_EQ(json["runs"][1]["failing"][0], "dark_current");
  EXPECT_EQ(json["runs"][1]["likely_cause"], "leaky_detector");
  EXPECT_EQ(json["entries"][0]["kind"], "lot_opened");
}

TEST_F(Reports, APersonTellsWhatTheyDid) {
  const auto json = ask({"trace", "--person", "Imre Vasko", "--json"}).json();
  EXPECT_EQ(json["runs"].size(), 3u);
  ASSERT_EQ(json["entries"].size(), 2u);
  EXPECT_EQ(json["entries"][0]["kind"], "sign_in");
  EXPECT_THAT(ask({"trace", "--person", "Dalia Oduya"}).out,
              AllOf(HasSubstr("1 run, 1 pass"), HasSubstr("engineering")));
}

TEST_F(Reports, ADayIsThePlants) {
  EXPECT_EQ(ask({"trace", "--day", "2026-03-10", "--json"}).json()["runs"].size(), 3u);
  EXPECT_EQ(ask({"trace", "--day", "2026-03-11", "--json"}).json()["runs"].size(), 1u);
  EXPECT_EQ(ask({"trace", "--day", "2026-03-12"}).status, 1);
}

TEST_F(Reports, AnEntryTellsItsRun) {
  const auto json = ask({"trace", "--entry", std::to_string(failed + 1), "--json"}).json();
  EXPECT_EQ(json["entry"]["kind"], "run_closed");
  EXPECT_EQ(json["run"]["run"], failed);
  EXPECT_EQ(json["entry"]["hash"].get<std::string>().size(), 64u);
  EXPECT_THAT(ask({"trace", "--entry", "1"}).out, AllOf(HasSubstr("Entry 1: ledger_begun"), HasSubstr("Quay-1")));
}

}  // namespace
