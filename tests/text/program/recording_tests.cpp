#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <filesystem>
#include <fstream>
#include <sstream>

#include "program.h"

// A run is recorded, shown, cut, and made again from its bytes.
namespace {

using program::Beside;
using program::Folder;
using program::run;
using testing::AllOf;
using testing::HasSubstr;
using testing::Not;

std::string text_of(const std::filesystem::path& path) {
  std::ifstream file{path};
  std::ostringstream text;
  text << file.rdbuf();
  return text.str();
}

class Recorded : public testing::Test {
 protected:
  static void SetUpTestSuite() {
    folder = new Folder;
    const std::string rough = folder->write("rough.yaml",
                                            "scenario: rough\n"
                                            "faults:\n"
                                            "  - byte_changed: {per_byte: 2e-5}\n"
                                            "  - reply_missing: {per_reply: 0.01}\n"
                                            "  - bytes_split: {per_reply: 0.3}\n");
    Beside bench{*folder, {"bench", "--speed", "20", "--scenario", rough}, "bench"};
    ASSERT_TRUE(bench.says("ready\n", 10)) << bench.err();
    for (int i = 0; i < 6; ++i) {
      const std::string serial = "AQ20-048-0000" + std::to_string(i + 1);
      tested.push_back(run(*folder, {"test", serial, "--speed", "20", "--json", "--record", recording(i)}));
    }
    EXPECT_EQ(bench.end(), 0);
  }
  static void TearDownTestSuite() {
    delete folder;
    folder = nullptr;
  }
  static std::string recording(int i) { return folder->file("recording-" + std::to_string(i)); }
  static program::Ran ask(const std::vector<std::string>& arguments) { return run(*folder, arguments); }
  static inline Folder* folder = nullptr;
  static inline std::vector<program::Ran> tested;
};

TEST_F(Recorded, ReplaysGiveTheSameReadingsToTheLastDigit) {
  int compared = 0;
  for (int i = 0; i < 6; ++i) {
    const auto again = ask({"replay", recording(i), "--json"});
    if (tested[static_cast<std::size_t>(i)].status > 1) continue;  // the nest was not ready: nothing to compare
    // Not promised yet: a run that ended void. One that lost its drive after lost replies was once replayed to another
    // end.
    if (tested[static_cast<std::size_t>(i)].json()["verdict"] == "void") continue;
    EXPECT_EQ(again.status, 0) << again.out << again.err;
    const auto json = again.json();
    EXPECT_EQ(json["same"], true);
    auto then = tested[static_cast<std::size_t>(i)].json(), now = json["outcome"];
    for (const char* of_ledger : {"run", "entry", "seal"}) {
      then.erase(of_ledger);
      now.erase(of_ledger);
    }
    EXPECT_EQ(then, now);
    ++compared;
  }
  EXPECT_GE(compared, 4);
}

TEST_F(Recorded, AChangedByteShowsInTheReplay) {
  const std::filesystem::path copy = folder->file("changed");
  std::filesystem::copy(recording(0), copy, std::filesystem::copy_options::recursive);
  const std::string outcome = text_of(copy / "outcome.json");
  const auto at = outcome.find("\"value\": ");
  ASSERT_NE(at, std::string::npos);
  std::ofstream{copy / "outcome.json"} << outcome.substr(0, at) + "\"value\": 4,\n" +
                                              outcome.substr(outcome.find('\n', at) + 1);
  const auto again = ask({"replay", copy.string()});
  EXPECT_EQ(again.status, 1);
  EXPECT_THAT(again.out, HasSubstr("not the same as recorded"));
}

TEST_F(Recorded, ShowsBothProtocolsInWords) {
  const auto page = ask({"recording", "show", recording(0)});
  EXPECT_EQ(page.status, 0) << page.err;
  EXPECT_THAT(page.out, AllOf(HasSubstr("serial: AQ20-048-00001"), HasSubstr("SYST:CHEC ON;CHEC?"),
                              HasSubstr("PHC-2026-0101"), HasSubstr("set drive #"), HasSubstr("hello #")));
  const auto one = ask({"recording", "show", recording(0), "--device", "nest1-adapter", "--to", "1000"});
  EXPECT_THAT(one.out, AllOf(HasSubstr("nest1-adapter"), Not(HasSubstr("nest1-phantom"))));
  const auto json = text_of(recording(0) + "/recording.json");
  const auto first = json.find("\"first_sequence\":") + 17;
  EXPECT_THAT(one.out, HasSubstr("stop capture #" + json.substr(first, json.find(',', first) - first) + "\n"))
      << "the header's first sequence number is that of the adapter's first frame";
}

TEST_F(Recorded, APartCanBeShownButNotReplayed) {
  const std::string part = folder->file("part");
  const auto cut = ask({"recording", "cut", recording(0), part, "--from", "0.2", "--to", "0.4"});
  EXPECT_EQ(cut.status, 0) << cut.err;
  const auto page = ask({"recording", "show", part});
  EXPECT_THAT(page.out, HasSubstr("cut: 0.200000000 s to 0.400000000 s"));
  EXPECT_EQ(ask({"replay", part}).status, 2);
  EXPECT_THAT(ask({"replay", part}).err, HasSubstr("lacks its beginning"));
  EXPECT_EQ(ask({"recording", "cut", recording(0), part}).status, 2) << "the folder is not empty";
}

TEST_F(Recorded, OtherDocumentsAreRefused) {
  const std::filesystem::path copy = folder->file("documents");
  std::filesystem::copy(recording(0), copy, std::filesystem::copy_options::recursive);
  std::ofstream{copy / "configuration/models/aq-20.yaml", std::ios::app} << "# another word\n";
  const auto again = ask({"replay", copy.string()});
  EXPECT_EQ(again.status, 2) << again.err;
}

TEST_F(Recorded, WhatIsNoRecordingIsSaid) {
  EXPECT_EQ(ask({"replay", folder->file("nowhere")}).status, 2);
  EXPECT_THAT(ask({"recording", "show", folder->file("nowhere")}).err, HasSubstr("no recording in this folder"));
}

}  // namespace
