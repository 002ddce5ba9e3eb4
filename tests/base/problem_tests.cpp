#include <gtest/gtest.h>

#include <algorithm>
#include <filesystem>
#include <fstream>
#include <set>
#include <sstream>

#include "station/base/problem_table.h"
#include "station/base/result.h"

namespace probewright {
namespace {

TEST(ProblemTable, IdsAreUniqueSlugs) {
  std::set<std::string_view> ids;
  for (const ProblemRow& row : problem_table()) {
    EXPECT_TRUE(ids.insert(row.id).second) << row.id;
    EXPECT_TRUE(!row.id.empty() && std::all_of(row.id.begin(), row.id.end(), [](char c) {
      return (c >= 'a' && c <= 'z') || (c >= '0' && c <= '9') || c == '_';
    })) << row.id;
  }
}

TEST(ProblemTable, EveryRowSaysWhatAndHowToMendIt) {
  for (const ProblemRow& row : problem_table()) {
    EXPECT_GE(row.what.size(), 6u) << row.id;
    EXPECT_GE(row.remedy.size(), 6u) << row.id;
    for (const std::string_view text : {row.what, row.remedy}) {
      EXPECT_EQ(std::count(text.begin(), text.end(), '{'), std::count(text.begin(), text.end(), '}')) << row.id;
      EXPECT_FALSE(text.ends_with('.')) << row.id << ": sentences are put together, so they carry no full stop";
    }
  }
}

std::string text_of(const std::filesystem::path& path) {
  std::ifstream file{path};
  std::stringstream text;
  text << file.rdbuf();
  return text.str();
}

/// All sources of the product but the table itself, one after the other.
std::string sources() {
  std::string all;
  for (const char* folder : {"station", "drivers", "limits", "db"})
    for (const auto& entry : std::filesystem::recursive_directory_iterator{std::string{PW_SOURCE_DIR} + "/" + folder}) {
      const auto extension = entry.path().extension();
      if ((extension == ".cpp" || extension == ".h") && entry.path().filename() != "problem_table.cpp")
        all += text_of(entry.path());
    }
  return all;
}

bool is_slug(std::string_view word) {
  return !word.empty() && word.find_first_not_of("abcdefghijklmnopqrstuvwxyz0123456789_") == std::string_view::npos;
}

/// The words in quotation marks that look like an id and stand in no braces: those in braces are arguments.
std::vector<std::string> bare_slugs(std::string_view statement) {
  std::vector<std::string> slugs;
  int depth = 0;
  for (std::size_t at = 0; at < statement.size(); ++at) {
    if (statement[at] == '{') ++depth;
    if (statement[at] == '}') --depth;
    if (statement[at] != '"') continue;
    const auto close = std::min(statement.find('"', at + 1), statement.size());
    const std::string_view word = statement.substr(at + 1, close - at - 1);
    if (depth == 0 && is_slug(word)) slugs.emplace_back(word);
    at = close;
  }
  return slugs;
}

/// Those words of every statement that makes a problem or tells a fault, where it names its id: one of them must be in
/// the table.
std::vector<std::vector<std::string>> tellings(std::string_view text) {
  std::vector<std::vector<std::string>> all;
  for (const std::string_view maker : {"Problem{", "faults.add(", "faults_.add("})
    for (auto at = text.find(maker); at != std::string_view::npos; at = text.find(maker, at + 1)) {
      const auto start = at + maker.size();
      const auto end = text.find_first_of(maker == "Problem{" ? ";}" : ";", start);
      auto slugs = bare_slugs(text.substr(start, end - start));
      if (!slugs.empty()) all.push_back(std::move(slugs));
    }
  return all;
}

TEST(ProblemTable, KnowsEveryIdThatTheSourcesTell) {
  const auto all = tellings(sources());
  EXPECT_GE(all.size(), 50u) << "the search itself found next to nothing";
  for (const auto& slugs : all)
    EXPECT_TRUE(std::any_of(slugs.begin(), slugs.end(), [](const auto& slug) { return find_problem(slug) != nullptr; }))
        << slugs.front() << " is told but not in the table";
}

// The search works on text that is known.
TEST(ProblemTable, TheSearchFindsWhatIsTold) {
  const auto all = tellings(
      "if (x) return Problem{\"one_id\", where, {{\"key\", \"A b\"}}}; faults.add(of(\"drive\"), \"two_id\"); "
      "faults.add(place, id, {{\"key\", \"a\"}});");
  ASSERT_EQ(all.size(), 2u);
  EXPECT_EQ(all[0], (std::vector<std::string>{"one_id"}));
  EXPECT_EQ(all[1], (std::vector<std::string>{"drive", "two_id"}));
}

TEST(ProblemTable, HoldsNoRowThatNobodyTells) {
  const std::string all = sources();
  for (const ProblemRow& row : problem_table())
    EXPECT_NE(all.find('"' + std::string{row.id} + '"'), std::string::npos)
        << row.id << " is in the table but never told";
}

TEST(Problem, FillsItsSentence) {
  const Problem problem{"yaml_duplicate_key", "sheet.yaml:7:3", {{"key", "upper"}, {"line", "5"}}};
  EXPECT_EQ(problem.text(),
            "sheet.yaml:7:3: the key \"upper\" stands here again; it stands first in line 5 (keep one of the two)");
  EXPECT_EQ(problem.kind(), ProblemKind::refused_input);
  EXPECT_EQ(exit_status(problem.kind()), 2);
}

// An argument whose value holds braces must not be filled again, nor without end.
TEST(Problem, ValuesAreNotFilledAgain) {
  const Problem problem{"yaml_unknown_key", "", {{"key", "{key}{key}"}}};
  EXPECT_EQ(problem.what(), "there is no key \"{key}{key}\" here");
}

TEST(Problem, AnUnknownIdIsOurOwnMistake) {
  const Problem problem{"no_such_problem", "somewhere"};
  EXPECT_EQ(problem.kind(), ProblemKind::our_bug);
  EXPECT_EQ(problem.what(), "no_such_problem");
  EXPECT_FALSE(problem.remedy().empty());
}

TEST(Result, ValueThrowsTheProblem) {
  const Result<int> refused = Problem{"csv_empty", "a.csv:1:1"};
  try {
    (void)refused.value();
    FAIL() << "nothing thrown";
  } catch (const ProblemError& error) {
    EXPECT_EQ(error.problem().id, "csv_empty");
    EXPECT_STREQ(error.what(), "a.csv:1:1: the table has no rows (check that this is the right file)");
  }
  const ResultOrFaults<int> faults = Problems{{"csv_empty", "b.csv"}, {"csv_quote", "b.csv"}};
  EXPECT_THROW((void)faults.value(), ProblemError);
  EXPECT_EQ(faults.error().size(), 2u);
}

}  // namespace
}  // namespace probewright
