#include "station/pages/label.h"

#include <gtest/gtest.h>

#include <QImage>
#include <cmath>
#include <fstream>
#include <iterator>

#include "looking.h"
#include "station/pages/gs1.h"

namespace probewright::pages {
namespace {

PassLabel good_pass() {
  return {
      {"pass", "production", false}, "AQ-20", "AQ20-048-00137", "AQ20-W48-07", "2026-12-01", "09521234543213", 1, {}};
}
PassLabel without_gtin() {
  PassLabel wanted = good_pass();
  wanted.gtin = "";
  return wanted;
}
FailLabel good_fail() { return {{"fail", "production", false}, "RW-00012345", 1, {}}; }

template <class Wanted>
std::string refusal(const Wanted& wanted, LabelSize size = {}) {
  const auto label = Label::of(wanted, size);
  return label.has_error() ? label.error().id : "none";
}
template <class Wanted, class Change>
std::string refusal_with(Wanted wanted, Change change) {
  change(wanted);
  return refusal(wanted);
}

// --- which runs may have which label

TEST(LabelRules, OnlyAPassedProductionRunHasAPassLabel) {
  EXPECT_EQ(refusal(good_pass()), "none");
  for (const char* verdict : {"fail", "void", "", "Pass", "PASS", "passed", "pass "})
    EXPECT_EQ(refusal_with(good_pass(), [&](PassLabel& l) { l.run.verdict = verdict; }), "label_not_passed") << verdict;
  for (const char* purpose :
       {"engineering", "reference", "challenge", "gauge", "echo", "training", "return", "", "Production"})
    for (const bool emulated : {false, true})
      EXPECT_EQ(refusal_with(good_pass(),
                             [&](PassLabel& l) {
                               l.run.purpose = purpose;
                               l.run.emulated = emulated;
                             }),
                "label_not_production")
          << purpose;
}

TEST(LabelRules, OnlyAFailedRunHasAFailLabel) {
  EXPECT_EQ(refusal(good_fail()), "none");
  for (const char* verdict : {"pass", "void", "", "Fail"})
    EXPECT_EQ(refusal_with(good_fail(), [&](FailLabel& l) { l.run.verdict = verdict; }), "label_not_failed") << verdict;
  EXPECT_EQ(refusal_with(good_fail(), [](FailLabel& l) { l.run.purpose = "gauge"; }), "none");
  EXPECT_EQ(refusal_with(good_fail(), [](FailLabel& l) { l.run.purpose = "fun"; }), "label_purpose_unknown");
}

TEST(LabelRules, ARefusalSaysInWordsWhatToDo) {
  PassLabel wanted = good_pass();
  wanted.run.verdict = "void";
  const auto label = Label::of(wanted);
  ASSERT_TRUE(label.has_error());
  EXPECT_EQ(
      label.error().text(),
      "only a run that passed has a pass label; the verdict of this one is \"void\" (make its fail label, or test "
      "the probe again as far as the model allows)");
}

// 06291041500213 is a published number with a right check digit, but not of the range for examples.
TEST(LabelRules, TheEmulatedBenchTakesOnlyGtinsForExamples) {
  const auto with = [](const char* gtin, bool emulated) {
    return refusal_with(good_pass(), [&](PassLabel& l) {
      l.gtin = gtin;
      l.run.emulated = emulated;
    });
  };
  EXPECT_EQ(with("06291041500213", false), "none");
  EXPECT_EQ(with("06291041500213", true), "label_gtin_not_example");
  EXPECT_EQ(with("09521234543213", true), "none");
  EXPECT_EQ(with("9521234543213", true), "none");
  EXPECT_EQ(with("09521234543214", false), "gs1_check_digit");
}

TEST(LabelRules, AFailLabelCannotLookLikeGoods) {
  for (const char* code : {"09521234543213", "9521234543213", "952123454321", "95212345"})
    EXPECT_EQ(refusal_with(good_fail(), [&](FailLabel& l) { l.internal_code = code; }), "label_code_like_gtin") << code;
  for (const char* code : {"12345", "123456789", "RW09521234543213"})
    EXPECT_EQ(refusal_with(good_fail(), [&](FailLabel& l) { l.internal_code = code; }), "none") << code;
}

TEST(LabelRules, TextsSizesAndCopiesHaveBounds) {
  for (const char* text : {"", "AQ20 048", "AQ20-048-0013700000000", "AQ\n20", "AQ\xc3\xa4"}) {
    EXPECT_EQ(refusal_with(good_pass(), [&](PassLabel& l) { l.serial = text; }), "label_text") << text;
    EXPECT_EQ(refusal_with(good_pass(), [&](PassLabel& l) { l.lot = text; }), "label_text") << text;
    EXPECT_EQ(refusal_with(good_fail(), [&](FailLabel& l) { l.internal_code = text; }), "label_text") << text;
  }
  EXPECT_EQ(refusal_with(good_pass(), [](PassLabel& l) { l.serial = "AQ#1"; }), "gs1_value") << "not of set 82";
  EXPECT_EQ(refusal_with(good_pass(), [](PassLabel& l) { l.production_date = "2026-02-30"; }), "gs1_date");
  EXPECT_EQ(refusal_with(without_gtin(), [](PassLabel& l) { l.production_date = "2026-02-30"; }), "gs1_date");
  for (const int copy : {0, -1, 1000})
    EXPECT_EQ(refusal_with(good_pass(), [&](PassLabel& l) { l.copy = copy; }), "label_copy");
  for (const LabelSize size : {LabelSize{0, 20}, LabelSize{40, 0}, LabelSize{-40, 20}, LabelSize{40, 201},
                               LabelSize{std::nan(""), 20}, LabelSize{40, INFINITY}})
    EXPECT_EQ(refusal(good_pass(), size), "label_size");
}

// --- what a reader gets

TEST(LabelCode, ADataMatrixReaderGetsTheElementString) {
  const looking::Folder folder;
  const auto label = Label::of(good_pass()).value();
  EXPECT_EQ(label.coded(),
            "01095212345432131126120110AQ20-W48-07\x1d"
            "21AQ20-048-00137");
  for (const int dpi : {203, 300, 600}) {
    const auto png = folder / ("pass-" + std::to_string(dpi) + ".png");
    ASSERT_FALSE(label.write_png(png, dpi).has_error()) << label.write_png(png, dpi).error().text();
    // FNC1 in front is what makes it a GS1 symbol; a reader sends ]d2 for it.
    EXPECT_EQ(looking::data_matrix_in(png, gs1::separator), "\x1d" + label.coded()) << dpi;
  }
}

TEST(LabelCode, TheVectorDrawingReadsTheSame) {
  const looking::Folder folder;
  const auto label = Label::of(good_pass()).value();
  ASSERT_FALSE(label.write_pdf(folder / "pass.pdf").has_error());
  const auto png = looking::picture_of(folder / "pass.pdf", 400);
  EXPECT_EQ(looking::data_matrix_in(png, gs1::separator), "\x1d" + label.coded());
}

TEST(LabelCode, TheScannedLabelGivesBackTheProbe) {
  const looking::Folder folder;
  ASSERT_FALSE(Label::of(good_pass())->write_png(folder / "pass.png", 300).has_error());
  const std::string read = looking::data_matrix_in(folder / "pass.png", gs1::separator);
  ASSERT_FALSE(read.empty());
  EXPECT_EQ(gs1::parse("]d2" + read.substr(1)).value(),
            (gs1::Elements{"09521234543213", "261201", "AQ20-W48-07", "AQ20-048-00137"}));
}

TEST(LabelCode, ACode128ReaderGetsSerialOrInternalCode) {
  const looking::Folder folder;
  for (const int dpi : {300, 600}) {
    ASSERT_FALSE(Label::of(without_gtin())->write_png(folder / "serial.png", dpi).has_error());
    EXPECT_EQ(looking::code_128_in(folder / "serial.png"), "AQ20-048-00137") << dpi;
    ASSERT_FALSE(Label::of(good_fail())->write_png(folder / "fail.png", dpi).has_error());
    EXPECT_EQ(looking::code_128_in(folder / "fail.png"), "RW-00012345") << dpi;
  }
  ASSERT_FALSE(Label::of(good_fail())->write_pdf(folder / "fail.pdf").has_error());
  EXPECT_EQ(looking::code_128_in(looking::picture_of(folder / "fail.pdf", 600)), "RW-00012345");
}

// --- what people see

TEST(LabelPage, HasExactlyTheSizeInMillimetres) {
  const looking::Folder folder;
  for (const LabelSize size : {LabelSize{40, 20}, LabelSize{57.5, 32}, LabelSize{100, 50}}) {
    ASSERT_FALSE(Label::of(good_pass(), size)->write_pdf(folder / "sized.pdf").has_error());
    const auto facts = looking::facts_of(folder / "sized.pdf");
    EXPECT_EQ(facts.pages, 1);
    // pdfinfo tells points with two decimals or six digits: 0.005 pt is 0.002 mm.
    EXPECT_NEAR(facts.width_mm, size.width_mm, 0.01);
    EXPECT_NEAR(facts.height_mm, size.height_mm, 0.01);
    ASSERT_FALSE(Label::of(good_pass(), size)->write_png(folder / "sized.png", 300).has_error());
    const QImage picture{QString::fromStdString((folder / "sized.png").string())};
    EXPECT_EQ(picture.width(), std::lround(size.width_mm * 300 / 25.4));
    EXPECT_EQ(picture.height(), std::lround(size.height_mm * 300 / 25.4));
    EXPECT_NEAR(picture.dotsPerMeterX() * 0.0254, 300.0, 0.1);
  }
}

TEST(LabelPage, APassLabelSaysAllItsElements) {
  const looking::Folder folder;
  ASSERT_FALSE(Label::of(good_pass())->write_pdf(folder / "pass.pdf").has_error());
  const std::string text = looking::text_of(folder / "pass.pdf");
  for (const char* words :
       {"AQ-20", "PASS", "(01)09521234543213", "(11)261201", "(10)AQ20-W48-07", "(21)AQ20-048-00137"})
    EXPECT_NE(text.find(words), std::string::npos) << words << "\n" << text;
  for (const char* words : {"DEMONSTRATION", "copy", "FAIL"}) EXPECT_EQ(text.find(words), std::string::npos) << words;
}

TEST(LabelPage, APassLabelWithoutGtinSaysSerialLotAndDay) {
  const looking::Folder folder;
  ASSERT_FALSE(Label::of(without_gtin())->write_pdf(folder / "serial.pdf").has_error());
  const std::string text = looking::text_of(folder / "serial.pdf");
  for (const char* words : {"AQ-20", "PASS", "AQ20-048-00137", "AQ20-W48-07", "2026-12-01"})
    EXPECT_NE(text.find(words), std::string::npos) << words << "\n" << text;
}

TEST(LabelPage, AFailLabelSaysFailAndTheInternalCodeAndNoMore) {
  const looking::Folder folder;
  ASSERT_FALSE(Label::of(good_fail())->write_pdf(folder / "fail.pdf").has_error());
  std::string text = looking::text_of(folder / "fail.pdf");
  std::erase_if(text, [](char c) { return c == '\n' || c == '\f' || c == ' '; });
  EXPECT_EQ(text, "FAILRW-00012345");
}

TEST(LabelPage, OutputOfTheEmulatedBenchSaysDemonstration) {
  const looking::Folder folder;
  const auto check = [&](auto wanted, const char* name) {
    wanted.run.emulated = true;
    const auto label = Label::of(wanted).value();
    const auto pdf = folder / (std::string{name} + ".pdf");
    ASSERT_FALSE(label.write_pdf(pdf).has_error());
    EXPECT_NE(looking::text_of(pdf).find("DEMONSTRATION"), std::string::npos) << name;
    // The word must not cost the code: it still reads.
    ASSERT_FALSE(label.write_png(folder / (std::string{name} + ".png"), 300).has_error());
  };
  check(good_pass(), "demo-pass");
  check(without_gtin(), "demo-serial");
  check(good_fail(), "demo-fail");
  EXPECT_EQ(looking::data_matrix_in(folder / "demo-pass.png", gs1::separator),
            "\x1d" + Label::of(good_pass())->coded());
  EXPECT_EQ(looking::code_128_in(folder / "demo-serial.png"), "AQ20-048-00137");
  EXPECT_EQ(looking::code_128_in(folder / "demo-fail.png"), "RW-00012345");
}

TEST(LabelPage, AFailOfAnotherPurposeSaysWhich) {
  const looking::Folder folder;
  FailLabel wanted = good_fail();
  wanted.run.purpose = "training";
  ASSERT_FALSE(Label::of(wanted)->write_pdf(folder / "training.pdf").has_error());
  EXPECT_NE(looking::text_of(folder / "training.pdf").find("TRAINING"), std::string::npos);
  wanted.run.emulated = true;
  ASSERT_FALSE(Label::of(wanted)->write_pdf(folder / "both.pdf").has_error());
  EXPECT_NE(looking::text_of(folder / "both.pdf").find("DEMONSTRATION TRAINING"), std::string::npos);
}

TEST(LabelPage, AReprintCarriesItsNumber) {
  const looking::Folder folder;
  const auto check = [&](auto wanted, const char* name) {
    wanted.copy = 2;
    const auto pdf = folder / (std::string{name} + ".pdf");
    ASSERT_FALSE(Label::of(wanted)->write_pdf(pdf).has_error());
    EXPECT_NE(looking::text_of(pdf).find("copy 2"), std::string::npos) << name;
  };
  check(good_pass(), "copy-pass");
  check(without_gtin(), "copy-serial");
  check(good_fail(), "copy-fail");
}

// Longest texts, at the default size: drawn whole or refused, never cut off.
TEST(LabelPage, LongTextsShrinkOrAreRefused) {
  const looking::Folder folder;
  PassLabel wanted = good_pass();
  wanted.serial = "WWWW-WWWW-WWWW-00137";
  wanted.lot = "AQ35-WWWW-WWWW-00007";
  wanted.copy = 12;
  wanted.run.emulated = true;
  const auto narrow = Label::of(wanted).value().write_pdf(folder / "long.pdf");
  ASSERT_TRUE(narrow.has_error());
  EXPECT_EQ(narrow.error().id, "label_too_small");
  EXPECT_FALSE(std::filesystem::exists(folder / "long.pdf"));
  const auto label = Label::of(wanted, {60, 30}).value();
  ASSERT_FALSE(label.write_pdf(folder / "long.pdf").has_error());
  EXPECT_NE(looking::text_of(folder / "long.pdf").find("(21)WWWW-WWWW-WWWW-00137"), std::string::npos);
  ASSERT_FALSE(label.write_png(folder / "long.png", 300).has_error());
  EXPECT_EQ(looking::data_matrix_in(folder / "long.png", gs1::separator), "\x1d" + label.coded());
}

TEST(LabelPage, ACoarsePrinterOrTooSmallALabelIsTold) {
  const looking::Folder folder;
  const auto refused = [&](const auto& wanted, LabelSize size, int dpi) {
    const auto written = Label::of(wanted, size).value().write_png(folder / "x.png", dpi);
    return written.has_error() ? written.error().id : "none";
  };
  EXPECT_EQ(refused(without_gtin(), {40, 20}, 203), "label_resolution") << "one dot of 0.125 mm a bar";
  EXPECT_EQ(refused(without_gtin(), {60, 20}, 203), "none");
  EXPECT_EQ(refused(without_gtin(), {25, 20}, 1200), "label_too_small");
  EXPECT_EQ(refused(good_pass(), {40, 10}, 1200), "label_too_small");
  EXPECT_EQ(refused(good_pass(), {40, 20}, 99), "label_dpi");
  EXPECT_EQ(refused(good_pass(), {40, 20}, 1201), "label_dpi");
  EXPECT_FALSE(std::filesystem::exists(folder / "x.png") && refused(good_pass(), {40, 10}, 1200) == "none");
}

std::string bytes_of(const std::filesystem::path& path) {
  std::ifstream file{path, std::ios::binary};
  return {std::istreambuf_iterator<char>{file}, {}};
}

// The file tells the time that the caller gave, not the machine's: 2026-12-01T05:36:12Z is ISO 32000-1's
// D:20261201053612Z.
TEST(LabelPage, TheSameLabelGivesTheSameBytes) {
  const looking::Folder folder;
  PassLabel wanted = good_pass();
  wanted.printed = parse_utc("2026-12-01T05:36:12Z").value();
  for (const char* name : {"one", "two"}) {
    ASSERT_FALSE(Label::of(wanted)->write_pdf(folder / (std::string{name} + ".pdf")).has_error());
    ASSERT_FALSE(Label::of(wanted)->write_png(folder / (std::string{name} + ".png"), 300).has_error());
  }
  EXPECT_EQ(bytes_of(folder / "one.pdf"), bytes_of(folder / "two.pdf"));
  EXPECT_EQ(bytes_of(folder / "one.png"), bytes_of(folder / "two.png"));
  EXPECT_NE(bytes_of(folder / "one.pdf").find("/CreationDate (D:20261201053612Z)"), std::string::npos);
}

TEST(LabelPage, AFolderThatIsNotThereIsTold) {
  const looking::Folder folder;
  const auto written = Label::of(good_pass())->write_pdf(folder / "none/pass.pdf");
  ASSERT_TRUE(written.has_error());
  EXPECT_EQ(written.error().id, "page_not_written");
}

}  // namespace
}  // namespace probewright::pages
