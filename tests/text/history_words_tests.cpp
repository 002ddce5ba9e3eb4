#include "station/text/history_words.h"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <nlohmann/json.hpp>

namespace probewright::text {
namespace {

using testing::HasSubstr;
using testing::Not;

db::ReadingRow dark_current(double value) {
  db::ReadingRow row;
  row.check = "dark_current";
  row.value = value;
  row.unit = "nA";
  row.expanded_uncertainty = 0.4;
  row.upper = 5.0;
  row.acceptance_upper = 4.8;
  row.margin = (4.8 - value) / 4.0;
  row.ok = value <= 4.8 ? "ok" : "not_ok";
  return row;
}

trace::History one_run(std::vector<db::ReadingRow> readings, std::string verdict = "pass") {
  db::RunRecord run;
  run.run = {8};
  run.opened_at = {1796103372123456};
  run.opened.serial = "AQ20-048-00001";
  run.opened.station = "Quay-1";
  run.opened.operator_name = "Imre Vasko";
  run.opened.model = "AQ-20";
  run.opened.try_number = 1;
  run.opened.devices = {{"phantom", "PH-01", "1.0.0", "PHC-2026-0101", std::nullopt}};
  run.opened.software_version = "0.1.0";
  run.documents = {{"sheet", "sheet", "AQ-20", "4", Digest{}}};
  run.readings = std::move(readings);
  db::ClosingRecord closing;
  closing.entry = 9;
  closing.closed_at = {1796103375623456};
  closing.verdict = std::move(verdict);
  closing.bench = Body{Body::Object{{"lid_openings", 0}, {"words", "calm"}}};
  run.closing = closing;
  return {"AQ20-048-00001", {run}, {9, Digest{}}};
}

TEST(HistoryWords, TellsARunInCalmWords) {
  const std::string text = words_of(one_run({dark_current(0.81)}));
  EXPECT_THAT(text, HasSubstr("AQ20-048-00001: 1 run, 1 pass\n"));
  EXPECT_THAT(text, HasSubstr("Run 8: PASS, production, try 1\n"));
  EXPECT_THAT(text,
              HasSubstr("opened 2026-12-01T05:36:12.123456Z, closed 2026-12-01T05:36:15.623456Z (3.50 s), entry 9"));
  EXPECT_THAT(text, HasSubstr("Quay-1, nest 1, Imre Vasko, no lot"));
  EXPECT_THAT(text, HasSubstr("sheet: AQ-20, revision 4 (SHA-256 000000000000...)"));
  EXPECT_THAT(text, HasSubstr("phantom: PH-01, firmware 1.0.0, certificate PHC-2026-0101"));
  EXPECT_THAT(text, HasSubstr("dark current"));
  EXPECT_THAT(text, Not(HasSubstr("DEMONSTRATION")));
}

TEST(HistoryWords, AValueOutsideNeverLooksLikeTheLimit) {
  const std::string text = words_of(one_run({dark_current(5.0000004)}, "fail"));
  EXPECT_THAT(text, HasSubstr("5.0000004"));
  EXPECT_THAT(text, HasSubstr("OUTSIDE the limit"));
}

TEST(HistoryWords, TooCloseIsNotCalledNonconforming) {
  const std::string text = words_of(one_run({dark_current(4.9)}, "fail"));
  EXPECT_THAT(text, HasSubstr("inside the limit, too close for our uncertainty"));
  EXPECT_THAT(text, Not(HasSubstr("OUTSIDE")));
}

TEST(HistoryWords, WhatIsNoProductionEvidenceSaysSo) {
  auto history = one_run({dark_current(0.8)});
  history.runs[0].opened.emulated = true;
  history.runs[0].opened.purpose = "training";
  EXPECT_THAT(words_of(history), HasSubstr("DEMONSTRATION, made on an emulated bench; TRAINING, no production run"));
}

TEST(HistoryWords, AnOpenRunHasNoVerdict) {
  auto history = one_run({});
  history.runs[0].closing.reset();
  const std::string text = words_of(history);
  EXPECT_THAT(text, HasSubstr("1 run, 1 open"));
  EXPECT_THAT(text, HasSubstr("Run 8: OPEN, no verdict"));
  EXPECT_THAT(text, HasSubstr("not closed"));
  const auto json = nlohmann::json::parse(json_of(history).text());
  EXPECT_TRUE(json["runs"][0]["verdict"].is_null());
}

TEST(HistoryWords, AReadingThatCouldNotBeHadSaysWhy) {
  db::ReadingRow row = dark_current(0.8);
  row.value.reset();
  row.margin.reset();
  row.none_reason = "blocked_by:probe_present";
  row.ok = "none";
  EXPECT_THAT(words_of(one_run({row}, "fail")), HasSubstr("NO READING: blocked by probe present"));
}

TEST(HistoryJson, CarriesEverythingUnrounded) {
  const auto json = nlohmann::json::parse(json_of(one_run({dark_current(0.1 + 0.2)})).text());
  EXPECT_EQ(json["format"], 1);
  EXPECT_EQ(json["serial"], "AQ20-048-00001");
  const auto& run = json["runs"][0];
  EXPECT_EQ(run["run"], 8);
  EXPECT_EQ(run["verdict"], "pass");
  EXPECT_EQ(run["opened_at"], "2026-12-01T05:36:12.123456Z");
  EXPECT_EQ(run["bench"]["words"], "calm");
  EXPECT_EQ(run["devices"][0]["certificate"], "PHC-2026-0101");
  const auto& reading = run["readings"][0];
  EXPECT_EQ(reading["value"].get<double>(), 0.1 + 0.2);
  EXPECT_TRUE(reading["lower"].is_null());
  EXPECT_EQ(reading["acceptance_upper"], 4.8);
  EXPECT_EQ(reading["state"], "ok");
}

}  // namespace
}  // namespace probewright::text
