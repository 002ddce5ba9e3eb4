#include "station/text/console.h"

#include <gtest/gtest.h>

#include <nlohmann/json.hpp>
#include <sstream>

namespace probewright::text {
namespace {

struct Talk {
  explicit Talk(Manner manner = {}) : console(out, err, manner) {}
  std::ostringstream out, err;
  Console console;
};

const Problem unreadable{"file_unreadable", "sheet.yaml", {{"reason", "no such file"}}};
const Problem lost{"port_missing", "nest 1", {}};

TEST(Console, AnswersAndProblemsGoDifferentWays) {
  Talk talk;
  talk.console.print("the answer");
  EXPECT_EQ(talk.console.refuse(unreadable), wrong_use);
  EXPECT_EQ(talk.out.str(), "the answer\n");
  EXPECT_EQ(talk.err.str(), "sheet.yaml: cannot read the file: no such file (check the path and its permissions)\n");
}

TEST(Console, TheStatusIsThatOfTheWorstProblem) {
  EXPECT_EQ(Talk{}.console.refuse(Problems{unreadable, lost}), could_not);
  EXPECT_EQ(Talk{}.console.refuse(Problems{unreadable, unreadable}), wrong_use);
  EXPECT_EQ(Talk{}.console.refuse(unreadable, answer_is_no), answer_is_no);
  EXPECT_EQ(Talk{}.console.refuse(Problems{}), could_not);
}

TEST(Console, WithJsonAProblemIsTheAnswer) {
  Talk talk{{.json = true}};
  EXPECT_EQ(talk.console.refuse(unreadable), wrong_use);
  const auto json = nlohmann::json::parse(talk.out.str());
  EXPECT_EQ(json["problem"]["what"], "cannot read the file: no such file");
  EXPECT_EQ(json["problem"]["where"], "sheet.yaml");
  EXPECT_EQ(json["problem"]["remedy"], "check the path and its permissions");
  EXPECT_FALSE(json.contains("problems"));
  EXPECT_EQ(talk.err.str(), "");
}

TEST(Console, SeveralProblemsAreAllToldInJson) {
  Talk talk{{.json = true}};
  talk.console.refuse(Problems{unreadable, lost});
  const auto json = nlohmann::json::parse(talk.out.str());
  ASSERT_EQ(json["problems"].size(), 2u);
  EXPECT_EQ(json["problem"], json["problems"][0]);
  EXPECT_EQ(json["problems"][1]["where"], "nest 1");
}

TEST(Progress, IsDrawnOnATerminalOnlyAndTakenAway) {
  Talk watched{{.err_is_terminal = true}};
  {
    Progress progress{watched.console, "entries checked"};
    for (int i = 0; i <= 1000; ++i) progress.at(i, 1000);
  }
  EXPECT_NE(watched.err.str().find("entries checked: 57 %"), std::string::npos);
  EXPECT_TRUE(watched.err.str().ends_with("\r\x1b[K")) << "the line is cleared at the end";
  EXPECT_LT(watched.err.str().size(), 101 * 40u) << "drawn once for each per cent";

  for (const Manner manner : {Manner{}, Manner{.json = true, .err_is_terminal = true}}) {
    Talk quiet{manner};
    Progress{quiet.console, "entries checked"}.at(5, 10);
    EXPECT_EQ(quiet.err.str() + quiet.out.str(), "");
  }
}

}  // namespace
}  // namespace probewright::text
