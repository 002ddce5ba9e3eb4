#include "station/base/canonical_json.h"

#include <gtest/gtest.h>

#include <nlohmann/json.hpp>

#include "station/base/entropy.h"

namespace probewright {
namespace {

using Object = Body::Object;
using Array = Body::Array;

// Source: RFC 8785 section 3.2.2 and 3.2.3: the example's strings and literals, keys sorted, no white space.
TEST(CanonicalJson, Rfc8785LiteralsAndStrings) {
  const Body body{Object{
      {"string", "\u20ac$\x0F\nA'B\"\\\\\"/"},
      {"literals", Array{Body{}, true, false}},
      {"numbers", Array{333, -1, 0}},
  }};
  EXPECT_EQ(canonical(body),
            "{\"literals\":[null,true,false],\"numbers\":[333,-1,0],"
            "\"string\":\"\u20ac$\\u000f\\nA'B\\\"\\\\\\\\\\\"/\"}");
}

// Source: RFC 8785 section 3.2.2.2: two-character escapes for these, \u00xx in lower case for the rest below U+0020,
// everything else as it is.
TEST(CanonicalJson, EscapesNoMoreThanItMust) {
  std::string all;
  for (char c = 0; c < 0x20; ++c) all += c;
  EXPECT_EQ(canonical(all),
            "\"\\u0000\\u0001\\u0002\\u0003\\u0004\\u0005\\u0006\\u0007\\b\\t\\n\\u000b\\f\\r\\u000e\\u000f"
            "\\u0010\\u0011\\u0012\\u0013\\u0014\\u0015\\u0016\\u0017\\u0018\\u0019\\u001a\\u001b\\u001c\\u001d\\u001e"
            "\\u001f\"");
  EXPECT_EQ(canonical("/\x7F\u00e9\u2028\U0001F600"), "\"/\x7F\u00e9\u2028\U0001F600\"");
}

// Source: RFC 7493 (I-JSON) section 2.2: integers are safe in every reader up to 2^53 - 1.
TEST(CanonicalJson, BoundsIntegers) {
  constexpr std::int64_t largest = 9'007'199'254'740'991;
  EXPECT_EQ(canonical(largest), "9007199254740991");
  EXPECT_EQ(canonical(-largest), "-9007199254740991");
  EXPECT_THROW(canonical(largest + 1), std::invalid_argument);
  EXPECT_THROW(canonical(-largest - 1), std::invalid_argument);
  EXPECT_EQ(parse_body("9007199254740991").value(), Body{largest});
  EXPECT_TRUE(parse_body("9007199254740992").has_error());
  EXPECT_TRUE(parse_body("99999999999999999999").has_error());
}

TEST(CanonicalJson, OurOwnMistakesAreExceptions) {
  for (const char* key : {"", "Upper", "with space", "caf\u00e9", "dash-ed"})
    EXPECT_THROW(canonical(Object{{key, 1}}), std::invalid_argument) << key;
  EXPECT_THROW(canonical("\xFF"), std::invalid_argument);
  EXPECT_EQ(canonical(Object{{"ratio_deviation_0p4", 1}}), "{\"ratio_deviation_0p4\":1}");
}

TEST(CanonicalJson, RefusesEveryOtherFormOfTheSameData) {
  for (const char* bad : {"",
                          " 1",
                          "1 ",
                          "{ }",
                          "{\"a\": 1}",
                          "{\"b\":1,\"a\":2}",
                          "{\"a\":1,\"a\":2}",
                          "{\"a\":1,}",
                          "{,\"a\":1}",
                          "[1,]",
                          "[,1]",
                          "{\"a\"}",
                          "01",
                          "-0",
                          "+1",
                          "1.0",
                          "1e3",
                          "-",
                          "\"\\/\"",
                          "\"\\u0041\"",
                          "\"\\u000A\"",
                          "\"\\u000a\"",
                          "\"\\u001F\"",
                          "\"\\u00e9\"",
                          "\"\t\"",
                          "\"a",
                          "\"\\",
                          "\"\\u00",
                          "[",
                          "{",
                          "{\"a\":",
                          "tru",
                          "nul",
                          "True",
                          "NaN",
                          "\"\xFF\"",
                          "[1]x",
                          "{\"A\":1}",
                          "{1:1}",
                          "//",
                          "[1 ,2]"})
    EXPECT_TRUE(parse_body(bad).has_error()) << bad;
  EXPECT_EQ(
      parse_body("[1,2,x]", "entry 7").error().text(),
      "entry 7: the bytes are not canonical JSON from offset 5 on (verify the ledger: the entry was damaged or not "
      "written by this program)");
}

TEST(CanonicalJson, BoundsDepth) {
  const auto nested = [](std::size_t depth) { return std::string(depth, '[') + std::string(depth, ']'); };
  EXPECT_TRUE(parse_body(nested(64)).has_value());
  EXPECT_TRUE(parse_body(nested(70)).has_error());
  EXPECT_TRUE(parse_body(std::string(1'000'000, '[')).has_error());
  EXPECT_EQ(canonical(parse_body(nested(64)).value()), nested(64));
}

TEST(CanonicalJson, LooksUpMembers) {
  const Body body{Object{{"serial", "AQ20-048-00137"}, {"count", 3}}};
  EXPECT_EQ(body.text("serial"), "AQ20-048-00137");
  EXPECT_EQ(body.text("count", "none"), "none");
  EXPECT_EQ(body.number("count"), 3);
  EXPECT_EQ(body.number("serial", -1), -1);
  EXPECT_EQ(body.find("lot"), nullptr);
  EXPECT_EQ(Body{1}.find("a"), nullptr);
}

Body random_body(Entropy& entropy, int depth) {
  const auto text = [&] {
    std::string word;
    for (auto n = entropy.next() % 8; n > 0; --n)
      word += std::array{"a", "\"", "\\", "\n", "\x01", "\u00b5", "\U0001F600"}[entropy.next() % 7];
    return word;
  };
  switch (entropy.next() % (depth < 4 ? 6 : 4)) {
    case 0:
      return {};
    case 1:
      return entropy.next() % 2 == 0;
    case 2:
      return static_cast<std::int64_t>(entropy.next() >> 11) - (std::int64_t{1} << 52);
    case 3:
      return text();
    case 4: {
      Array array;
      for (auto n = entropy.next() % 5; n > 0; --n) array.push_back(random_body(entropy, depth + 1));
      return array;
    }
    default: {
      Object object;
      for (auto n = entropy.next() % 5; n > 0; --n)
        object["k" + std::to_string(entropy.next() % 20)] = random_body(entropy, depth + 1);
      return object;
    }
  }
}

// Outside reference: another JSON library reads our bytes as the same data and, as its keys are sorted and its dump has
// no white space, writes the same bytes for this subset.
TEST(CanonicalJson, AnotherLibraryAgrees) {
  SeededEntropy entropy{3};
  for (int i = 0; i < 2000; ++i) {
    const Body body = random_body(entropy, 0);
    const std::string bytes = canonical(body);
    ASSERT_EQ(nlohmann::json::parse(bytes).dump(), bytes);
    const auto back = parse_body(bytes);
    ASSERT_TRUE(back.has_value()) << bytes;
    ASSERT_EQ(*back, body) << bytes;
  }
}

// One changed byte: refused, or other data whose canonical form is exactly those bytes. Never the same data twice.
TEST(CanonicalJson, EveryChangedByteShows) {
  const std::string bytes =
      canonical(Object{{"serial", "AQ20-048-00137"}, {"values", Array{1, -20, true, Body{}, "x\n"}}});
  const Body body = parse_body(bytes).value();
  for (std::size_t at = 0; at < bytes.size(); ++at)
    for (int c = 0; c < 256; ++c) {
      std::string changed = bytes;
      changed[at] = static_cast<char>(c);
      if (changed == bytes) continue;
      const auto read = parse_body(changed);
      if (read.has_error()) continue;
      ASSERT_NE(*read, body) << changed;
      ASSERT_EQ(canonical(*read), changed);
    }
}

}  // namespace
}  // namespace probewright
