#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <chrono>
#include <csignal>
#include <thread>

#include "program.h"

namespace {

using program::Folder;
using program::run;
using testing::HasSubstr;

const std::string sheet = std::string{PW_SOURCE_DIR} + "/configs/sheets/aq-20.yaml";

TEST(Simulate, TellsItsEstimatesAndWhatTheyRestOn) {
  const Folder folder;
  const auto told = run(folder, {"simulate", "--probes", "96", "--seed", "3", "--sheet", sheet, "--faults", "lot"});
  EXPECT_EQ(told.status, 0);
  EXPECT_EQ(told.err, "");
  EXPECT_THAT(told.out, HasSubstr("Simulated production of AQ-20 by sheet AQ-20, revision 1: 96 probes, 2 stations, "
                                  "seed 3"));
  EXPECT_THAT(told.out, HasSubstr("estimate by simulation"));
  EXPECT_THAT(told.out, HasSubstr("pass at the first run"));
  EXPECT_THAT(told.out, HasSubstr("detector_open"));
  EXPECT_THAT(told.out, HasSubstr("Assumptions\n  - probes are drawn"));
  EXPECT_THAT(told.out, testing::Not(HasSubstr("Stopped early")));
}

TEST(Simulate, GivesTheSameJsonWhateverTheThreads) {
  const Folder folder;
  const std::vector<std::string> arguments{"simulate", "--model", "AQ-20",    "--probes", "200",
                                           "--seed",   "5",       "--retest", "--json"};
  auto with_threads = [&](const std::string& count) {
    auto all = arguments;
    all.insert(all.end(), {"--threads", count});
    return run(folder, all);
  };
  const auto one = with_threads("1"), two = with_threads("2");
  EXPECT_EQ(one.status, 0);
  EXPECT_EQ(one.out, two.out);
  const auto json = one.json();
  EXPECT_EQ(json["format"], 1);
  EXPECT_EQ(json["estimate"], true);
  EXPECT_EQ(json["all"]["probes"], 200);
  EXPECT_EQ(json["stopped_early"], false);
  EXPECT_EQ(json["shares"]["first_pass"]["of"], 200);
  EXPECT_EQ(json["stations"].size(), 5u);
  EXPECT_GT(json["assumptions"].size(), 5u);
}

// A person stops a long simulation: what there is is told, and marked.
TEST(Simulate, EndsEarlyWithWhatThereIs) {
  const Folder folder;
  program::Beside beside{folder, {"simulate", "--model", "AQ-35", "--probes", "1000000", "--json"}, "simulate"};
  std::this_thread::sleep_for(std::chrono::seconds{2});
  EXPECT_EQ(beside.end_by(SIGINT), 0);
  const auto json = nlohmann::json::parse(beside.out());
  EXPECT_EQ(json["stopped_early"], true);
  EXPECT_GT(json["all"]["probes"], 0);
  EXPECT_LT(json["all"]["probes"], 1000000);
}

TEST(Simulate, RefusesWhatMakesNoSense) {
  const Folder folder;
  const auto refused = [&](std::vector<std::string> arguments, const std::string& words) {
    arguments.insert(arguments.begin(), "simulate");
    const auto told = run(folder, arguments);
    EXPECT_EQ(told.status, 2) << words;
    EXPECT_EQ(told.out, "");
    EXPECT_THAT(told.err, HasSubstr(words));
  };
  refused({"--faults", "many"}, "does not say which probes are faulty");
  refused({"--model", "AQ-20", "--faults", "1.5"}, "makes no sense");
  refused({"--model", "AQ-20", "--stations", "100"}, "are too few for 100 stations");
  refused({}, "which model is simulated is not told: there is AQ-20, AQ-35");
  refused({"--model", "AQ-99"}, "has no model AQ-99");
  refused({"--probes", "0"}, "is not a whole number");
  refused({"--sheet", folder.write("sheet.yaml", "sheet: AQ-20\n")}, "sheet.yaml");
}

}  // namespace
