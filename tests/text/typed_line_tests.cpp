#include "station/text/typed_line.h"

#include <gtest/gtest.h>

#include "station/text/line.h"

namespace probewright::text {
namespace {

using Lines = std::vector<std::string>;

TEST(TypedLine, GivesWholeLinesHoweverTheyCome) {
  TypedLine typed;
  EXPECT_EQ(typed.feed("AQ20-0"), Lines{});
  EXPECT_EQ(typed.text(), "AQ20-0");
  EXPECT_EQ(typed.feed("48-00001\rnest 3\nAQ"), (Lines{"AQ20-048-00001", "nest 3"}));
  EXPECT_EQ(typed.text(), "AQ");
}

TEST(TypedLine, KnowsTheKeysOfAPersonWhoErrs) {
  TypedLine typed;
  EXPECT_EQ(typed.feed("AQ2\x7f\x08R\n"), Lines{"AR"});
  EXPECT_EQ(typed.feed("wrong\x15right\n"), Lines{"right"});
  EXPECT_EQ(typed.feed("\xC3\xBC\x7fu\n"), Lines{"u"});               // one character, two bytes
  EXPECT_EQ(typed.feed("a\x1b[Ab\x1b[3~c\x1bOPd\n"), Lines{"abcd"});  // arrow up, delete, F1
  EXPECT_EQ(typed.feed("\x7f\x7fx\n"), Lines{"x"});
}

TEST(TypedLine, KeepsTheSeparatorThatScannersSend) {
  TypedLine typed;
  EXPECT_EQ(typed.feed("10LOT\x1d"
                       "21SERIAL\n"),
            Lines{"10LOT\x1d"
                  "21SERIAL"});
}

TEST(TypedLine, EndsByControlDOnAnEmptyLineOnly) {
  TypedLine typed;
  typed.feed("abc\x04");
  EXPECT_FALSE(typed.ended());
  typed.feed("\n\x04");
  EXPECT_TRUE(typed.ended());
}

TEST(ShownTyped, HidesWhatMayBecomeABadge) {
  const Lines badges{"AQS-7Q41-IV", "AQS-2K88-DO"};
  EXPECT_EQ(shown_typed("AQS-7", badges), ".....");
  EXPECT_EQ(shown_typed("AQS-7Q41-IV", badges), "...........");
  EXPECT_EQ(shown_typed("AQ20-0", badges), "AQ20-0");
  EXPECT_EQ(shown_typed("sign out", badges), "sign out");
  EXPECT_EQ(shown_typed("", badges), "");
}

TEST(Typed, WordsAreRequestsAndTheRestAreScans) {
  const auto request = [](const char* text) { return std::get<sequence::LineRequest>(meaning_of_typed(text)); };
  EXPECT_TRUE(std::holds_alternative<Leave>(meaning_of_typed(" Quit ")));
  EXPECT_TRUE(std::holds_alternative<sequence::SignOut>(request("SIGN  out")));
  EXPECT_TRUE(std::holds_alternative<sequence::CloseLot>(request("close lot")));
  EXPECT_EQ(std::get<sequence::StopNest>(request("stop 12")).nest, 12);
  for (const char* scan : {"AQ20-048-00001", "nest 3", "stop", "stop it", "stop 0", "quit it"})
    EXPECT_EQ(std::get<sequence::Scan>(request(scan)).text, scan);
}

}  // namespace
}  // namespace probewright::text
