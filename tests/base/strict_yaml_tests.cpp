#include "station/base/strict_yaml.h"

#include <gtest/gtest.h>

#include "station/base/entropy.h"

namespace probewright::yaml {
namespace {

constexpr std::string_view sheet = R"(sheet: AQ-20
revision: 4
reason: first production sheet with guarded saturation error
checks:
  red_centroid:            {lower: 655.0 nm, upper: 665.0 nm, U: 0.33 nm}
  red_drive:               {nominal: 20 mA, tolerance: 2 %, U: 0.26 %}
  ratio_deviation_0p4:     {lower: -2 %, upper: 2 %, U: 0.71 %, guard: 0.5}
  secondary_emission:      {upper: 0.30 %, typical: 0.02 %, U: 0.05 %, guard: {risk: 5 %}}
  red_half_power_centre:   record only
bins:
  by: red_centroid
  B1: {lower: 655.0 nm, upper: 657.0 nm, nominal: 656 nm, id resistor: 10.2 kohm}
stop when: {fails in a row: 4, yield below: 85 % of last 50}
quoted: "two words"
on: [1, 2.5, yes]
)";

/// The ids of all faults with their places, in order: "yaml_tag@3:7".
std::vector<std::string> told(Faults& faults) {
  std::vector<std::string> all;
  for (const Problem& problem : faults.take()) all.push_back(problem.id + "@" + problem.where.substr(2));
  return all;
}

std::vector<std::string> faults_of(std::string_view text) {
  Faults faults{"f"};
  (void)Document::read(text, faults);
  return told(faults);
}

using Told = std::vector<std::string>;

TEST(StrictYaml, ReadsASheet) {
  Faults faults{"f"};
  const auto document = Document::read(sheet, faults);
  ASSERT_TRUE(document && faults.empty());
  Map top = *document->root().map(faults);
  EXPECT_EQ(top.need("sheet", faults)->text(faults), "AQ-20");
  EXPECT_EQ(top.need("revision", faults)->integer(faults), 4);
  EXPECT_EQ(top.need("quoted", faults)->text(faults), "two words");
  Map checks = *top.need("checks", faults)->map(faults);
  Map centroid = *checks.need("red_centroid", faults)->map(faults);
  EXPECT_EQ(centroid.need("lower", faults)->quantity("nm", faults), 655.0);
  EXPECT_EQ(centroid.need("U", faults)->quantity("um", faults), 0.00033);
  EXPECT_EQ(centroid.need("upper", faults)->place().line, 5);
  EXPECT_EQ(centroid.need("upper", faults)->place().column, 53);
  EXPECT_EQ(checks.need("red_half_power_centre", faults)->text(faults), "record only");
  EXPECT_EQ(checks.need("ratio_deviation_0p4", faults)->map(faults)->need("guard", faults)->number(faults), 0.5);
  const auto items = top.need("on", faults)->list(faults)->items();
  ASSERT_EQ(items.size(), 3u);
  EXPECT_EQ(items[1].number(faults), 2.5);
  EXPECT_EQ(items[2].yes_no(faults), true);
  Map bins = *top.need("bins", faults)->map(faults);
  ASSERT_EQ(bins.items().size(), 2u);
  EXPECT_EQ(bins.items()[1].key, "B1");
  EXPECT_EQ(bins.items()[1].place.line, 12);
  EXPECT_EQ(told(faults), Told{});
}

TEST(StrictYaml, FindsDuplicateKeysAndGoesOn) {
  Faults faults{"f"};
  const auto document = Document::read("a: 1\nb: {x: 1, y: 2, x: 3}\na: 2\na: 3\n", faults);
  ASSERT_TRUE(document);
  Map top = *document->root().map(faults);
  EXPECT_EQ(top.need("a", faults)->integer(faults), 1);  // the first one stands
  const Problems problems = faults.take();
  ASSERT_EQ(problems.size(), 3u);
  EXPECT_EQ(problems[0].where, "f:2:17");
  EXPECT_EQ(problems[1].where, "f:3:1");
  EXPECT_EQ(problems[2].where, "f:4:1");
  for (const Problem& problem : problems) EXPECT_EQ(problem.id, "yaml_duplicate_key");
  EXPECT_EQ(problems[2].what(), "the key \"a\" stands here again; it stands first in line 1");
}

TEST(StrictYaml, TellsEveryFaultAtOnce) {
  Faults faults{"f"};
  const auto document =
      Document::read("lower: 655 mA\nupper: 1,5 nm\nwdith: 3 nm\nempty:\nlist: [a]\nfits: maybe\ncount: 4.5\n", faults);
  ASSERT_TRUE(document);
  Map top = *document->root().map(faults);
  EXPECT_FALSE(top.need("lower", faults)->quantity("nm", faults));
  EXPECT_FALSE(top.need("upper", faults)->quantity("nm", faults));
  EXPECT_FALSE(top.maybe("width"));
  EXPECT_FALSE(top.need("typical", faults));
  EXPECT_FALSE(top.need("empty", faults)->text(faults));
  EXPECT_FALSE(top.need("list", faults)->map(faults));
  EXPECT_FALSE(top.need("fits", faults)->yes_no(faults));
  EXPECT_FALSE(top.need("count", faults)->integer(faults));
  top.finish(faults);
  EXPECT_EQ(told(faults),
            (Told{"yaml_missing_key@1:1", "unit_mismatch@1:8", "number_malformed@2:8", "yaml_unknown_key_near@3:1",
                  "yaml_wrong_kind@4:1", "yaml_wrong_kind@5:7", "yaml_not_yes_no@6:7", "integer_malformed@7:8"}));
}

TEST(StrictYaml, NamesTheNearestWord) {
  Faults faults{"f"};
  const auto document = Document::read("tolerence: 2 %\nzzzz: 1\n", faults);
  Map top = *document->root().map(faults);
  (void)top.maybe("tolerance");
  (void)top.maybe("typical");
  top.finish(faults);
  const Problems problems = faults.take();
  ASSERT_EQ(problems.size(), 2u);
  EXPECT_EQ(problems[0].text(), "f:1:1: there is no key \"tolerence\" here (did you mean \"tolerance\"?)");
  EXPECT_EQ(problems[1].id, "yaml_unknown_key");
}

TEST(StrictYaml, RefusesAliasesAnchorsAndTags) {
  EXPECT_EQ(faults_of("a: &x 1\nb: *x\n"), (Told{"yaml_anchor@1:4", "yaml_alias@2:4"}));
  EXPECT_EQ(faults_of("a: !!binary aGk=\n"), (Told{"yaml_tag@1:4"}));
  EXPECT_EQ(faults_of("a: !mine {b: 1}\n"), (Told{"yaml_tag@1:4"}));
  EXPECT_EQ(faults_of("a: !<tag:yaml.org,2002:str> b\n"), (Told{"yaml_tag@1:4"}));
  EXPECT_EQ(faults_of("a: 'quoted'\nb: \"quoted\"\nc: plain\nd: |\n  block\n"), Told{});
}

// The alias is one fault; whoever reads the value hears nothing more of it.
TEST(StrictYaml, AnAliasIsToldOnce) {
  Faults faults{"f"};
  const auto document = Document::read("a: &x {k: 1}\nb: *x\n", faults);
  ASSERT_TRUE(document);
  Map top = *document->root().map(faults);
  EXPECT_FALSE(top.need("b", faults)->map(faults));
  EXPECT_FALSE(top.need("b", faults)->text(faults));
  EXPECT_EQ(told(faults), (Told{"yaml_anchor@1:4", "yaml_alias@2:4"}));
}

// A well-known attack: ten lines whose aliases would unfold to a billion values.
TEST(StrictYaml, ABillionAliasesCostNothing) {
  std::string text = "a: &a [x, x, x, x, x, x, x, x, x]\n";
  for (char c = 'b'; c <= 'i'; ++c) {
    const char before = static_cast<char>(c - 1);
    text += std::string{c} + ": &" + c + " [";
    for (int i = 0; i < 9; ++i) text += std::string{i == 0 ? "*" : ", *"} + before;
    text += "]\n";
  }
  EXPECT_EQ(faults_of(text).size(), 9u + 8u * 9u);
}

TEST(StrictYaml, OneDocumentAFile) {
  EXPECT_EQ(faults_of("---\na: 1\n"), Told{});
  EXPECT_EQ(faults_of("# c\n\n---\na: 1\n...\n"), Told{});
  EXPECT_EQ(faults_of("a: 1\n---\nb: 2\n"), (Told{"yaml_several_documents@2:1"}));
  EXPECT_EQ(faults_of(""), (Told{"yaml_empty@1:1"}));
  EXPECT_EQ(faults_of("# only a comment\n"), (Told{"yaml_empty@1:1"}));
  EXPECT_EQ(faults_of("~\n"), (Told{"yaml_empty@1:1"}));
}

// A list in one endless line once took minutes: the place of each value was counted from the start of the line.
TEST(StrictYaml, AnEndlessLineTakesNoLongerThanManyLines) {
  EXPECT_EQ(faults_of("[" + std::string(100'000, ',')).size(), 1u);
}

// The library reads the version by the locale of the program: under a German one "%YAML 1.2" was version 12 and
// refused, under others it was read. So directives are refused everywhere.
TEST(StrictYaml, NoDirectives) {
  EXPECT_EQ(faults_of("%YAML 1.2\n---\na: 1\n"), (Told{"yaml_directive@1:1"}));
  EXPECT_EQ(faults_of("# c\r\n\r\n%TAG ! tag:x,2026:\r\n---\r\na: 1\r\n"), (Told{"yaml_directive@3:1"}));
  EXPECT_EQ(faults_of("%"), (Told{"yaml_directive@1:1"}));
  EXPECT_EQ(faults_of("a: 1\n...\n%YAML 1.2\n---\nb: 1\n").size(), 1u);
  EXPECT_EQ(faults_of("a: 2 %\nb: |\n  %x\n"), Told{});
}

TEST(StrictYaml, BoundsSizeAndDepth) {
  const auto nested = [](int depth) { return std::string(depth, '[') + "1" + std::string(depth, ']'); };
  EXPECT_EQ(faults_of(nested(64)), Told{});
  EXPECT_EQ(faults_of(nested(65)), (Told{"yaml_too_deep@1:65"}));
  const auto endless = faults_of(std::string(100'000, '['));
  ASSERT_EQ(endless.size(), 1u);
  EXPECT_TRUE(endless[0].starts_with("yaml_too_deep@1:")) << endless[0];
  EXPECT_EQ(faults_of("a: " + std::string(Document::max_bytes, 'x')), (Told{"file_too_large@1:1"}));
}

TEST(StrictYaml, RefusesWhatIsNoText) {
  EXPECT_EQ(faults_of(std::string_view{"a: 1\nb: \0\n", 10}), (Told{"text_control_character@2:4"}));
  EXPECT_EQ(faults_of("a: 1\nb: \xFF\n"), (Told{"text_not_utf8@2:4"}));
  EXPECT_EQ(faults_of("a: \xC0\xAF\n"), (Told{"text_not_utf8@1:4"}));      // overlong
  EXPECT_EQ(faults_of("a: \xED\xA0\x80\n"), (Told{"text_not_utf8@1:4"}));  // a surrogate
  EXPECT_EQ(faults_of(std::string_view{"\xFF\xFE"
                                       "a\0",
                                       4})
                .size(),
            2u);  // UTF-16
  EXPECT_EQ(faults_of("\xEF\xBB\xBF"
                      "a: 1\n"),
            Told{});  // the mark of UTF-8 is allowed
}

TEST(StrictYaml, ColumnsCountCharactersNotBytes) {
  EXPECT_EQ(faults_of("\u00E4\u00F6\u00FC: *x\n").size(), 1u);
  EXPECT_EQ(faults_of("{\u00E4\u00F6\u00FC: 1, b: !t 2}\n"), (Told{"yaml_tag@1:13"}));
}

TEST(StrictYaml, SyntaxErrorsAreFaults) {
  for (const char* bad : {"a: [1, 2\n", "a: {b: 1\n", "a: 'open\n", "a: 'it''s open\n", "a: \"open \\\"\n", "a: 'open",
                          "\"k: 1\nb: 2\n", "\tb: 1\n", "a: 1\n b: 2\n", "a: *nowhere\n", "@a: 1\n"}) {
    const auto all = faults_of(bad);
    ASSERT_EQ(all.size(), 1u) << bad;
    EXPECT_TRUE(all[0].starts_with("yaml_syntax@")) << bad << ": " << all[0];
  }
  EXPECT_EQ(faults_of("? [a, b]\n: 1\nc: 2\n"), (Told{"yaml_key_not_text@1:3"}));
  EXPECT_EQ(faults_of("? {a: b}\n: {c: d}\n"), (Told{"yaml_key_not_text@1:3"}));
}

// A value that ends with its quotes is whole; quotes inside it or inside plain words open nothing.
TEST(StrictYaml, QuotedValuesEndWhereTheyShould) {
  EXPECT_EQ(faults_of("a: 'it''s'\nb: \"x \\\" y\"\nc: \"\\\\\"\nd: plain \"quote\nk's: 1\n"), Told{});
}

TEST(StrictYaml, KindsAndScalars) {
  Faults faults{"f"};
  const auto document = Document::read("[null, '', 'null', {}, [], 1e3, -0, 007]\n", faults);
  const auto items = document->root().list(faults)->items();
  EXPECT_FALSE(items[0].is_scalar() || items[0].is_map() || items[0].is_list());
  EXPECT_EQ(items[1].text(faults), "");
  EXPECT_EQ(items[2].text(faults), "null");  // in quotes it is a word
  EXPECT_TRUE(items[3].is_map());
  EXPECT_TRUE(items[4].is_list());
  EXPECT_EQ(items[5].number(faults), 1000.0);
  EXPECT_EQ(items[7].text(faults), "007");
  EXPECT_TRUE(faults.empty());
  EXPECT_FALSE(items[1].number(faults));
  EXPECT_FALSE(items[3].number(faults));
  EXPECT_EQ(told(faults), (Told{"number_malformed@1:8", "yaml_wrong_kind@1:20"}));
}

// Whatever a person or a damaged disk makes of a file: it reads, or there is a fault; never a crash, an exception, a
// hang.
TEST(StrictYaml, AnyBytesEndInAValueOrAFault) {
  SeededEntropy entropy{42};
  for (int round = 0; round < 3000; ++round) {
    std::string text{sheet};
    for (std::uint64_t edits = 1 + entropy.next() % 6; edits > 0; --edits) {
      const std::size_t at = entropy.next() % text.size();
      constexpr std::string_view spice = "{}[]:,&*!|>'\"%@`#-?\n\t \0x\xFF";
      switch (entropy.next() % 3) {
        case 0:
          text[at] = spice[entropy.next() % spice.size()];
          break;
        case 1:
          text.erase(at, 1 + entropy.next() % 9);
          break;
        default:
          text.insert(at, 1, spice[entropy.next() % spice.size()]);
      }
    }
    Faults faults{"f"};
    const auto document = Document::read(text, faults);
    if (!document) ASSERT_FALSE(faults.empty()) << text;
  }
}

TEST(NearestWord, WithinAThirdOfTheLength) {
  EXPECT_EQ(nearest_word("uper", {"lower", "upper"}), "upper");
  EXPECT_EQ(nearest_word("red_centriod", {"red_centroid", "red_width"}), "red_centroid");
  EXPECT_EQ(nearest_word("ab", {"ac"}), "");  // two letters: any other word is another word
  EXPECT_EQ(nearest_word("", {"a"}), "");
  EXPECT_EQ(nearest_word("anything", {}), "");
}

}  // namespace
}  // namespace probewright::yaml
