#include "station/trace/history.h"

#include <gmock/gmock.h>
#include <gtest/gtest.h>
#include <unistd.h>

#include <filesystem>
#include <ostream>

#include "db/sha256.h"
#include "db/store.h"
#include "db/verify.h"

namespace probewright::trace {
namespace {

using testing::ElementsAre;

/// A clock that goes on by a millisecond each time it is asked.
class HandClock final : public Clock {
 public:
  UtcTime utc_now() const override { return now_.microseconds += 1000, now_; }
  SteadyTime steady_now() const override { return {std::chrono::microseconds{now_.microseconds}}; }

 private:
  mutable UtcTime now_{1796103372000000};  // 2026-12-01T05:36:12Z
};

db::ReadingRow centroid(double value) {
  db::ReadingRow row;
  row.check = "red_centroid";
  row.value = value;
  row.unit = "nm";
  row.expanded_uncertainty = 0.3;
  row.lower = row.acceptance_lower = 655.0;
  row.upper = row.acceptance_upper = 665.0;
  row.margin = 1.0 - std::abs(value - 660.0) / 5.0;
  row.ok = value >= 655.0 && value <= 665.0 ? "ok" : "not_ok";
  row.definition = "centroid;threshold=0.01;v1";
  return row;
}

db::ReadingRow drive(double value, double margin) {
  db::ReadingRow row = centroid(660.0);
  row.check = "red_drive";
  row.value = value;
  row.unit = "mA";
  row.margin = margin;
  row.lower = row.acceptance_lower = 19.6;
  row.upper = row.acceptance_upper = 20.4;
  return row;
}

class HistoryTest : public testing::Test {
 protected:
  HistoryTest() {
    std::string name = (std::filesystem::temp_directory_path() / "probewright-trace-XXXXXX").string();
    folder_ = mkdtemp(name.data());
    path_ = (folder_ / "ledger.db").string();
    db::StoreOptions options;
    options.path = path_;
    options.station = "Quay-1";
    options.emulated = true;
    store_ = db::Store::open(options, clock_).value();
  }
  ~HistoryTest() override {
    store_.reset();
    std::error_code ignored;
    std::filesystem::remove_all(folder_, ignored);
  }

  db::RunId run(const std::string& serial, const std::vector<db::ReadingRow>& readings,
                const std::optional<std::string>& verdict) {
    db::RunId id;
    const auto outcome = store_->commit([&](db::Change& change) {
      const Digest sheet = change.add_document({"sheet", "AQ-20", "4", "sheet: AQ-20\n"});
      db::RunOpened opened;
      opened.serial = serial;
      opened.purpose = "engineering";
      opened.emulated = true;
      opened.model = "AQ-20";
      opened.station = "Quay-1";
      opened.operator_name = "Imre Vasko";
      opened.documents = {{"sheet", sheet}};
      opened.devices = {{"phantom", "PH-01", "1.0.0", "PHC-2026-0101", std::nullopt}};
      opened.software_version = "0.1.0";
      id = change.open_run(opened);
      change.add_readings(id, readings);
      change.add_capture(id, "red_spectrum", "", std::as_bytes(std::span{serial}));
      if (verdict) change.close_run(closing(id, *verdict));
    });
    if (!outcome) throw ProblemError(outcome.error());
    return id;
  }
  static db::RunClosed closing(db::RunId id, const std::string& verdict) {
    db::RunClosed closed;
    closed.run = id;
    closed.verdict = verdict;
    if (verdict == "fail") closed.cause = "limits", closed.failing = {"red_centroid"};
    if (verdict == "void") closed.cause = "device_lost", closed.cause_words = "the adapter was lost";
    return closed;
  }
  History history(std::string_view serial) {
    auto reader = db::Reader::open(path_).value();
    return history_of(reader, serial);
  }

