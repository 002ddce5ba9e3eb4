#include "limits/signed_form.h"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <fstream>
#include <sstream>

#include "sample_sheet.h"

namespace probewright::limits {
namespace {

using ::testing::HasSubstr;

void expect_same(const Sheet& a, const Sheet& b) {
  EXPECT_EQ(a.name, b.name);
  EXPECT_EQ(a.revision, b.revision);
  EXPECT_EQ(a.reason, b.reason);
  EXPECT_EQ(a.decision, b.decision);
  EXPECT_EQ(a.for_model, b.for_model);
  EXPECT_EQ(a.bins, b.bins);
  EXPECT_EQ(a.retest, b.retest);
  EXPECT_EQ(a.stop_when, b.stop_when);
  ASSERT_EQ(a.checks.size(), b.checks.size());
  for (std::size_t i = 0; i < a.checks.size(); ++i) EXPECT_EQ(a.checks[i], b.checks[i]) << a.checks[i].check;
}

TEST(SignedForm, ReadsBackToTheSameSheet) {
  const Sheet sheet = sample_sheet();
  const std::string form = signed_form(sheet);
  const Sheet again = sheet_of(form);
  expect_same(sheet, again);
  EXPECT_EQ(signed_form(again), form);
}

TEST(SignedForm, TheDemonstrationsSheetReadsBack) {
  std::ifstream file{PW_SOURCE_DIR "/configs/sheets/aq-20.yaml"};
  std::stringstream text;
  text << file.rdbuf();
  const Sheet sheet = sheet_of(text.str());
  expect_same(sheet, sheet_of(signed_form(sheet)));
}

TEST(SignedForm, CarriesAcceptanceLimitsAsFixedNumbers) {
  const std::string form = signed_form(sample_sheet());
  EXPECT_THAT(form, HasSubstr("saturation_error_70: {lower: -1 %SpO2, upper: 1 %SpO2, U: 0.195 %SpO2, guard: 0.83, "
                              "accept: {lower: -0.83815 %SpO2, upper: 0.83815 %SpO2}}"));
  EXPECT_THAT(form, HasSubstr("secondary_emission: {upper: 0.3 %, U: 0.05 %, guard: {risk: 5 %}, typical: 0.02 %, "
                              "accept: {upper: 0.2588786593 %}}"));
  EXPECT_THAT(form, HasSubstr("red_drive: {nominal: 20 mA, tolerance: 2 %, U: 0.052 mA, guard: 0, "
                              "accept: {lower: 19.6 mA, upper: 20.4 mA}}"));
}

TEST(SignedForm, DoesNotDependOnTheLayoutOfTheFile) {
  auto lines = sample_lines();
  std::swap(lines[5], lines[8]);
  lines.insert(lines.begin(), "# a remark");
  lines[8] = "  dark_current: {at: 298.15 K, U: 0.0004 uA, typical: 0.0008 uA, upper: 0.005 uA}";
  EXPECT_EQ(signed_form(sheet_of(joined(lines))), signed_form(sample_sheet()));
}

TEST(SignedForm, KeepsAwkwardWords) {
  Sheet sheet = sample_sheet();
  sheet.reason = "she said: \"5 \\ 6\"\n\tnext line #1, \xCE\xBCm, {x: y}\x01";
  sheet.for_model = Digest{};
  expect_same(sheet, sheet_of(signed_form(sheet)));
}

TEST(SignedForm, AWrittenAcceptanceLimitMayDifferInItsLastDigitOnly) {
  std::string form = signed_form(sample_sheet());
  const std::string digits = "0.2588786593";
  form.replace(form.find(digits), digits.size(), "0.2588786594");
  EXPECT_EQ(sheet_of(form).find("secondary_emission")->acceptance.upper, 0.2588786594);  // what was signed is applied
  form.replace(form.find("0.2588786594"), digits.size(), "0.2588796593");
  const auto refused = read_sheet(form, "form.yaml");
  ASSERT_FALSE(refused);
  EXPECT_EQ(refused.error().front().id, "sheet_accept_differs");
}

}  // namespace
}  // namespace probewright::limits
