#include <gmock/gmock.h>
#include <gtest/gtest.h>
#include <sys/wait.h>

#include <algorithm>
#include <cstdlib>
#include <ostream>

#include "program.h"

namespace {

using program::Folder;
using program::run;
using testing::AllOf;
using testing::HasSubstr;
using testing::StartsWith;

class CommandLine : public testing::Test {
 protected:
  program::Ran ask(const std::vector<std::string>& arguments) { return run(folder, arguments); }
  Folder folder;
};

TEST_F(CommandLine, WithoutACommandItGivesAnOverviewWithTheCautions) {
  const auto told = ask({});
  EXPECT_EQ(told.status, 0);
  EXPECT_EQ(told.err, "");
  for (const char* command : {"bench", "test", "checkup", "trace", "report", "label", "ledger", "limits", "measure"})
    EXPECT_THAT(told.out, HasSubstr(command));
  EXPECT_THAT(told.out, HasSubstr("ISO 80601-2-61"));
  EXPECT_THAT(told.out, HasSubstr("demonstration"));
}

TEST_F(CommandLine, TheVersionNamesCommitAndCompiler) {
  const auto told = ask({"--version"});
  EXPECT_EQ(told.status, 0);
  EXPECT_THAT(told.out, AllOf(StartsWith("probewright "), HasSubstr("\ncommit "), HasSubstr("\ncompiler ")));
}

struct Wrong {
  std::vector<std::string> arguments;
  std::string says;
};

/// For the tests' names.
void PrintTo(const Wrong& wrong, std::ostream* out) {
  for (const std::string& word : wrong.arguments) *out << word << ' ';
}

class WrongUse : public testing::TestWithParam<Wrong> {};

TEST_P(WrongUse, EndsWithTwoAndOneClearSentence) {
  const Folder folder;
  const auto told = run(folder, GetParam().arguments);
  EXPECT_EQ(told.status, 2);
  EXPECT_EQ(told.out, "");
  EXPECT_THAT(told.err, HasSubstr(GetParam().says));
  EXPECT_EQ(std::count(told.err.begin(), told.err.end(), '\n'), 1) << told.err;
  EXPECT_TRUE(told.err.ends_with(")\n")) << "every refusal ends with its remedy: " << told.err;
}

INSTANTIATE_TEST_SUITE_P(
    Typed, WrongUse,
    testing::Values(
        Wrong{{"trase", "X"}, "probewright: there is no command \"trase\" here (did you mean trace?"},
        Wrong{{"frobnicate"}, "there is no place for \"frobnicate\" here"},
        Wrong{{"trace"}, "probewright trace: SERIAL is missing"},
        Wrong{{"trace", "A", "--lot", "L"}, "probewright trace: SERIAL and --lot cannot be asked for together"},
        Wrong{{"trace", "--person", "P", "--day", "2026-12-01"}, "--person and --day cannot be asked for together"},
        Wrong{{"trace", "--entry", "x"}, "\"x\" for --entry is not a whole number"},
        Wrong{{"report"}, "probewright report: one of its commands is needed: run, serial, shift"},
        Wrong{{"report", "run"}, "probewright report run: ENTRY is missing"},
        Wrong{{"report", "run", "0"}, "is not a whole number from 1 up"},
        Wrong{{"report", "serial"}, "probewright report serial: SERIAL is missing"},
        Wrong{{"label"}, "probewright label: SERIAL is missing"},
        Wrong{{"label", "A", "--kind", "void"}, "--kind cannot be \"void\" (choose one of pass, fail)"},
        Wrong{{"trace", "A", "B"}, "there is no place for \"B\" here"},
        Wrong{{"trace", "A", "--ledgr", "f"}, "there is no option --ledgr here (did you mean --ledger?"},
        Wrong{{"--frobnicate"}, "probewright: there is no option --frobnicate here"},
        Wrong{{"ledger"},
              "probewright ledger: one of its commands is needed: verify, seal, backup, restore, close-volume, "
              "prune, export"},
        Wrong{{"ledger", "verify"}, "probewright ledger verify: FILE is missing"},
        Wrong{{"ledger", "verify", "f", "--seal", "ab"}, "--seal needs --entry too"},
        Wrong{{"ledger", "verify", "f", "--seal", "ab", "--entry", "x"}, "\"x\" for --entry is not a whole number"},
        Wrong{{"ledger", "verify", "f", "--seal", "ab", "--entry", "3"}, "--seal: \"ab\" is not a seal"},
        Wrong{{"ledger", "restore", "b", "--drill", "to"}, "a backup is restored to a file, or tried with --drill"},
        Wrong{{"ledger", "restore", "b", "to"}, "this is kept for good and needs a reason"},
        Wrong{{"ledger", "close-volume", "--who", "x"}, "--reason is missing"},
        Wrong{{"ledger", "prune", "--record-days", "1", "--take-away"}, "--take-away needs --who too"},
        Wrong{{"ledger", "export", "to", "--as", "xml"}, "--as cannot be \"xml\""},
        Wrong{{"rederive"}, "what is to be made again is not told, or told twice"},
        Wrong{{"rederive", "A", "--all"}, "what is to be made again is not told, or told twice"},
        Wrong{{"impact", "PH-01"}, "--since is missing"},
        Wrong{{"impact", "PH-01", "--since", "2026-01-01", "--off", "wavelength"}, "--off needs --by too"},
        Wrong{{"impact", "PH-01", "--since", "2026-01-01", "--off", "colour", "--by", "1"},
              "--off cannot be \"colour\""},
        Wrong{{"measure", "spectrum", "f.csv", "--band", "blue"},
              "--band cannot be \"blue\" (choose one of red, infrared)"},
        Wrong{{"measure", "spectrum", "f.csv", "--slit-nm", "2,5"}, "\"2,5\" for --slit-nm is not a number"},
        Wrong{{"measure", "spectrum", "f.csv", "--slit-nm", "nan"}, "\"nan\" for --slit-nm is not a number"},
        Wrong{{"measure", "spectrum", "f.csv", "--threshold", "0.7"},
              "--threshold: the value does not lie from 0 to 0.5"},
        Wrong{{"measure", "pulses", "f.csv"}, "the rate of the modulation is not known"},
        Wrong{{"measure", "pulses", "f.csv", "--rate-Hz"}, "--rate-Hz needs a value"},
        Wrong{{"test", "A", "--nest", "0"}, "\"0\" for --nest is not a whole number from 1 up"},
        Wrong{{"test", "A", "--purpose", "fun"}, "--purpose cannot be \"fun\""}));

TEST_F(CommandLine, AWrongOptionWithJsonIsAProblemInJson) {
  const auto told = ask({"trace", "A", "--frobnicate", "--json"});
  EXPECT_EQ(told.status, 2);
  const auto problem = told.json()["problem"];
  EXPECT_THAT(problem["what"], HasSubstr("--frobnicate"));
  EXPECT_EQ(problem["where"], "probewright trace");
  EXPECT_THAT(problem["remedy"], HasSubstr("--help"));
}

TEST_F(CommandLine, AnAnswerThatCannotBeWrittenIsNoSuccess) {
  // /dev/full takes no byte: the disk of a script that keeps our answers has run full.
  const auto told = run(folder, {"limits", "check", "--help"});
  EXPECT_EQ(told.status, 0);
  const std::string line = std::string{PW_PROGRAM} + " --version > /dev/full 2> " + folder.file("full");
  EXPECT_EQ(WEXITSTATUS(std::system(line.c_str())), 3);
}

}  // namespace
