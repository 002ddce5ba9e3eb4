#include <fcntl.h>
#include <gmock/gmock.h>
#include <gtest/gtest.h>
#include <sys/stat.h>
#include <unistd.h>

#include <chrono>
#include <csignal>
#include <fstream>
#include <random>
#include <set>
#include <thread>

#include "program.h"

// `demo` and `line --text` as people start them: bench, line, operator, ledger and pages in real time.
namespace {

using nlohmann::json;
using program::Beside;
using program::Folder;
using program::run;
using testing::AllOf;
using testing::HasSubstr;
using testing::Not;

/// Faults that are there or not, and so plain that the routine must see them. Source: drivers/emulated/README.md.
const std::set<std::string> hard{"red_led_open",      "infrared_led_open", "red_led_short", "infrared_led_short",
                                 "leds_swapped",      "leds_reversed",     "detector_open", "detector_short",
                                 "detector_reversed", "id_missing",        "id_other_bin"};

json json_file(const std::string& path) {
  std::ifstream file{path};
  return json::parse(file);
}

std::vector<std::string> demo(const std::string& out, const std::string& probes, const std::string& nests,
                              const std::string& speed, std::vector<std::string> more = {}) {
  std::vector<std::string> words{"demo", "--headless", "--probes", probes,  "--nests",
                                 nests,  "--speed",    speed,      "--out", out};
  words.insert(words.end(), more.begin(), more.end());
  return words;
}

/// One demonstration for all tests that look at what is left of it.
class OneDemo : public testing::Test {
 protected:
  static void SetUpTestSuite() {
    folder = new Folder;
    told = run(*folder, demo(out(), "8", "2", "20", {"--json"}));
  }
  static void TearDownTestSuite() {
    delete folder;
    folder = nullptr;
  }
  static std::string out() { return folder->file("demo"); }
  static inline Folder* folder = nullptr;
  static inline program::Ran told;
};

TEST_F(OneDemo, TellsEveryRunInTheShapeOfFormats) {
  ASSERT_EQ(told.status, 0) << told.out << told.err;
  const json answer = told.json();
  std::set<std::string> keys;
  for (const auto& [key, value] : answer.items()) keys.insert(key);
  EXPECT_EQ(keys, (std::set<std::string>{"format", "runs", "passed", "failed", "void", "ledger", "labels", "report",
                                         "truth"}));
  EXPECT_EQ(answer["format"], 1);
  ASSERT_EQ(answer["runs"].size(), 8u);
  std::map<std::string, int> verdicts{{"pass", 0}, {"fail", 0}, {"void", 0}};
  std::set<std::string> serials;
  std::set<int> nests;
  int floors = 0;
  for (const json& one : answer["runs"]) {
    std::set<std::string> run_keys;
    for (const auto& [key, value] : one.items()) run_keys.insert(key);
    EXPECT_EQ(run_keys, (std::set<std::string>{"serial", "nest", "verdict", "failing", "likely_cause", "cycle_s",
                                               "device_floor_s"}));
    ++verdicts[one["verdict"]];
    serials.insert(one["serial"]);
    nests.insert(one["nest"].get<int>());
    EXPECT_EQ(one["failing"].empty(), one["verdict"] == "pass") << one;
    EXPECT_GT(one["cycle_s"], 0.5);
    if (one["device_floor_s"].is_null()) continue;  // something had to be asked again
    ++floors;
    EXPECT_GT(one["device_floor_s"], 0.5);
    EXPECT_LT(one["device_floor_s"], one["cycle_s"]);
  }
  EXPECT_GE(floors, 4);
  EXPECT_EQ(serials.size(), 8u);
  EXPECT_EQ(nests, (std::set<int>{1, 2}));
  EXPECT_EQ(answer["passed"], verdicts["pass"]);
  EXPECT_EQ(answer["failed"], verdicts["fail"]);
  EXPECT_EQ(answer["void"], verdicts["void"]);
}

TEST_F(OneDemo, FindsWhatIsPlainlyWrongAndLosesNoProbe) {
  const json answer = told.json(), truth = json_file(answer["truth"]);
  for (const json& one : answer["runs"]) {
    const json& faults = truth["probes"].at(one["serial"].get<std::string>())["faults"];
    if (faults.empty()) EXPECT_EQ(one["verdict"], "pass") << one;
    for (const json& fault : faults)
      if (hard.contains(fault["fault"])) EXPECT_EQ(one["verdict"], "fail") << one << fault;
    EXPECT_NE(one["verdict"], "void") << one;
  }
}

TEST_F(OneDemo, LeavesALedgerThatAgreesAndIsReadWithItsOwnConfiguration) {
  const json answer = told.json();
  EXPECT_EQ(answer["ledger"], out() + "/ledger.db");
  const auto verified = run(*folder, {"ledger", "verify", answer["ledger"], "--json"}).json();
  EXPECT_EQ(verified["ok"], true) << verified;
  EXPECT_EQ(verified["runs"], 8);
  EXPECT_EQ(verified["open_runs"], 0);
  const auto traced = run(*folder, {"trace", "AQ20-048-00001", "--config", out() + "/configs", "--json"});
  ASSERT_EQ(traced.status, 0) << traced.err;
  const json one = traced.json()["runs"].at(0);
  EXPECT_EQ(one["purpose"], "production");
  EXPECT_EQ(one["emulated"], true);
  EXPECT_EQ(one["lot"], "AQ20-W48-07");
  EXPECT_EQ(one["operator"], "Imre Vasko");
  EXPECT_FALSE(std::filesystem::exists(out() + "/ports")) << "the bench is gone";
}

TEST_F(OneDemo, LabelsEveryVerdictAndWritesTheReport) {
  const json answer = told.json();
  ASSERT_TRUE(answer["labels"].is_string()) << told.err;
  for (const json& one : answer["runs"]) {
    const std::string name = answer["labels"].get<std::string>() + "/" + one["serial"].get<std::string>() + "-" +
                             one["verdict"].get<std::string>();
    EXPECT_TRUE(std::filesystem::exists(name + ".pdf")) << name;
    EXPECT_TRUE(std::filesystem::exists(name + ".png")) << name;
  }
  std::ifstream report{answer["report"].get<std::string>(), std::ios::binary};
  std::string head(5, ' ');
  report.read(head.data(), 5);
  EXPECT_EQ(head, "%PDF-");
}

TEST_F(OneDemo, AnotherLotDoesNotGoIntoItsFolder) {
  const auto other = run(*folder, demo(out(), "8", "2", "20", {"--seed", "2"}));
  EXPECT_EQ(other.status, 2);
  EXPECT_THAT(other.err, HasSubstr("holds a demonstration with other probes"));
  const auto again = run(*folder, demo(out(), "8", "2", "20"));
  EXPECT_EQ(again.status, 3) << "its lot was closed";
  EXPECT_THAT(again.out, HasSubstr("lot AQ20-W48-07 was closed"));
}

TEST(Demo, EndsInTextWithItsCountsAndWhereEverythingIs) {
  const Folder folder;
  const auto told = run(folder, {"demo", "--probes", "4", "--nests", "2", "--speed", "20", "--mistakes", "0.3"});
  ASSERT_EQ(told.status, 0) << told.out << told.err;
  EXPECT_THAT(told.out, AllOf(HasSubstr("first-pass yield"), HasSubstr("What the bench knows"),
                              HasSubstr(folder.file("state/probewright/demo-")), HasSubstr("ledger verify ")));
  const std::string last = told.out.substr(told.out.rfind('\n', told.out.size() - 2) + 1);
  EXPECT_THAT(last, testing::MatchesRegex("[0-9]+ passed, [0-9]+ failed, [0-9]+ void\n"));
  EXPECT_THAT(told.err, HasSubstr("nest 1: AQ20-048-0000"));
}

TEST(Demo, RefusesWhatCannotBe) {
  const Folder folder;
  for (const auto& [option, value] : std::map<std::string, std::string>{
           {"--nests", "17"}, {"--speed", "0"}, {"--speed", "1001"}, {"--mistakes", "1.5"}, {"--probes", "100000"}}) {
    const auto told = run(folder, {"demo", option, value});
    EXPECT_EQ(told.status, 2) << option;
    EXPECT_THAT(told.err, HasSubstr(option));
  }
  EXPECT_EQ(run(folder, {"demo", "--out", "/proc/no/such"}).status, 2);
  EXPECT_FALSE(std::filesystem::exists(folder.file("state/probewright")));
}

// Ctrl-C: runs are closed, the report is still written, the folder can be taken up again.
TEST(Demo, StopsInOrderAndGoesOnWhereItStopped) {
  const Folder folder;
  const std::string out = folder.file("demo");
  int status = 0;
  {
    Beside first{folder, demo(out, "12", "2", "2"), "first"};
    for (int tries = 0; tries < 4000 && first.err().find("run ") == std::string::npos; ++tries)
      std::this_thread::sleep_for(std::chrono::milliseconds{5});
    std::this_thread::sleep_for(std::chrono::milliseconds{500});
    status = first.end_by(SIGINT);
    EXPECT_EQ(status, 3) << first.out();
    EXPECT_THAT(first.out(), HasSubstr("Stopped before its end."));
    EXPECT_THAT(first.err(), HasSubstr("the runs that go on are closed first"));
  }
  EXPECT_TRUE(std::filesystem::exists(out + "/shift-report.pdf"));
  auto verified = run(folder, {"ledger", "verify", out + "/ledger.db", "--json"}).json();
  EXPECT_EQ(verified["ok"], true);
  EXPECT_EQ(verified["open_runs"], 0);
  const int before = verified["runs"];
  EXPECT_LT(before, 12);
  const auto rest = run(folder, demo(out, "12", "2", "20", {"--json"}));
  EXPECT_EQ(rest.status, 0) << rest.out << rest.err;
  verified = run(folder, {"ledger", "verify", out + "/ledger.db", "--json"}).json();
  EXPECT_EQ(verified["ok"], true);
  EXPECT_EQ(verified["runs"], before + static_cast<int>(rest.json()["runs"].size()));
}

// Killed at any moment, the next start closes what was open, and what was told is still there.
TEST(Demo, KilledAgainAndAgainItLosesNothing) {
  const Folder folder;
  const std::string out = folder.file("demo"), ledger = out + "/ledger.db";
  std::mt19937 moments{20261201};  // the same moments each time, as far as the machine is as quick
  std::set<std::string> told;
  for (int kill = 0; kill < 6; ++kill) {
    SCOPED_TRACE(kill);
    Beside demonstration{folder, demo(out, "40", "4", "5"), "demo"};
    std::this_thread::sleep_for(std::chrono::milliseconds{200 + moments() % 1300});
    demonstration.end_by(SIGKILL);
    const std::string log = demonstration.err();
    for (std::size_t at = log.find("PASS, run "); at != std::string::npos; at = log.find("PASS, run ", at + 1))
      told.insert(log.substr(at + 10, log.find(',', at + 10) - at - 10));
    if (!std::filesystem::exists(ledger)) continue;  // it had not even begun
    const auto left = run(folder, {"ledger", "verify", ledger, "--json"}).json();
    EXPECT_EQ(left["ok"], true) << left;
    EXPECT_LE(left["open_runs"], 4);
  }
  const auto rest = run(folder, demo(out, "40", "4", "20"));
  EXPECT_EQ(rest.status, 0) << rest.out << rest.err;
  const auto verified = run(folder, {"ledger", "verify", ledger, "--json"}).json();
  EXPECT_EQ(verified["ok"], true) << verified;
  EXPECT_EQ(verified["open_runs"], 0);
  EXPECT_GE(verified["runs"].get<std::size_t>(), 40u);
  for (const std::string& run_number : told) {
    const auto report = run(folder, {"report", "run", run_number, "--ledger", ledger, "--json"});
    EXPECT_EQ(report.status, 0) << run_number;
    EXPECT_THAT(report.out, HasSubstr("\"pass\"")) << run_number;
  }
}

/// Types into a program that reads its standard input from a FIFO.
class Typist {
 public:
  explicit Typist(const std::string& path) : path_(path) {
    ::mkfifo(path.c_str(), 0600);
    descriptor_ = ::open(path.c_str(), O_RDWR | O_CLOEXEC);  // both ends, so that nobody waits for the other
  }
  ~Typist() { close(); }
  void type(const std::string& line) {
    const std::string text = line + "\n";
    ASSERT_EQ(::write(descriptor_, text.data(), text.size()), static_cast<ssize_t>(text.size()));
  }
  void close() {
    if (descriptor_ >= 0) ::close(descriptor_);
    descriptor_ = -1;
  }

