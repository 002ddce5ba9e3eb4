#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <fstream>
#include <sstream>

#include "program.h"

namespace {

using program::Folder;
using program::run;
using testing::HasSubstr;

const std::string sheet = std::string{PW_SOURCE_DIR} + "/configs/sheets/aq-20.yaml";
const std::string model = std::string{PW_SOURCE_DIR} + "/configs/models/aq-20.yaml";

std::string text_of(const std::string& file) {
  std::ostringstream text;
  text << std::ifstream{file}.rdbuf();
  return text.str();
}

/// The text with one piece of it replaced; the piece must be there.
std::string with(std::string text, const std::string& old, const std::string& fresh) {
  const auto at = text.find(old);
  if (at == std::string::npos) throw std::runtime_error("the sheet holds no " + old);
  return text.replace(at, old.size(), fresh);
}

class Limits : public testing::Test {
 protected:
  Folder folder;
};

TEST_F(Limits, TheDemonstrationsSheetIsWithoutFaultAndFitsItsModel) {
  const auto told = run(folder, {"limits", "check", sheet, "--model", model});
  EXPECT_EQ(told.status, 0) << told.err;
  EXPECT_THAT(told.out, HasSubstr("red_centroid"));
  EXPECT_THAT(told.out, HasSubstr("no fault"));
  const auto json = run(folder, {"limits", "check", sheet, "--json"}).json();
  EXPECT_EQ(json["format"], 1);
  EXPECT_EQ(json["sheet"], "AQ-20");
  const auto& checks = json["checks"];
  const auto red =
      std::find_if(checks.begin(), checks.end(), [](const auto& c) { return c["check"] == "red_centroid"; });
  ASSERT_NE(red, checks.end());
  EXPECT_EQ((*red)["lower"], 655.0);
  EXPECT_EQ((*red)["upper"], 665.0);
  EXPECT_EQ((*red)["unit"], "nm");
}

TEST_F(Limits, EveryFaultIsToldWithLineAndColumn) {
  const std::string file = folder.write("bad.yaml",
                                        "sheet: AQ-20\nrevision: 1\nreason: a trial\ndecision: as written\nchecks:\n"
                                        "  red_centroid: {lower: 655 mA, upper: 665 nm, U: 0.3 nm}\n"
                                        "  red_centriod: record only\n"
                                        "  red_drive: {lower: 21 mA, upper: 19 mA, U: 0.1 mA}\n");
  const auto told = run(folder, {"limits", "check", file});
  EXPECT_EQ(told.status, 2);
  EXPECT_EQ(told.out, "");
  EXPECT_THAT(told.err, HasSubstr("bad.yaml:6:"));
  EXPECT_THAT(told.err, HasSubstr("bad.yaml:7:"));
  EXPECT_THAT(told.err, HasSubstr("red_centroid")) << "the nearest valid word is named";
  EXPECT_THAT(told.err, HasSubstr("bad.yaml:8:"));
  std::istringstream lines{told.err};
  for (std::string line; std::getline(lines, line);) EXPECT_TRUE(line.ends_with(")")) << "no remedy: " << line;
  const auto json = run(folder, {"limits", "check", file, "--json"});
  EXPECT_EQ(json.status, 2);
  EXPECT_GE(json.json()["problems"].size(), 3u);
}

TEST_F(Limits, ASheetThatLacksACheckOfTheRoutineDoesNotFitItsModel) {
  const std::string text = text_of(sheet);
  const auto at = text.find("\n  red_centroid:");
  ASSERT_NE(at, std::string::npos);
  std::string less = text;
  less.erase(at, text.find('\n', at + 1) - at);
  const auto told = run(folder, {"limits", "check", folder.write("less.yaml", less), "--model", model});
  EXPECT_EQ(told.status, 2);
  EXPECT_THAT(told.err, HasSubstr("red_centroid"));
}

TEST_F(Limits, ADifferenceIsToldInWordsWithItsDirection) {
  const std::string wider = folder.write("wider.yaml", with(text_of(sheet), "upper: 948.3", "upper: 949.3"));
  const auto told = run(folder, {"limits", "diff", sheet, wider});
  EXPECT_EQ(told.status, 0) << told.err;
  EXPECT_THAT(told.out, HasSubstr("infrared_centroid"));
  EXPECT_THAT(told.out, HasSubstr("looser"));
  const auto back = run(folder, {"limits", "diff", wider, sheet, "--json"}).json();
  ASSERT_TRUE(back.contains("changes")) << back;
  EXPECT_EQ(back["changes"][0]["subject"], "infrared_centroid");
  EXPECT_EQ(back["changes"][0]["move"], "tighter");
  EXPECT_THAT(run(folder, {"limits", "diff", sheet, sheet}).out, HasSubstr("no difference"));
}

TEST_F(Limits, AFileThatIsNotThereIsRefused) {
  const auto told = run(folder, {"limits", "check", folder.file("none.yaml")});
  EXPECT_EQ(told.status, 2);
  EXPECT_THAT(told.err, HasSubstr("none.yaml: cannot read the file"));
}

}  // namespace
