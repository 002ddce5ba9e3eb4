#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <cstdio>
#include <fstream>
#include <sstream>

#include "looking.h"
#include "station/measure/capture_format.h"
#include "station/measure/certificate.h"
#include "station/pages/run_report.h"
#include "station/pages/serial_report.h"
#include "station/pages/shift_page.h"
#include "tests/made/ledger.h"

// Pages of a ledger that a test wrote, read back by a program that knows nothing of ours.
namespace probewright::pages {
namespace {

using testing::AllOf;
using testing::HasSubstr;
using testing::Not;

std::string source_text(const std::string& name) {
  std::ifstream file{std::string{PW_SOURCE_DIR} + "/" + name};
  std::ostringstream text;
  text << file.rdbuf();
  return text.str();
}

std::string flat_text(const std::filesystem::path& pdf) {
  std::string text = looking::text_of(pdf);
  std::replace(text.begin(), text.end(), '\n', ' ');
  return text;
}

std::size_t count_of(const std::string& text, const std::string& words) {
  std::size_t count = 0;
  for (auto at = text.find(words); at != std::string::npos; at = text.find(words, at + 1)) ++count;
  return count;
}

/// A bell of 20 000 counts at a pixel, in counts over a dark frame of 1000.
measure::SpectrumCapture bell(measure::Band band, double pixel, double width) {
  measure::SpectrumCapture capture;
  capture.band = band;
  capture.exposure_s = 0.02;
  capture.frames = 4;
  capture.drive_mA = 20.0;
  capture.temperature_C = 25.0;
  for (std::size_t i = 0; i < capture.light.size(); ++i) {
    const double away = (static_cast<double>(i) - pixel) / width;
    capture.dark[i] = 1000;
    capture.light[i] = static_cast<std::uint16_t>(std::lround(1000.0 + 20000.0 * std::exp(-away * away)));
  }
  return capture;
}

measure::PulseCapture pulses(double ratio) {
  measure::PulseCapture capture;
  capture.set_point_ratio = ratio;
  capture.modulator_Hz = 5.0;
  capture.cycle_s = 0.001756;
  for (int i = 0; i < 352; ++i) {
    const double wave = std::sin(2 * M_PI * 5.0 * i * capture.cycle_s);
    capture.red.push_back(static_cast<std::int32_t>(std::lround(1e6 * (1.0 + 0.01 * ratio * wave))));
    capture.infrared.push_back(static_cast<std::int32_t>(std::lround(2e6 * (1.0 + 0.01 * wave))));
    capture.dark_a.push_back(500), capture.dark_b.push_back(500);
  }
  capture.drive_mA = {20.0, 20.0};
  capture.temperature_C = 25.0;
  return capture;
}

/// Accepted from 936 to 944 nm: margin 1 at 940.
db::ReadingRow infrared_centroid(double value) {
  db::ReadingRow row = made::centroid(value - 280.0, "infrared_centroid");
  *row.value += 280.0;
  for (auto* limit : {&row.lower, &row.upper, &row.acceptance_lower, &row.acceptance_upper}) **limit += 280.0;
  return row;
}

std::vector<std::pair<std::string, Bytes>> usual_captures() {
  std::vector<std::pair<std::string, Bytes>> all;
  const auto keep = [&](const measure::AnyCapture& capture) {
    all.emplace_back(measure::capture_kind(capture), measure::encode(capture));
  };
  keep(bell(measure::Band::red, 180.0, 18.0));
  keep(bell(measure::Band::infrared, 690.0, 40.0));
  for (const double ratio : {0.4, 1.0, 1.6}) keep(pulses(ratio));
  return all;
}

class LedgerPages : public testing::Test {
 protected:
  LedgerPages() {
    ledger.use({"model", "AQ-20", "1", source_text("configs/models/aq-20.yaml"), "station"});
    ledger.use(
        {"certificate", "PHC-2026-0101", "", source_text("configs/certificates/phantoms/PH-01.yaml"), "station"});
    at("2026-12-01T05:00:00Z");
    ledger.entry("sign_in", "Imre Vasko", Body::Object{{"person", "Imre Vasko"}, {"role", "operator"}});
    ledger.entry("lot_opened", "Imre Vasko",
                 Body::Object{{"lot", "AQ20-W48-07"}, {"model", "AQ-20"}, {"quantity", 150}, {"sheet", "revision 4"}});
  }
  void at(std::string_view utc) { ledger.clock().put(utc); }
  trace::PageNotes notes() const {
    return {Zone::read("Europe/Amsterdam").value(), parse_utc("2026-12-01T13:02:11Z").value(),
            "probewright ledger verify ledger.db", "A pass is production evidence.\nThe limits are a demonstration."};
  }
  trace::RunStory story(std::int64_t entry) {
    auto reader = ledger.reader();
    return trace::run_story(reader, entry).value();
  }
  /// The text of a run's report.
  std::string run_page(const trace::RunStory& told, const std::string& name) {
    const auto pages = write_run_report(told, notes(), folder / name);
    EXPECT_TRUE(pages.has_value()) << pages.error().text();
    if (pages) EXPECT_EQ(looking::facts_of(folder / name).pages, *pages);
    return flat_text(folder / name);
  }
  std::string serial_page(const std::string& serial, const std::string& name) {
    auto reader = ledger.reader();
    const auto pages = write_serial_report(trace::history_of(reader, serial), notes(), folder / name);
    EXPECT_TRUE(pages.has_value()) << pages.error().text();
    return flat_text(folder / name);
  }
  made::Run failed(const std::string& serial) {
    return {.serial = serial,
            .verdict = "fail",
            .likely_cause = "leaky_detector",
            .likely_cause_words = "a leaky detector",
            .cycle_s = 24.2,
            .readings = {made::centroid(661.2), infrared_centroid(939.0), made::dark_current(6.4)},
            .captures = usual_captures()};
  }
  made::Run passed(const std::string& serial) {
    return {.serial = serial,
            .cycle_s = 23.8,
            .readings = {made::centroid(661.2), infrared_centroid(943.5), made::dark_current(1.25)},
            .captures = usual_captures()};
  }

