#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <fstream>
#include <regex>
#include <set>
#include <sstream>

#include "program.h"

// The man page and the completion are written by hand; what --help tells must stand in both.
namespace {

using program::Folder;
using program::run;
using testing::HasSubstr;

const std::vector<std::vector<std::string>>& commands() {
  static const std::vector<std::vector<std::string>> all{{},
                                                         {"demo"},
                                                         {"line"},
                                                         {"bench"},
                                                         {"test"},
                                                         {"replay"},
                                                         {"recording"},
                                                         {"recording", "show"},
                                                         {"recording", "cut"},
                                                         {"checkup"},
                                                         {"trace"},
                                                         {"report"},
                                                         {"report", "run"},
                                                         {"report", "serial"},
                                                         {"report", "shift"},
                                                         {"label"},
                                                         {"ledger"},
                                                         {"ledger", "verify"},
                                                         {"ledger", "seal"},
                                                         {"ledger", "backup"},
                                                         {"ledger", "restore"},
                                                         {"ledger", "close-volume"},
                                                         {"ledger", "prune"},
                                                         {"ledger", "export"},
                                                         {"rederive"},
                                                         {"impact"},
                                                         {"limits"},
                                                         {"limits", "check"},
                                                         {"limits", "diff"},
                                                         {"simulate"},
                                                         {"measure"},
                                                         {"measure", "spectrum"},
                                                         {"measure", "pulses"}};
  return all;
}

std::string joined(const std::vector<std::string>& words) {
  std::string text;
  for (const std::string& word : words) text += (text.empty() ? "" : " ") + word;
  return text;
}

std::string help_of(std::vector<std::string> command) {
  const Folder folder;
  command.push_back("--help");
  const auto told = run(folder, command);
  EXPECT_EQ(told.status, 0) << joined(command);
  EXPECT_EQ(told.err, "") << joined(command);
  return told.out;
}

std::set<std::string> options_in(const std::string& text) {
  static const std::regex option{"--[a-z][A-Za-z-]*[A-Za-z]"};
  return {std::sregex_token_iterator{text.begin(), text.end(), option}, std::sregex_token_iterator{}};
}

/// Names that stand first on the lines below "Commands:".
std::set<std::string> commands_in(const std::string& help) {
  std::set<std::string> names;
  const auto at = help.find("\nCommands:\n");
  if (at == std::string::npos) return names;
  std::istringstream lines{help.substr(at + 11)};
  for (std::string line; std::getline(lines, line) && line.starts_with("  ");) {
    std::string name;
    std::istringstream{line} >> name;
    names.insert(name);
  }
  return names;
}

std::string file_of_text(const std::string& name) {
  std::ifstream file{std::string{PW_SOURCE_DIR} + "/station/text/" + name};
  std::ostringstream text;
  text << file.rdbuf();
  return text.str();
}

/// The man page with its escaped hyphens as people read them.
std::string man_page() { return std::regex_replace(file_of_text("probewright.1"), std::regex{"\\\\-"}, "-"); }

TEST(Help, EveryCommandIsKnownToThisTest) {
  std::set<std::string> found;
  for (const auto& command : commands()) {
    if (command.size() > 1) continue;
    for (const std::string& name : commands_in(help_of(command)))
      found.insert(command.empty() ? name : command.front() + " " + name);
  }
  std::set<std::string> known;
  for (const auto& command : commands())
    if (!command.empty()) known.insert(joined(command));
  EXPECT_EQ(found, known);
}

TEST(Help, EveryCommandHasAnExample) {
  for (const auto& command : commands()) {
    const std::string help = help_of(command);
    const bool leaf = commands_in(help).empty();
    EXPECT_THAT(help, HasSubstr(leaf ? "\nExample:\n  probewright " : "--help"));
    if (leaf) EXPECT_THAT(help.substr(help.find("\nExample:")), HasSubstr("  probewright " + joined(command) + " "));
  }
}

TEST(Help, TheManPageNamesEveryCommandAndOption) {
  const std::string page = man_page();
  ASSERT_GT(page.size(), 1000u);
  const auto named = options_in(page);
  for (const auto& command : commands()) {
    if (!command.empty() && commands_in(help_of(command)).empty())
      EXPECT_THAT(page, HasSubstr("\n.SS " + joined(command)));
    for (const std::string& option : options_in(help_of(command)))
      EXPECT_TRUE(named.contains(option)) << joined(command) << ' ' << option;
  }
}

TEST(Help, TheManPageNamesNothingThatIsNotThere) {
  std::set<std::string> told;
  for (const auto& command : commands()) told.merge(options_in(help_of(command)));
  for (const std::string& option : options_in(man_page())) EXPECT_TRUE(told.contains(option)) << option;
}

/// What the completion offers after these words.
std::set<std::string> offered_after(const std::vector<std::string>& command, const std::string& begun) {
  const Folder folder;
  std::string words = "(probewright";
  for (const std::string& word : command) words += " '" + word + "'";
  words += " '" + begun + "')";
  const std::string script = folder.write(
      "ask.bash", ". '" + std::string{PW_SOURCE_DIR} + "/station/text/completion.bash'\ncd " + folder.file("run") +
                      "\nCOMP_WORDS=" + words + " COMP_CWORD=" + std::to_string(command.size() + 1) +
                      "\n_probewright\nprintf '%s\\n' \"${COMPREPLY[@]}\" > " + folder.file("offered") + "\n");
  EXPECT_EQ(std::system(("bash " + script).c_str()), 0);
  std::set<std::string> offered;
  std::ifstream lines{folder.file("offered")};
  for (std::string line; std::getline(lines, line);) offered.insert(line);
  return offered;
}

TEST(Help, TheCompletionOffersEveryCommandAndOption) {
  for (const auto& command : commands()) {
    const std::string help = help_of(command);
    const std::string usage = help.substr(0, help.find("\nExample:"));
    const auto options = offered_after(command, "--"), words = offered_after(command, "");
    for (const std::string& name : commands_in(help))
      EXPECT_TRUE(words.contains(name)) << joined(command) << ' ' << name;
    auto wanted = options_in(usage);
    if (!command.empty()) wanted.insert({"--config", "--station"});
    for (const std::string& option : wanted) EXPECT_TRUE(options.contains(option)) << joined(command) << ' ' << option;
    for (const std::string& option : options) EXPECT_TRUE(wanted.contains(option)) << joined(command) << ' ' << option;
  }
}

TEST(Help, TheCompletionKnowsTheWordsOfAnOption) {
  EXPECT_EQ(offered_after({"measure", "spectrum", "f.csv", "--band"}, "i"), (std::set<std::string>{"infrared"}));
  EXPECT_EQ(offered_after({"test", "A", "--purpose"}, "ret"), (std::set<std::string>{"return"}));
}

}  // namespace
