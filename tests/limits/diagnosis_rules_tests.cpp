#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <algorithm>
#include <set>

#include "limits/diagnosis/rules.h"
#include "sample_sheet.h"
#include "station/base/problem_table.h"

namespace probewright::limits::diagnosis {
namespace {

/// A small document with one of each form, as lines, so that a test can change one and name the place.
std::vector<std::string> rules_lines() {
  return {
      /*  1 */ "diagnosis: sample",
      /*  2 */ "revision: 3",
      /*  3 */ "reason: after the reel of March",
      /*  4 */
      "method: {figures hold within: 20 %, stray reading: 0.3 %, second fault: 1 %, unknown fault: 5 %, "
      "unknown moves: 10 %}",
      /*  5 */ "stages:",
      /*  6 */ "  first:",
      /*  7 */ "    red_drive: {usual: 0, spread: 0.1}",
      /*  8 */ "    red_warmup: {usual: -0.1, spread: 0.1, weight: 0.5, typical: 7.9 mV, tolerance: 6 mV}",
      /*  9 */ "  second:",
      /* 10 */ "    dark_current: {usual: 0.01, spread: 0.07}",
      /* 11 */ "causes:",
      /* 12 */ "  led_open:",
      /* 13 */
      "    {words: LED open, kind: probe, hard: yes, decided at: first, moves: {red_drive: below -20}, still: "
      "everything else, rework: RW-1}",
      /* 14 */ "  leaky:",
      /* 15 */ "    words: leaky detector",
      /* 16 */ "    kind: probe",
      /* 17 */ "    hard: no",
      /* 18 */ "    moves: {dark_current: [+4.7 within 10 %, above 80, no reading (clipped)]}",
      /* 19 */ "    still: everything else",
      /* 20 */ "    may move: red_warmup",
      /* 21 */ "    severity: 0.2 to 3",
      /* 22 */ "    how often: 2",
      /* 23 */ "    looks like: [led_open]",
      /* 24 */ "    rework: RW-2 exchange the detector",
      /* 25 */ "  warm_room:",
      /* 26 */
      "    {words: warm room, kind: station, hard: no, moves: {red_warmup: -0.4}, still: [dark_current], "
      "severity: 1, either way: yes, rework: check}",
  };
}

std::string rules_with(int number, const std::string& line) {
  auto lines = rules_lines();
  lines.at(static_cast<std::size_t>(number - 1)) = line;
  return joined(lines);
}

Problems faults_of(const std::string& text) {
  const auto rules = read_rules(text, "rules.yaml");
  return rules ? Problems{} : rules.error();
}

std::string all_text(const Problems& faults) {
  std::string text;
  for (const Problem& fault : faults) text += fault.text() + "\n";
  return text;
}

struct Slip {
  int line;
  std::string replacement;
  std::string offending;  ///< the fault's column is where this stands in the line; empty: not looked at
  std::string id;
  std::string what;
};

const std::vector<Slip>& slips() {
  static const std::vector<Slip> all{
      {1, "diagnosis: \" \"", "\" \"", "rules_empty_text", "\"diagnosis\" says nothing"},
      {2, "revision: 0", "0", "rules_out_of_range", "revision: 0 is outside 1 to 1000000"},
      {2, "revision: three", "three", "integer_malformed", ""},
      {3, "reasons: new", "reasons", "yaml_unknown_key_near", ""},
      {4,
       "method: {figures hold within: 20 %, stray reading: 0 %, second fault: 1 %, unknown fault: 5 %, unknown moves: "
       "10 %}",
       "0 %, second", "rules_out_of_range", "stray reading: 0 % is outside 0.0001 to 100"},
      {4,
       "method: {figures hold within: 20, stray reading: 1 %, second fault: 1 %, unknown fault: 5 %, unknown moves: 1 "
       "%}",
       "20,", "unit_missing", ""},
      {7, "    red_driv: {usual: 0, spread: 0.1}", "red_driv", "rules_unknown_check",
       "\"red_driv\" is not a check that is looked at here"},
      {7, "    red_drive: {usual: 0, spread: 0}", "0}", "rules_out_of_range", "spread: 0 is outside 0.0001 to 100"},
      {7, "    red_drive: {usual: nan, spread: 1}", "nan", "number_not_finite", ""},
      {7, "    red_drive: {usual: 0}", "{", "yaml_missing_key", "the key \"spread\" is missing"},
      {8, "    red_warmup: {usual: 0, spread: 0.1, weight: 2}", "2}", "rules_out_of_range",
       "weight: 2 is outside 0.01 to 1"},
      {8, "    red_warmup: {usual: 0, spread: 0.1, typical: 7.9 mV}", "{", "rules_half_a_scale",
       "red_warmup: typical and tolerance belong together"},
      {8, "    red_warmup: {usual: 0, spread: 0.1, typical: 7.9 mV, tolerance: 0 mV}", "0 mV", "rules_tolerance",
       "red_warmup: the tolerance is not above 0"},
      {8, "    red_warmup: {usual: 0, spread: 0.1, typical: 7.9 nm, tolerance: 6 mV}", "7.9 nm", "unit_mismatch", ""},
      {10, "    dark_current: {usual: 0, spread: 0.1}\n    red_drive: {usual: 0, spread: 0.1}", "", "rules_check_twice",
       "red_drive stands in the stage \"first\" already"},
      {13,
       "    {words: LED open, kind: probe, hard: yes, moves: {red_drive: below -20}, still: everything else, severity: "
       "1, rework: RW-1}",
       "yes", "rules_hard_stage", "led_open: a hard fault, and only a hard fault, says at which stage it is decided"},
      {13,
       "    {words: LED open, kind: probe, hard: yes, decided at: fist, moves: {red_drive: below -20}, still: "
       "everything "
       "else, rework: RW-1}",
       "fist", "rules_unknown_stage", "there is no stage \"fist\""},
      {13,
       "    {words: LED open, kind: station, hard: yes, decided at: first, moves: {red_drive: below -20}, still: "
       "everything else, rework: RW-1}",
       "yes", "rules_station_hard", "led_open: a cause of the station is never decided by a probe's readings"},
      {14, "  Leaky:", "Leaky", "rules_bad_slug", "\"Leaky\" is not usable as the name of a cause"},
      {16, "    kind: prob", "prob", "rules_word_unknown", "\"prob\" means nothing here"},
      {17, "    hard: maybe", "maybe", "yaml_not_yes_no", ""},
      {18, "    moves: {}", "{}", "rules_no_move", "leaky moves no check, so no reading could ever speak for it"},
      {18, "    moves: {dark_curent: +4.7}", "dark_curent", "rules_unknown_check",
       "\"dark_curent\" is not a check that is looked at here"},
      {18, "    moves: {red_centroid: +4.7}", "red_centroid", "rules_unknown_check",
       "\"red_centroid\" is not a check that is looked at here"},
      {18, "    moves: {dark_current: up}", "up", "rules_expected", "\"up\" does not say what the check does"},
      {18, "    moves: {dark_current: 0}", "0", "rules_expected", ""},
      {18, "    moves: {dark_current: +-4}", "+-4", "rules_expected", ""},
      {18, "    moves: {dark_current: above -3}", "above", "rules_expected", ""},
      {18, "    moves: {dark_current: below 3}", "below", "rules_expected", ""},
      {18, "    moves: {dark_current: above}", "above", "rules_expected", ""},
      {18, "    moves: {dark_current: no reading (Too Dark)}", "no reading", "rules_expected", ""},
      {18, "    moves: {dark_current: +4.7 within 0 %}", "+4.7", "rules_expected", ""},
      {18, "    moves: {dark_current: +4.7 within 10}", "+4.7", "rules_expected", ""},
      {18, "    moves: {dark_current: +1e9}", "+1e9", "rules_expected", ""},
      {18, "    moves: {dark_current: []}", "[]", "rules_expected", ""},
      {18, "    moves: {dark_current: [+4.7, -4.7]}", "[", "rules_two_figures",
       "a check moves by one figure only, not by one of two"},
      {18, "    moves: [dark_current]", "[", "yaml_wrong_kind", ""},
      {19, "    still: [dark_current]\n    unused: 1", "[", "rules_moves_and_stays",
       "leaky: dark_current stands under \"moves\" and under \"still\""},
      {19, "    still: nothing else", "nothing else", "rules_unknown_check", ""},
      {20, "    may move: [dark_current]", "[", "rules_moves_and_stays",
       "leaky: dark_current stands under \"moves\" and under \"may move\""},
      {19, "    still: [red_drive]", "", "rules_may_move_anyway",
       "leaky: what stands neither under \"moves\" nor under \"still\" may move anyway"},
      {21, "    severity: 3 to 0.2", "3 to", "rules_severity", "\"3 to 0.2\" is not a range of severities"},
      {21, "    severity: some", "some", "rules_severity", ""},
      {21, "    severity: 0 to 1", "0 to", "rules_severity", ""},
      {21, "    may move : red_drive", "", "yaml_duplicate_key", ""},
      {21, "", "", "rules_no_severity", "leaky is not a hard fault and has no severity"},
      {22, "    how often: 0", "0", "rules_out_of_range", "how often: 0 is outside 0.001 to 1000"},
      {23, "    looks like: [led_opn]", "led_opn", "rules_unknown_cause", "there is no cause \"led_opn\""},
      {24, "    rework: \"\"", "\"\"", "rules_empty_text", "\"rework\" says nothing"},
      {24, "    rewerk: RW-2", "rewerk", "yaml_unknown_key_near", ""},
      {26,
       "    {words: warm room, kind: station, hard: no, moves: {red_warmup: above 2}, still: [dark_current], severity: "
       "1, either way: yes, rework: check}",
       "yes", "rules_either_way_bound", "warm_room: red_warmup is above or below a bound, which has no other sign"},
  };
  return all;
}

TEST(DiagnosisRules, AreReadWhole) {
  const auto rules = read_rules(joined(rules_lines()), "rules.yaml");
  ASSERT_TRUE(rules) << all_text(rules.error());
  EXPECT_EQ(rules->name, "sample");
  EXPECT_EQ(rules->revision, 3);
  EXPECT_EQ(rules->reason, "after the reel of March");
  EXPECT_EQ(rules->method, (Method{0.003, 0.01, 0.05, 0.1}));
  EXPECT_THAT(rules->stages, ::testing::ElementsAre("first", "second"));
  ASSERT_EQ(rules->checks.size(), 3u);
  EXPECT_EQ(rules->checks[1], (UsedCheck{"red_warmup", 0, -0.1, 0.1, 0.5, UsedCheck::Scale{7.9, 6.0}}));
  EXPECT_EQ(rules->checks[2], (UsedCheck{"dark_current", 1, 0.01, 0.07, 1.0, {}}));
  const Cause* open = rules->find("led_open");
  ASSERT_TRUE(open);
  EXPECT_EQ(open->hard_at, 0u);
  EXPECT_EQ(open->least, 1.0);
  EXPECT_EQ(open->most, 1.0);
  EXPECT_TRUE(open->everything_else_still);
  const Cause* leaky = rules->find("leaky");
  ASSERT_TRUE(leaky);
  using Form = Expected::Form;
  EXPECT_EQ(leaky->moves,
            (std::vector<Move>{
                {"dark_current",
                 {{Form::by, 4.7, 0.1, ""}, {Form::above, 80.0, 0.0, ""}, {Form::no_reading, 0.0, 0.0, "clipped"}}}}));
  EXPECT_FALSE(leaky->hard_at);
  EXPECT_EQ(leaky->least, 0.2);
  EXPECT_EQ(leaky->most, 3.0);
  EXPECT_EQ(leaky->how_often, 2.0);
  EXPECT_THAT(leaky->may_move, ::testing::ElementsAre("red_warmup"));
  EXPECT_THAT(leaky->looks_like, ::testing::ElementsAre("led_open"));
  EXPECT_EQ(leaky->rework, "RW-2 exchange the detector");
  const Cause* warm = rules->find("warm_room");
  ASSERT_TRUE(warm);
  EXPECT_EQ(warm->kind, CauseKind::station);
  EXPECT_TRUE(warm->either_way);
  EXPECT_FALSE(warm->everything_else_still);
  EXPECT_EQ(warm->moves.front().expected.front(), (Expected{Form::by, -0.4, 0.2, ""}));
  EXPECT_EQ(rules->find("nobody"), nullptr);
  EXPECT_EQ(rules->check("red_centroid"), nullptr);
}

TEST(DiagnosisRules, EachSlipIsToldWithItsPlace) {
  for (const Slip& slip : slips()) {
    SCOPED_TRACE("line " + std::to_string(slip.line) + ": " + slip.replacement);
    const Problems faults = faults_of(rules_with(slip.line, slip.replacement));
    const auto named = std::find_if(faults.begin(), faults.end(), [&](const Problem& f) { return f.id == slip.id; });
    ASSERT_NE(named, faults.end()) << all_text(faults);
    if (!slip.what.empty()) EXPECT_EQ(named->what(), slip.what);
    if (slip.offending.empty()) continue;
    const std::string column = std::to_string(slip.replacement.find(slip.offending) + 1);
    EXPECT_EQ(named->where, "rules.yaml:" + std::to_string(slip.line) + ":" + column);
  }
}

TEST(DiagnosisRules, AMisspeltWordIsToldWithTheNearestOne) {
  const auto remedy = [](int line, const std::string& replacement) {
    const Problems faults = faults_of(rules_with(line, replacement));
    return faults.empty() ? std::string{} : faults.front().remedy();
  };
  EXPECT_EQ(remedy(7, "    red_driv: {usual: 0, spread: 0.1}"), "did you mean \"red_drive\"?");
  EXPECT_EQ(remedy(18, "    moves: {dark_curent: +4.7}"), "did you mean \"dark_current\"?");
  EXPECT_EQ(remedy(20, "    may move: [red_warmpu]"), "did you mean \"red_warmup\"?");
  EXPECT_EQ(remedy(23, "    looks like: [led_opn]"), "did you mean \"led_open\"?");
  EXPECT_EQ(remedy(16, "    kind: prob"), "did you mean \"probe\"?");
  EXPECT_EQ(remedy(16, "    kind: x"), "one of: probe, station");
}

TEST(DiagnosisRules, AllFaultsAreToldAtOnce) {
  auto lines = rules_lines();
  lines[1] = "revision: -1";
  lines[6] = "    red_drive: {usual: 0, spread: -1}";
  lines[9] = "    dark_current: {usual: 0.01, sprad: 0.07, spread: 0.07}";
  lines[15] = "    kind: prob";
  lines[17] = "    moves: {dark_current: up}";
  lines[20] = "    severity: none";
  lines[23] = "    rework: \"\"";
  const Problems faults = faults_of(joined(lines));
  EXPECT_EQ(faults.size(), 7u) << all_text(faults);
}

TEST(DiagnosisRules, EveryMissingKeyIsTold) {
  std::vector<std::string> whats;
  for (const Problem& fault : faults_of("{}")) whats.push_back(fault.what());
  EXPECT_THAT(whats,
              ::testing::UnorderedElementsAre("the key \"diagnosis\" is missing", "the key \"revision\" is missing",
                                              "the key \"reason\" is missing", "the key \"method\" is missing",
                                              "the key \"stages\" is missing", "the key \"causes\" is missing"));
  EXPECT_EQ(faults_of("[1, 2]").size(), 1u);
  EXPECT_FALSE(faults_of("").empty());
  EXPECT_FALSE(faults_of("causes: {a: {").empty());
  EXPECT_FALSE(faults_of(std::string("\xff\xfe")).empty());
}

TEST(DiagnosisRules, ADocumentWithoutCausesSaysNothing) {
  auto lines = rules_lines();
  lines.resize(10);
  lines.push_back("causes: {}");
  const Problems faults = faults_of(joined(lines));
  ASSERT_EQ(faults.size(), 1u) << all_text(faults);
  EXPECT_EQ(faults[0].id, "rules_no_cause");
}

// Whoever adds a fault to the reader must add its slip here.
TEST(DiagnosisRules, EveryFaultOfTheTableIsTried) {
  std::set<std::string> tried{"rules_no_cause"};
  for (const Slip& slip : slips()) tried.insert(slip.id);
  for (const ProblemRow& row : problem_table())
    if (row.id.starts_with("rules_")) EXPECT_TRUE(tried.contains(std::string{row.id})) << row.id;
}

TEST(DiagnosisRules, AlteredTextNeverCrashesTheReader) {
  const std::string whole = joined(rules_lines());
  for (std::size_t at = 0; at < whole.size(); ++at) {
    std::string text = whole;
    if (at % 3 == 0)
      text.resize(at);
    else if (at % 3 == 1)
      text.erase(at, 1);
    else
      text[at] = ':';
    const auto rules = read_rules(text, "altered.yaml");
    if (!rules) EXPECT_FALSE(rules.error().empty());
  }
}

}  // namespace
}  // namespace probewright::limits::diagnosis