  HandClock clock_;
  std::filesystem::path folder_;
  std::string path_;
  std::unique_ptr<db::Store> store_;
};

TEST_F(HistoryTest, TellsAllRunsOfOneSerialOldestFirstAndNoOthers) {
  const auto first = run("AQ20-048-00001", {centroid(666.0)}, "fail");
  run("AQ20-048-00002", {centroid(660.0)}, "pass");
  const auto second = run("AQ20-048-00001", {centroid(664.0), drive(20.1, 0.75)}, "pass");
  const auto third = run("AQ20-048-00001", {}, std::nullopt);

  const History told = history("AQ20-048-00001");
  ASSERT_EQ(told.runs.size(), 3u);
  EXPECT_EQ(told.runs[0].run, first);
  EXPECT_EQ(told.runs[1].run, second);
  EXPECT_EQ(told.runs[2].run, third);
  EXPECT_EQ(tally_of(told), (Tally{1, 1, 0, 1}));
  EXPECT_EQ(told.seal, db::verify(path_).value().seal);
}

TEST_F(HistoryTest, KeepsWhatARunStoodOn) {
  run("AQ20-048-00001", {centroid(660.5)}, "void");
  const History told = history("AQ20-048-00001");
  const db::RunRecord& only = told.runs.at(0);
  ASSERT_EQ(only.documents.size(), 1u);
  EXPECT_EQ(only.documents[0].name, "AQ-20");
  EXPECT_EQ(only.documents[0].digest, db::sha256("sheet: AQ-20\n"));
  EXPECT_EQ(only.opened.devices.at(0).certificate_number, "PHC-2026-0101");
  ASSERT_EQ(only.readings.size(), 1u);
  EXPECT_EQ(only.readings[0].value, 660.5);
  EXPECT_EQ(only.captures.at(0).kind, "red_spectrum");
  EXPECT_EQ(only.closing->cause_words, "the adapter was lost");
  EXPECT_EQ(tally_of(told).void_runs, 1);
}

TEST_F(HistoryTest, KnowsNothingOfAnUnknownSerial) {
  run("AQ20-048-00001", {centroid(660.5)}, "pass");
  EXPECT_TRUE(history("AQ20-048-00009").runs.empty());
  EXPECT_TRUE(history("AQ20-048-0000").runs.empty()) << "a part of a serial is another serial";
  EXPECT_TRUE(history("aq20-048-00001").runs.empty());
}

TEST_F(HistoryTest, IsOneStateOfTheLedgerAndReadsBesideTheWriter) {
  run("AQ20-048-00001", {centroid(660.5)}, "pass");
  auto reader = db::Reader::open(path_).value();
  const History before = history_of(reader, "AQ20-048-00001");
  run("AQ20-048-00001", {centroid(660.6)}, "pass");
  const History after = history_of(reader, "AQ20-048-00001");
  EXPECT_EQ(before.runs.size(), 1u);
  EXPECT_EQ(after.runs.size(), 2u);
  EXPECT_GT(after.seal.entry, before.seal.entry);
}

TEST(NearestToAnEdge, IsTheSmallestMargin) {
  db::RunRecord run;
  EXPECT_EQ(nearest_to_an_edge(run), nullptr);
  db::ReadingRow recorded = centroid(670.0);
  recorded.margin.reset();
  run.readings = {drive(20.1, 0.75), centroid(664.0), recorded};
  ASSERT_NE(nearest_to_an_edge(run), nullptr);
  EXPECT_EQ(nearest_to_an_edge(run)->check, "red_centroid");
  EXPECT_DOUBLE_EQ(*nearest_to_an_edge(run)->margin, 0.2);
}

struct StandingCase {
  const char* ok;
  std::optional<double> value;
  Standing wanted;
};

/// For the tests' names.
void PrintTo(const StandingCase& row, std::ostream* out) {
  *out << row.ok << (row.value ? " with" : " without") << " a value is " << slug(row.wanted);
}

class StandingOf : public testing::TestWithParam<StandingCase> {};

TEST_P(StandingOf, IsToldFromTheRow) {
  db::ReadingRow row = centroid(660.0);
  row.acceptance_lower = 656.0;
  row.acceptance_upper = 664.0;
  row.ok = GetParam().ok;
  row.value = GetParam().value;
  EXPECT_EQ(standing_of(row), GetParam().wanted) << slug(standing_of(row));
}

INSTANTIATE_TEST_SUITE_P(Rows, StandingOf,
                         testing::Values(StandingCase{"ok", 664.0, Standing::ok},
                                         StandingCase{"not_ok", 665.1, Standing::outside},
                                         StandingCase{"not_ok", 654.9, Standing::outside},
                                         StandingCase{"not_ok", 665.0, Standing::too_close},
                                         StandingCase{"not_ok", 655.5, Standing::too_close},
                                         StandingCase{"not_ok", 660.0, Standing::unusable},
                                         StandingCase{"none", std::nullopt, Standing::missing},
                                         StandingCase{"watch", 700.0, Standing::watched},
                                         StandingCase{"watch", std::nullopt, Standing::watched},
                                         StandingCase{"record", 700.0, Standing::recorded}));

TEST(StandingOf, AYesNoCheckThatIsNotOkLiesOutside) {
  db::ReadingRow row;
  row.check = "probe_present";
  row.unit = "yes/no";
  row.value = 0.0;
  row.ok = "not_ok";
  EXPECT_EQ(standing_of(row), Standing::outside);
}

}  // namespace
}  // namespace probewright::trace
