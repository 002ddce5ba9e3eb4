#include "station/pages/gs1.h"

#include <gtest/gtest.h>

#include <cstdlib>
#include <utility>

#include "tests/support/reference.h"

namespace probewright::pages::gs1 {
namespace {

template <class T>
std::string id_of(const Result<T>& result) {
  return result.has_error() ? result.error().id : "none";
}

// Source: GS1 General Specifications, "Check digit calculations", and published numbers; see the file.
TEST(Gs1CheckDigit, AgreesWithPublishedNumbers) {
  const auto table = reference::load("gs1_check_digits.csv");
  const auto digits = table.texts("digits_without_check"), wanted = table.texts("check_digit");
  ASSERT_EQ(digits.size(), 8u);
  for (std::size_t i = 0; i < digits.size(); ++i) {
    EXPECT_EQ(check_digit(digits[i]), wanted[i].front()) << digits[i];
    EXPECT_EQ(check_digit("000" + digits[i]), wanted[i].front()) << "zeros in front change nothing: " << digits[i];
  }
}

TEST(Gs1CheckDigit, OfWhatIsNoNumberThereIsNone) {
  EXPECT_FALSE(check_digit(""));
  EXPECT_FALSE(check_digit("12a4"));
  EXPECT_FALSE(check_digit("12 4"));
}

// Known of the method (weights 3 and 1, sum to ten): it finds each single wrong digit, and each swap of neighbours that
// do not differ by five.
TEST(Gs1Gtin, EveryWrongDigitAndMostSwapsAreFound) {
  const std::string good = "09521234543213";
  ASSERT_EQ(gtin_14(good).value(), good);
  for (std::size_t i = 0; i < good.size(); ++i)
    for (char digit = '0'; digit <= '9'; ++digit) {
      std::string bad = good;
      bad[i] = digit;
      EXPECT_EQ(id_of(gtin_14(bad)), digit == good[i] ? "none" : "gs1_check_digit") << bad;
    }
  for (std::size_t i = 0; i + 1 < good.size(); ++i) {
    std::string bad = good;
    std::swap(bad[i], bad[i + 1]);
    const int difference = std::abs(good[i] - good[i + 1]);
    EXPECT_EQ(id_of(gtin_14(bad)), difference == 0 || difference == 5 ? "none" : "gs1_check_digit") << bad;
  }
}

// Numbers of the reference file with their check digits. Source of the padding: GS1 General Specifications, GTIN in a
// 14-digit field (as in facts published by GS1; from memory).
TEST(Gs1Gtin, IsPaddedTo14Digits) {
  EXPECT_EQ(gtin_14("73513537").value(), "00000073513537");
  EXPECT_EQ(gtin_14("036000291452").value(), "00036000291452");
  EXPECT_EQ(gtin_14("6291041500213").value(), "06291041500213");
}

TEST(Gs1Gtin, RefusesOtherLengthsAndSigns) {
  for (const char* text : {"", "7", "7351353", "735135379", "0360002914", "000000000000000"})
    EXPECT_EQ(id_of(gtin_14(text)), "gs1_gtin_length") << text;
  for (const char* text : {"0952123454321X", " 9521234543213", "+9521234543213"})
    EXPECT_EQ(id_of(gtin_14(text)), "gs1_gtin_digits") << text;
}

// GS1 keeps the prefix 952 for demonstrations and examples (list of GS1 prefixes; from memory).
TEST(Gs1Gtin, ExamplesHavePrefix952) {
  EXPECT_TRUE(is_example("09521234543213"));
  EXPECT_TRUE(is_example(gtin_14("9521234543213").value()));
  EXPECT_FALSE(is_example("06291041500213"));
  EXPECT_FALSE(is_example("95212345432130"));
  EXPECT_FALSE(is_example("952"));
}

TEST(Gs1Date, IsYymmddOfARealDay) {
  EXPECT_EQ(yymmdd("2026-12-01").value(), "261201");
  EXPECT_EQ(yymmdd("2028-02-29").value(), "280229");
  for (const char* text : {"2026-02-29", "2026-13-01", "2026-00-10", "2026-12-00", "2026-12-32", "2026-04-31",
                           "26-12-01", "2026/12/01", "20x6-12-01", "2026-12-1", ""})
    EXPECT_EQ(id_of(yymmdd(text)), "gs1_date") << text;
}

const Elements example{"09521234543213", "260131", "ABC123", "S0001"};
const std::string example_string =
    "0109521234543213"
    "11260131"
    "10ABC123"
    "\x1d"
    "21S0001";

// Source: the rules of the GS1 General Specifications for element strings and human readable interpretation: fixed
// lengths need no separator, variable ones not at the end do; AIs stand in round brackets for people.
TEST(Gs1Elements, TheExampleIsWrittenAsTheRulesSay) {
  EXPECT_EQ(element_string(example).value(), example_string);
  EXPECT_EQ(bracketed(example).value(), "(01)09521234543213(11)260131(10)ABC123(21)S0001");
  EXPECT_EQ(bracketed(example, '[', ']').value(), "[01]09521234543213[11]260131[10]ABC123[21]S0001");
}

TEST(Gs1Elements, TheExampleIsReadBack) {
  EXPECT_EQ(parse(example_string).value(), example);
  EXPECT_EQ(parse("]d2" + example_string).value(), example);
  EXPECT_EQ(parse("0109521234543213"
                  "21S0001\x1d"
                  "10ABC123\x1d"
                  "11260131")
                .value(),
            example)
      << "in another order";
  EXPECT_EQ(parse(example_string + "\x1d").value(), example) << "some readers end with a separator";
}

TEST(Gs1Elements, WhatIsNotTheIsLeftOut) {
  const Elements few{"09521234543213", "", "", "S0001"};
  EXPECT_EQ(element_string(few).value(), "010952123454321321S0001");
  EXPECT_EQ(parse("010952123454321321S0001").value(), few);
}

TEST(Gs1Elements, FaultsAreNamed) {
  const auto with = [](auto change) {
    Elements elements = example;
    change(elements);
    return id_of(element_string(elements));
  };
  EXPECT_EQ(with([](Elements& e) { e.gtin = ""; }), "gs1_no_gtin");
  EXPECT_EQ(with([](Elements& e) { e.gtin = "9521234543213"; }), "gs1_gtin_length");
  EXPECT_EQ(with([](Elements& e) { e.gtin = "09521234543214"; }), "gs1_check_digit");
  EXPECT_EQ(with([](Elements& e) { e.production_date = "261301"; }), "gs1_date");
  EXPECT_EQ(with([](Elements& e) { e.production_date = "261200"; }), "none") << "day 00: the day is not told";
  EXPECT_EQ(with([](Elements& e) { e.serial = ""; }), "gs1_no_serial");
  EXPECT_EQ(with([](Elements& e) { e.serial = std::string(20, 'A'); }), "none");
  EXPECT_EQ(with([](Elements& e) { e.serial = std::string(21, 'A'); }), "gs1_length");
  EXPECT_EQ(with([](Elements& e) { e.lot = "A B"; }), "gs1_value");
  EXPECT_EQ(with([](Elements& e) { e.lot = "A[1]"; }), "gs1_value");
  EXPECT_EQ(with([](Elements& e) {
              e.lot =
                  "A\x1d"
                  "21X";
            }),
            "gs1_value")
      << "a separator in a value would start a new one";
  EXPECT_EQ(with([](Elements& e) { e.lot = "L\xc3\xb6t"; }), "gs1_value");
}

TEST(Gs1Elements, WhatAReaderGarblesIsTold) {
  EXPECT_EQ(id_of(parse("")), "gs1_no_gtin");
  EXPECT_EQ(id_of(parse("21S0001")), "gs1_no_gtin");
  EXPECT_EQ(id_of(parse("0109521234543213")), "gs1_no_serial");
  EXPECT_EQ(id_of(parse("010952123454321")), "gs1_cut_short");
  EXPECT_EQ(id_of(parse("010952123454321321")), "gs1_cut_short");
  EXPECT_EQ(id_of(parse("01095212345\x1d"
                        "21S0001")),
            "gs1_cut_short");
  EXPECT_EQ(id_of(parse("010952123454321321S0001\x1d"
                        "21S0002")),
            "gs1_twice");
  EXPECT_EQ(id_of(parse("010952123454321317261231"
                        "21S0001")),
            "gs1_unknown_ai");
  EXPECT_EQ(id_of(parse("0109521234543213"
                        "1126013110ABC123"
                        "21S0001")),
            "gs1_no_serial")
      << "without its separator the lot swallows the serial";
}

// Every prefix of a good string is refused or holds a shorter serial: nothing else comes of a cut.
TEST(Gs1Elements, NoCutMakesAnotherProbe) {
  for (std::size_t length = 0; length < example_string.size(); ++length) {
    const auto cut = parse(example_string.substr(0, length));
    if (cut.has_error()) continue;
    EXPECT_EQ(cut->gtin, example.gtin);
    EXPECT_EQ(cut->lot, example.lot);
    EXPECT_TRUE(example.serial.starts_with(cut->serial)) << cut->serial;
  }
}

}  // namespace
}  // namespace probewright::pages::gs1