 private:
  std::string path_;
  int descriptor_ = -1;
};

class LineInText : public testing::Test {
 protected:
  void SetUp() override { ASSERT_TRUE(bench.says("ready\n", 20)) << bench.err(); }
  std::vector<std::string> line() const { return {"line", "--text", "--hands", "--speed", "10"}; }
  std::string ledger() const { return folder.file("data/probewright/Quay-1/ledger.db"); }
  Folder folder;
  Beside bench{folder, {"bench", "--speed", "10"}, "bench"};
  const std::string fifo = folder.file("typed");
  Typist typist{fifo};
};

TEST_F(LineInText, AShiftFromTheBadgeToQuit) {
  Beside line_runs{folder, line(), "line", program::probewright, fifo};
  ASSERT_TRUE(line_runs.says("nest 1: scan a probe", 20)) << line_runs.out() << line_runs.err();
  typist.type("AQS-7Q41-IV");
  EXPECT_TRUE(line_runs.says("Imre Vasko, operator, is signed in", 10));
  typist.type("LOT/AQ20-W48-07/AQ-20/48/AQ20-048-00001");
  EXPECT_TRUE(line_runs.says("lot AQ20-W48-07 is open: 48 of AQ-20", 10));
  typist.type("AQ20-048-00001");
  EXPECT_TRUE(line_runs.says("AQ20-048-00001 PASS", 30)) << line_runs.out();
  typist.type("AQ20-048-00001");
  EXPECT_TRUE(line_runs.says("has passed already", 10));
  typist.type("Close  LOT");
  EXPECT_TRUE(line_runs.says("lot AQ20-W48-07 is closed", 10));
  typist.type("sign out");
  EXPECT_TRUE(line_runs.says("Imre Vasko is signed out", 10));
  typist.type("quit");
  EXPECT_EQ(line_runs.wait(), 0);
  EXPECT_THAT(line_runs.out(), Not(HasSubstr("AQS-7Q41-IV"))) << "a badge is not echoed";
  EXPECT_EQ(run(folder, {"ledger", "verify", ledger(), "--json"}).json()["ok"], true);
}

TEST_F(LineInText, CtrlCClosesTheRunThatGoesOn) {
  Beside line_runs{folder, line(), "line", program::probewright, fifo};
  ASSERT_TRUE(line_runs.says("nest 1: scan a probe", 20)) << line_runs.out() << line_runs.err();
  for (const char* text : {"AQS-7Q41-IV", "LOT/AQ20-W48-07/AQ-20/48/AQ20-048-00001", "AQ20-048-00001"})
    typist.type(text);
  ASSERT_TRUE(line_runs.says("testing AQ20-048-00001", 20)) << line_runs.out();
  EXPECT_EQ(line_runs.end_by(SIGINT), 0);
  EXPECT_THAT(line_runs.out(), HasSubstr("AQ20-048-00001 "));
  const auto verified = run(folder, {"ledger", "verify", ledger(), "--json"}).json();
  EXPECT_EQ(verified["ok"], true);
  EXPECT_EQ(verified["open_runs"], 0);
  EXPECT_EQ(verified["runs"], 1);
}

TEST_F(LineInText, TheEndOfItsInputIsLikeQuit) {
  Beside line_runs{folder, line(), "line", program::probewright, fifo};
  ASSERT_TRUE(line_runs.says("nest 1: scan a probe", 20)) << line_runs.out() << line_runs.err();
  typist.close();
  EXPECT_EQ(line_runs.wait(), 0);
}

// A terminal: the berths are drawn in place, what may be a badge is dots.
TEST_F(LineInText, OnATerminalTheBerthsStayInPlaceAndABadgeIsNotShown) {
  const std::string command = program::probewright + " line --text --hands --speed 10";
  Beside terminal{folder, {"-qec", command, "/dev/null"}, "terminal", "script", fifo};
  ASSERT_TRUE(terminal.says("nest 1  empty", 20)) << terminal.out() << terminal.err();
  typist.type("AQS-7Q41-IV");
  EXPECT_TRUE(terminal.says("Imre Vasko, operator, is signed in", 10)) << terminal.out();
  EXPECT_THAT(terminal.out(), AllOf(HasSubstr("\x1b[A"), HasSubstr("(DEMONSTRATION): ready"), HasSubstr("scan: ")));
  EXPECT_THAT(terminal.out(), Not(HasSubstr("AQS-7Q41")));
  typist.type("quit");
  EXPECT_EQ(terminal.wait(), 0) << terminal.out();
}

}  // namespace