  looking::Folder folder;
  made::Folder ledger_folder;
  made::Ledger ledger{ledger_folder.file("ledger.db")};
};

// Dark current 6.4 with 4.8 accepted, margin 1 at 0.8: (4.8 - 6.4) / 4 = -0.40.
TEST_F(LedgerPages, AFailedRunSaysWhatFailedByHowMuchAndWhy) {
  at("2026-12-01T05:36:12Z");
  const auto run = ledger.run(failed("AQ20-048-00137"));
  const std::string text = run_page(story(run.value), "run-fail.pdf");
  for (const char* words : {"FAIL",
                            "failing: dark current",
                            "likely cause: a leaky detector",
                            "AQ20-048-00137",
                            "AQ20-W48-07",
                            "2026-12-01 06:36:12",
                            "Quay-1, nest 1",
                            "Imre Vasko",
                            "24.2 s",
                            "OUTSIDE",
                            "6.40",
                            "-0.40",
                            "up to 4.8",
                            "PHC-2026-0101",
                            "AQ-20, revision 1",
                            "commit 0000000",
                            "set point R = 0.4",
                            "set point R = 1.6",
                            "red, centroid 661.20 nm",
                            "A pass is production evidence.",
                            "page 1 of"})
    EXPECT_THAT(text, HasSubstr(words));
}

TEST_F(LedgerPages, ThePlotsAreThoseOfTheStoredCaptures) {
  const auto run = ledger.run(passed("AQ20-048-00137"));
  const trace::RunStory told = story(run.value);
  ASSERT_EQ(told.spectra.size(), 2u);
  ASSERT_EQ(told.pulses.size(), 3u);
  EXPECT_THAT(told.not_drawn, testing::IsEmpty());
  // The bell's middle at pixel 180, by the certificate's own polynomial; over its peak it is 1 there.
  const auto& red = told.spectra[0];
  const auto peak = std::max_element(red.power.begin(), red.power.end()) - red.power.begin();
  EXPECT_DOUBLE_EQ(red.power[static_cast<std::size_t>(peak)], 1.0);
  const auto certificate =
      measure::read_phantom_certificate(source_text("configs/certificates/phantoms/PH-01.yaml"), "c").value();
  double nm = 0.0;
  for (std::size_t k = certificate.wavelength_nm.size(); k-- > 0;) nm = nm * 180.0 + certificate.wavelength_nm[k];
  EXPECT_NEAR(red.wavelength_nm[static_cast<std::size_t>(peak)], nm, 1.0);
  // 1.6 % of red and 1 % of infrared, as made above.
  const auto& pulse = told.pulses[2];
  EXPECT_NEAR(*std::max_element(pulse.red_percent.begin(), pulse.red_percent.end()), 1.6, 0.03);
  EXPECT_NEAR(*std::max_element(pulse.infrared_percent.begin(), pulse.infrared_percent.end()), 1.0, 0.03);
}

TEST_F(LedgerPages, CapturesThatCannotBeDrawnAreNamed) {
  made::Run wanted = passed("AQ20-048-00137");
  wanted.captures = {{"red_spectrum", Bytes(10)}};
  const auto run = ledger.run(wanted);
  ledger.change([&](db::Change& change) {
    const std::int64_t captures[] = {1};
    change.prune(captures, "Piet Hallgrim", "after the record period");
  });
  EXPECT_THAT(run_page(story(run.value), "run-pruned.pdf"),
              AllOf(HasSubstr("No capture of this run can be drawn."), HasSubstr("red_spectrum:")));
  wanted.serial = "AQ20-048-00138";
  const auto broken = story(ledger.run(wanted).value);
  EXPECT_TRUE(broken.spectra.empty());
  ASSERT_EQ(broken.not_drawn.size(), 1u);
}

TEST_F(LedgerPages, ARunIsFoundByItsClosingEntryAndByItsLabel) {
  const auto run = ledger.run(passed("AQ20-048-00137"));
  const std::int64_t label = ledger.entry(
      "label_made", "station",
      Body::Object{
          {"copy", 2}, {"kind", "pass"}, {"reason", "smudged"}, {"run", run.value}, {"serial", "AQ20-048-00137"}});
  EXPECT_EQ(story(run.value + 1).run.run, run);
  EXPECT_EQ(story(label).run.run, run);
  EXPECT_THAT(run_page(story(label), "run-label.pdf"), AllOf(HasSubstr("Labels"), HasSubstr("smudged")));
  auto reader = ledger.reader();
  EXPECT_EQ(trace::run_story(reader, 1).error().id, "entry_of_no_run");
  EXPECT_EQ(trace::run_story(reader, 99999).error().id, "entry_unknown");
}

TEST_F(LedgerPages, VoidAndOpenRunsAreToldAsWhatTheyAre) {
  const auto gone = ledger.run({.serial = "AQ20-048-00137", .verdict = "void", .readings = {}});
  EXPECT_THAT(run_page(story(gone.value), "run-void.pdf"),
              AllOf(HasSubstr("VOID"), HasSubstr("the adapter was lost"), HasSubstr("The run has no readings."),
                    HasSubstr("No reading of this run was judged by numbers.")));
  const auto open = ledger.run({.serial = "AQ20-048-00137", .verdict = ""});
  EXPECT_THAT(run_page(story(open.value), "run-open.pdf"),
              AllOf(HasSubstr("OPEN, no verdict"), HasSubstr("never closed"), Not(HasSubstr("PASS"))));
}

TEST_F(LedgerPages, EveryPageOfEmulatedOutputSaysDemonstrationAndWhichPurpose) {
  made::Run training = passed("AQ20-048-00137");
  training.purpose = "training";
  const auto told = story(ledger.run(training).value);
  const std::string text = run_page(told, "run-training.pdf");
  const auto pages = static_cast<std::size_t>(looking::facts_of(folder / "run-training.pdf").pages);
  EXPECT_EQ(count_of(text, "DEMONSTRATION TRAINING"), pages);
  made::Folder real_folder;
  made::Ledger real{real_folder.file("ledger.db"), false};
  const auto id = real.run(passed("AQ20-048-00137"));
  auto reader = real.reader();
  EXPECT_THAT(run_page(trace::run_story(reader, id.value).value(), "run-real.pdf"),
              AllOf(Not(HasSubstr("DEMONSTRATION")), Not(HasSubstr("emulated"))));
}

TEST_F(LedgerPages, ALifeShowsRunsLabelsLotAndSignIn) {
  at("2026-12-01T05:36:12Z");
  ledger.run(failed("AQ20-048-00137"));
  at("2026-12-01T06:10:00Z");
  ledger.run({.serial = "AQ20-048-00137", .verdict = "void", .readings = {}});
  at("2026-12-03T09:00:00Z");
  const auto last = ledger.run(passed("AQ20-048-00137"));
  ledger.entry(
      "label_made", "Imre Vasko",
      Body::Object{{"copy", 1}, {"kind", "pass"}, {"reason", ""}, {"run", last.value}, {"serial", "AQ20-048-00137"}});
  const std::string text = serial_page("AQ20-048-00137", "life.pdf");
  for (const char* words : {"Life of AQ20-048-00137", "last production run", "3 runs, 1 pass, 1 fail, 1 void", "2 days",
                            "failing: dark current; likely: a leaky detector", "the adapter was lost", "pass label",
                            "lot_opened", "Imre Vasko as operator", "6.40 \u00d7", "1.25", "DEMONSTRATION"})
    EXPECT_THAT(text, HasSubstr(words));
}

TEST_F(LedgerPages, ALongLifeRunsOnOverItsPages) {
  for (int i = 0; i < 30; ++i) {
    made::Run run = i % 3 == 0 ? failed("AQ20-048-00137") : passed("AQ20-048-00137");
    run.captures.clear();
    run.purpose = i % 2 == 0 ? "gauge" : "production";
    ledger.run(run);
  }
  const std::string text = serial_page("AQ20-048-00137", "life-long.pdf");
  EXPECT_THAT(text,
              AllOf(HasSubstr("30 runs"), HasSubstr("Older runs are not in this table"), HasSubstr("gauge: PASS")));
}

/// 141 runs over the early shift, some of them failing: enough to look at.
void whole_shift(made::Ledger& ledger) {
  for (int i = 0; i < 141; ++i) {
    const double wave = 0.9 * std::sin(0.37 * i) + 0.5 * std::sin(2.11 * i + 1.0);
    const bool fails = i % 31 == 7;
    char serial[20];
    std::snprintf(serial, sizeof serial, "AQ20-048-%05d", i + 1);
    made::Run run{.serial = serial,
                  .verdict = fails         ? "fail"
                             : i % 70 == 5 ? "void"
                                           : "pass",
                  .nest = i % 4 + 1,
                  .likely_cause = fails ? "leaky_detector" : "",
                  .likely_cause_words = fails ? "leaky detector or a soiled lens" : "",
                  .cycle_s = 23.8 + 0.1 * (i % 7),
                  .readings = {made::centroid(660.4 + 1.2 * wave), infrared_centroid(940.0 - wave),
                               made::dark_current(fails ? 5.6 : 1.6 + 0.4 * wave)}};
    if (i % 70 == 5) run.readings.clear();
    const std::int64_t minute = 5 * 60 + 10 + i * 3;
    char time[32];
    std::snprintf(time, sizeof time, "2026-12-01T%02d:%02d:00Z", static_cast<int>(minute / 60),
                  static_cast<int>(minute % 60));
    ledger.clock().put(time);
    ledger.run(run);
  }
}

// 141 runs: i = 7, 38, 69, 100, 131 fail (five), i = 5 and 75 are void (two), 134 pass.
TEST_F(LedgerPages, AShiftIsDrawnFromItsFacts) {
  whole_shift(ledger);
  ledger.run({.serial = "AQ20-REF-1", .purpose = "reference", .lot = "", .operator_name = "Dalia Oduya"});
  auto reader = ledger.reader();
  trace::ShiftQuestion question;
  question.period = trace::Period{parse_utc("2026-12-01T05:00:00Z").value(), parse_utc("2026-12-01T13:00:00Z").value()};
  question.zone = notes().zone;
  const trace::ShiftFacts facts = trace::shift_facts(reader, question);
  const auto pages = write_shift_report(shift_report_of(facts, notes()), folder / "shift-facts.pdf");
  ASSERT_TRUE(pages.has_value()) << pages.error().text();
  const std::string text = flat_text(folder / "shift-facts.pdf");
  for (const char* words :
       {"Shift report, Quay-1", "2026-12-01 06:00 to 14:00", "Imre Vasko (operator)", "Dalia Oduya (not signed in)",
        "AQ20-W48-07, AQ-20, sheet revision 4: 141 runs, opened for 150 probes",
        "141 production: 134 passed, 5 failed, 2 void", "reference: 1 run, 1 passed", "96.4 %", "Hour by hour",
        "Run chart: red centroid", "Run chart: dark current", "Model AQ-20.", "leaky detector or a soiled lens",
        "nest 4", "One run in ten has a margin below", "DEMONSTRATION"})
    EXPECT_THAT(text, HasSubstr(words));
}

}  // namespace
}  // namespace probewright::pages
