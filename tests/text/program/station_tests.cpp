#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <chrono>
#include <csignal>
#include <fstream>
#include <memory>
#include <thread>

#include "db/statement.h"
#include "program.h"

// A bench in one process, the station in another, a ledger between runs: what README tells, as it tells it.
namespace {

using program::Beside;
using program::Folder;
using program::run;
using testing::AllOf;
using testing::HasSubstr;
using testing::MatchesRegex;
using testing::Not;

constexpr const char* serial = "AQ20-048-00001";

class Station : public testing::Test {
 protected:
  program::Ran ask(const std::vector<std::string>& arguments) { return run(folder, arguments); }
  std::string ledger() const { return folder.file("data/probewright/Quay-1/ledger.db"); }
  Folder folder;
};

/// One probe tested once, for all tests that look at what is left of it.
class OneRun : public testing::Test {
 protected:
  static void SetUpTestSuite() {
    folder = new Folder;
    Beside bench{*folder, {"bench", "--speed", "10", "--truth", folder->file("truth.json")}, "bench"};
    ASSERT_TRUE(bench.says("ready\n", 10)) << bench.err();
    tested = run(*folder, {"test", serial, "--speed", "10", "--operator", "Imre Vasko", "--json"});
    EXPECT_EQ(bench.end(), 0) << "a bench that is asked to end has done its work: " << bench.err();
  }
  static void TearDownTestSuite() {
    delete folder;
    folder = nullptr;
  }
  static program::Ran ask(const std::vector<std::string>& arguments) { return run(*folder, arguments); }
  static std::string ledger() { return folder->file("data/probewright/Quay-1/ledger.db"); }
  static inline Folder* folder = nullptr;
  static inline program::Ran tested;
};

TEST_F(OneRun, EndsWithAVerdictAndTheExitStatusThatFitsIt) {
  const auto json = tested.json();
  EXPECT_EQ(json["format"], 1);
  EXPECT_EQ(json["serial"], serial);
  EXPECT_EQ(json["purpose"], "engineering");
  EXPECT_EQ(json["verdict"], "pass") << tested.out;
  EXPECT_EQ(tested.status, 0);
  EXPECT_GE(json["readings"].size(), 10u);
}

TEST_F(OneRun, IsInTheLedgerAndTheLedgerAgrees) {
  const auto told = ask({"ledger", "verify", ledger(), "--json"});
  EXPECT_EQ(told.status, 0) << told.out;
  const auto json = told.json();
  EXPECT_EQ(json["ok"], true);
  EXPECT_TRUE(json["first_fault"].is_null());
  EXPECT_EQ(json["runs"], 1);
  EXPECT_EQ(json["open_runs"], 0);
  EXPECT_EQ(json["readings"], tested.json()["readings"].size());
  EXPECT_GE(json["captures"].get<int>(), 5);
  EXPECT_EQ(json["seal"], tested.json()["seal"]) << "the run's closing entry is the newest";
  EXPECT_EQ(json["seal_entry"], tested.json()["entry"]);
}

TEST_F(OneRun, TraceTellsWhatTestTold) {
  const auto told = ask({"trace", serial, "--json"});
  EXPECT_EQ(told.status, 0) << told.err;
  const auto history = told.json();
  ASSERT_EQ(history["runs"].size(), 1u);
  const auto &past = history["runs"][0], now = tested.json();
  EXPECT_EQ(past["run"], now["run"]);
  EXPECT_EQ(past["verdict"], now["verdict"]);
  EXPECT_EQ(past["operator"], "Imre Vasko");
  EXPECT_EQ(past["emulated"], true);
  EXPECT_EQ(past["documents"].size(), 7u) << "station, model, sheet, two certificates, diagnosis rules, table";
  EXPECT_EQ(past["devices"].size(), 2u);
  ASSERT_EQ(past["readings"].size(), now["readings"].size());
  for (std::size_t i = 0; i < past["readings"].size(); ++i)
    for (const char* key : {"check", "value", "unit", "expanded_uncertainty", "margin"})
      EXPECT_EQ(past["readings"][i][key], now["readings"][i][key]) << past["readings"][i]["check"] << ' ' << key;
}

TEST_F(OneRun, TraceForPeopleSaysThatItIsADemonstration) {
  const auto told = ask({"trace", serial});
  EXPECT_THAT(told.out, AllOf(HasSubstr("1 run, 1 pass"), HasSubstr("DEMONSTRATION"), HasSubstr("red centroid"),
                              HasSubstr("Quay-1, nest 1, Imre Vasko"), HasSubstr(tested.json()["seal"])));
}

TEST_F(OneRun, AnUnknownSerialIsNo) {
  const auto told = ask({"trace", "AQ20-048-99999"});
  EXPECT_EQ(told.status, 1);
  EXPECT_EQ(told.out, "");
  EXPECT_THAT(told.err, HasSubstr("the ledger holds no run of the serial \"AQ20-048-99999\""));
  const auto json = ask({"trace", "AQ20-048-99999", "--json"});
  EXPECT_EQ(json.status, 1);
  EXPECT_THAT(json.json()["problem"]["what"], HasSubstr("AQ20-048-99999"));
}

TEST_F(OneRun, ASealThatWasPrintedIsFoundAgain) {
  const auto seal = ask({"ledger", "seal", "--json"}).json();
  EXPECT_EQ(seal["seal"], tested.json()["seal"]);
  EXPECT_THAT(seal["time"].get<std::string>(), MatchesRegex("20..-..-..T..:..:..\\.......Z"));
  const std::string entry = std::to_string(seal["entry"].get<int>()), hash = seal["seal"];
  EXPECT_EQ(ask({"ledger", "verify", ledger(), "--seal", hash, "--entry", entry}).status, 0);
  std::string other = hash;
  other[0] = other[0] == '0' ? '1' : '0';
  const auto told = ask({"ledger", "verify", ledger(), "--seal", other, "--entry", entry});
  EXPECT_EQ(told.status, 1) << "a ledger in the place of the one that was printed";
  EXPECT_THAT(ask({"ledger", "seal", ledger()}).out, HasSubstr(hash));
}

TEST_F(OneRun, ALedgerThatWasChangedNamesTheFirstPlace) {
  const std::string copy = folder->file("changed.db");
  std::filesystem::copy_file(ledger(), copy, std::filesystem::copy_options::overwrite_existing);
  {
    probewright::db::Connection forger{copy, probewright::db::Access::read_write};
    const std::string trigger = forger.ask("SELECT sql FROM sqlite_schema WHERE name = 'reading_no_update'");
    forger.run("DROP TRIGGER reading_no_update");
    forger.run("UPDATE reading SET value = value + 0.001 WHERE check_slug = 'red_centroid'");
    forger.run(trigger);
  }
  const auto told = ask({"ledger", "verify", copy, "--json"});
  EXPECT_EQ(told.status, 1);
  const auto fault = told.json()["first_fault"];
  EXPECT_EQ(told.json()["ok"], false);
  EXPECT_EQ(fault["table"], "reading");
  EXPECT_EQ(fault["column"], "value");
  EXPECT_EQ(fault["entry"], tested.json()["entry"]);
  const auto text = ask({"ledger", "verify", copy});
  EXPECT_EQ(text.status, 1);
  EXPECT_THAT(text.out, HasSubstr("it does not agree"));
  EXPECT_THAT(text.err, AllOf(HasSubstr("table reading"), HasSubstr("column value"), HasSubstr("(")));
}

TEST_F(OneRun, AFileThatIsNoLedgerIsNotCalledOne) {
  const std::string noise = folder->write("noise.db", std::string(5000, 'x'));
  const auto told = ask({"ledger", "verify", noise, "--json"});
  EXPECT_EQ(told.status, 1);
  EXPECT_EQ(told.json()["first_fault"]["table"], "file");
  EXPECT_EQ(ask({"ledger", "verify", folder->file("none.db")}).status, 3);
  EXPECT_EQ(ask({"ledger", "seal", noise}).status, 3);
  EXPECT_EQ(ask({"trace", serial, "--ledger", noise}).status, 3);
}

// The commands of the overview and of README, as they stand there, at the speed of real devices.
TEST_F(Station, ABenchInOneTerminalAndATestInAnother) {
  Beside bench{folder, {"bench"}, "bench"};
  ASSERT_TRUE(bench.says("ready\n", 10)) << bench.err();
  const auto told = ask({"test", serial});
  EXPECT_EQ(told.status, 0) << told.out << told.err;
  EXPECT_THAT(told.out, AllOf(HasSubstr("AQ20-048-00001: PASS"), HasSubstr("seal ")));
  EXPECT_EQ(ask({"ledger", "verify", ledger()}).status, 0);
  EXPECT_EQ(ask({"trace", serial}).status, 0);
}

TEST_F(Station, RunsAreAddedToOneLedger) {
  Beside bench{folder, {"bench", "--speed", "10", "--ports", folder.file("ports")}, "bench"};
  ASSERT_TRUE(bench.says("ready\n", 10)) << bench.err();
  for (int i = 1; i <= 3; ++i) {
    const std::string probe = "AQ20-048-0000" + std::to_string(i % 2);
    const auto told = ask({"test", probe, "--speed", "10", "--ports", folder.file("ports")});
    EXPECT_LE(told.status, 1) << told.err;
    EXPECT_THAT(told.out, HasSubstr(probe + ": "));
  }
  const auto json = ask({"ledger", "verify", ledger(), "--json"}).json();
  EXPECT_EQ(json["runs"], 3);
  EXPECT_EQ(json["ok"], true);
  EXPECT_EQ(ask({"trace", serial, "--json"}).json()["runs"].size(), 2u);
}

// Nothing may depend on who opened the pseudo-terminals: socat makes them, and bench and station each take one end.
TEST_F(Station, PseudoTerminalsThatAnotherProgramMadeServeAsWell) {
  std::filesystem::create_directories(folder.file("bench-end"));
  std::filesystem::create_directories(folder.file("station-end"));
  std::vector<std::unique_ptr<Beside>> cables;
  for (const std::string& device : {"nest1-phantom", "nest1-adapter"}) {
    const std::vector<std::string> ends{"pty,raw,echo=0,link=" + folder.file("bench-end/" + device),
                                        "pty,raw,echo=0,link=" + folder.file("station-end/" + device)};
    cables.push_back(std::make_unique<Beside>(folder, ends, device, "socat"));
  }
  const auto there = [&](const std::string& end) { return std::filesystem::exists(folder.file(end)); };
  for (int tries = 0; tries < 400 && !(there("station-end/nest1-phantom") && there("station-end/nest1-adapter"));
       ++tries)
    std::this_thread::sleep_for(std::chrono::milliseconds{10});
  Beside bench{folder, {"bench", "--speed", "4", "--attach", folder.file("bench-end")}, "bench"};
  ASSERT_TRUE(bench.says("ready\n", 10)) << bench.err() << cables[0]->err();
  const auto told = ask({"test", serial, "--speed", "4", "--ports", folder.file("station-end"), "--control",
                         folder.file("run/probewright-bench/control")});
  EXPECT_EQ(told.status, 0) << told.out << told.err;
  EXPECT_EQ(ask({"ledger", "verify", ledger()}).status, 0);
}

TEST_F(Station, ARunThatIsInterruptedIsClosedOnDisk) {
  Beside bench{folder, {"bench"}, "bench"};
  ASSERT_TRUE(bench.says("ready\n", 10)) << bench.err();
  Beside test{folder, {"test", serial}, "test"};
  for (int tries = 0; tries < 1000 && test.err().find(": 2/") == std::string::npos; ++tries)
    std::this_thread::sleep_for(std::chrono::milliseconds{5});
  EXPECT_NE(test.end(), 0);
  const auto run = ask({"trace", serial, "--json"}).json()["runs"][0];
  EXPECT_TRUE(run["verdict"] == "void" || run["verdict"] == "fail") << run;
  EXPECT_FALSE(run["cause_words"].get<std::string>().empty());
  EXPECT_EQ(ask({"ledger", "verify", ledger(), "--json"}).json()["open_runs"], 0);
}

// The station is killed in each part of a run: the next start closes what was open, and nothing is lost.
TEST_F(Station, ARunWhoseStationIsKilledIsClosedAtTheNextStart) {
  Beside bench{folder, {"bench", "--speed", "2"}, "bench"};
  ASSERT_TRUE(bench.says("ready\n", 10)) << bench.err();
  for (const std::string moment : {"is open", ": 1/", ": 2/", ": 3/", ": 4/"}) {
    SCOPED_TRACE(moment);
    Beside test{folder, {"test", serial, "--speed", "2"}, "test"};
    for (int tries = 0; tries < 2000 && test.err().find(moment) == std::string::npos; ++tries)
      std::this_thread::sleep_for(std::chrono::milliseconds{5});
    ASSERT_THAT(test.err(), HasSubstr(moment));
    test.end_by(SIGKILL);
    const auto left = ask({"ledger", "verify", ledger(), "--json"}).json();
    EXPECT_EQ(left["ok"], true);
    EXPECT_EQ(left["open_runs"], 1);
    const auto next = ask({"test", "AQ20-048-00002", "--speed", "2"});  // the hands take the other probe out first
    EXPECT_EQ(next.status, 0) << next.err;
    EXPECT_THAT(next.err, HasSubstr("was closed as void"));
    const auto after = ask({"ledger", "verify", ledger(), "--json"}).json();
    EXPECT_EQ(after["ok"], true);
    EXPECT_EQ(after["open_runs"], 0);
  }
  const auto runs = ask({"trace", serial, "--json"}).json()["runs"];
  EXPECT_EQ(runs.size(), 5u);
  for (const auto& run : runs) EXPECT_EQ(run["verdict"], "void");
}

TEST_F(Station, WithoutABenchTheTestSaysWhatIsMissing) {
  const auto told = ask({"test", serial, "--no-hands"});
  EXPECT_EQ(told.status, 3);
  EXPECT_EQ(told.out, "");
  EXPECT_THAT(told.err, HasSubstr("nest 1"));
  EXPECT_THAT(told.err, HasSubstr("port"));
}

TEST_F(Station, TheCheckupFindsTheDevicesOrSaysHowToMendIt) {
  {
    Beside bench{folder, {"bench"}, "bench"};
    ASSERT_TRUE(bench.says("ready\n", 10)) << bench.err();
    const auto well = ask({"checkup", "--json"});
    EXPECT_EQ(well.status, 0) << well.out;
    EXPECT_EQ(well.json()["well"], true);
  }
  const auto wrong = ask({"checkup", "--json"});
  EXPECT_EQ(wrong.status, 1);
  const auto told = wrong.json();
  EXPECT_EQ(told["well"], false);
  int without_remedy = 0, ports = 0;
  for (const auto& finding : told["findings"]) {
    if (finding["state"] != "well" && finding["remedy"].get<std::string>().empty()) ++without_remedy;
    if (finding["state"] == "wrong" && finding["words"].get<std::string>().find("port") != std::string::npos) ++ports;
  }
  EXPECT_EQ(without_remedy, 0);
  EXPECT_EQ(ports, 2);
  EXPECT_THAT(ask({"checkup"}).out, HasSubstr("check the cable"));
}

TEST_F(Station, ASerialOfNoModelIsRefused) {
  Beside bench{folder, {"bench"}, "bench"};
  ASSERT_TRUE(bench.says("ready\n", 10)) << bench.err();
  const auto told = ask({"test", "ZZ-1"});
  EXPECT_EQ(told.status, 2) << told.err;
  EXPECT_THAT(told.err, HasSubstr("ZZ-1"));
}

TEST_F(Station, ABenchThatCannotRunLikeThatIsRefused) {
  EXPECT_EQ(ask({"bench", "--nests", "17"}).status, 2);
  EXPECT_EQ(ask({"bench", "--speed", "0"}).status, 2);
  EXPECT_EQ(ask({"bench", "--seat", "nonsense"}).status, 2);
}

TEST_F(Station, AFaultyConfigurationIsToldWithPlaces) {
  const std::string configs = folder.file("configs");
  std::filesystem::copy(std::string{PW_SOURCE_DIR} + "/configs", configs, std::filesystem::copy_options::recursive);
  std::ofstream{configs + "/stations/quay-1.yaml", std::ios::app} << "baud: 921600\nspede: 2\n";
  const auto told = ask({"test", serial, "--config", configs});
  EXPECT_EQ(told.status, 2);
  EXPECT_THAT(told.err, AllOf(HasSubstr("quay-1.yaml:"), HasSubstr("\"baud\" stands here again"), HasSubstr("speed")));
}

TEST_F(Station, AFaultInASheetDoesNotKeepAnAuditorFromTheLedger) {
  const std::string configs = folder.file("configs");
  std::filesystem::copy(std::string{PW_SOURCE_DIR} + "/configs", configs, std::filesystem::copy_options::recursive);
  std::ofstream{configs + "/sheets/aq-20.yaml", std::ios::app} << "nonsense: yes\n";
  const auto told = ask({"trace", serial, "--config", configs});
  EXPECT_EQ(told.status, 3) << "there is no ledger yet, and that alone is told";
  EXPECT_THAT(told.err, AllOf(HasSubstr("ledger.db"), Not(HasSubstr("nonsense"))));
}

TEST_F(Station, AConfigurationThatIsNowhereIsNamed) {
  const auto told = ask({"trace", serial, "--config", folder.file("nowhere")});
  EXPECT_EQ(told.status, 2);
  EXPECT_THAT(told.err, HasSubstr("nowhere"));
}

}  // namespace
