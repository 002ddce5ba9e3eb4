// Runs of a whole station (line, drivers, store, emulated bench), then computed anew from the ledger alone.
#include <gmock/gmock.h>
#include <gtest/gtest.h>
#include <unistd.h>

#include <cmath>
#include <filesystem>
#include <fstream>

#include "db/queries/document.h"
#include "db/queries/run_numbers.h"
#include "db/queries/run_record.h"
#include "db/retention.h"
#include "station/trace/impact.h"
#include "station/trace/rederive.h"
#include "station/trace/sensitivity.h"
#include "station/trace/stored_run.h"
#include "tests/trial/trial.h"

namespace probewright::trace {
namespace {

namespace fs = std::filesystem;

class TemporaryFolder {
 public:
  TemporaryFolder() {
    std::string name = (fs::temp_directory_path() / "probewright-again-XXXXXX").string();
    path = mkdtemp(name.data());
  }
  ~TemporaryFolder() {
    std::error_code ignored;
    fs::remove_all(path, ignored);
  }
  std::string file(const std::string& name) const { return (path / name).string(); }
  fs::path path;
};

std::string serial(int number) { return "AQ20-048-" + std::to_string(10000 + number).substr(1).insert(0, "0"); }

/// Ten probes as the bench draws them, one of them taken out in the middle of its run.
class MadeAgain : public testing::Test {
 protected:
  static constexpr int probes = 10;

  static void SetUpTestSuite() {
    folder = new TemporaryFolder;
    trial::Options options;
    options.seed = 11;
    options.store.path = folder->file("ledger.db");
    trial::Trial station(options);
    ASSERT_FALSE(station.start_problem()) << station.start_problem()->text();
    for (int i = 1; i <= probes; ++i) {
      station.on_event = {};
      if (i == 4)
        station.on_event = [&station](const sequence::LineEvent& event) {
          const auto* change = std::get_if<sequence::NestChanged>(&event);
          if (change && change->view.stage == 3) static_cast<void>(station.bench().remove(1));
        };
      ASSERT_TRUE(station.test(serial(i)).outcome) << serial(i);
    }
    ASSERT_TRUE(station.finish());
    seal = station.seal();
  }
  static void TearDownTestSuite() { delete folder; }

  /// A copy that a test may change; the ledger's own guards put aside.
  std::string changed(const std::string& sql) {
    const std::string path = copies_.file("copy" + std::to_string(++copied_) + ".db");
    fs::copy_file(folder->file("ledger.db"), path);
    db::Connection connection(path, db::Access::read_write);
    connection.run("DROP TRIGGER reading_no_update; DROP TRIGGER run_closed_no_update; " + sql);
    connection.ask("PRAGMA journal_mode=DELETE");
    return path;
  }
  static std::string ledger() { return folder->file("ledger.db"); }
  static RederiveReport again(const std::string& path, const RederiveScope& scope = {}, int threads = 2) {
    RederiveOptions options;
    options.threads = threads;
    return rederive(path, scope, "no such commit", options).value();
  }

  static inline TemporaryFolder* folder = nullptr;
  static inline db::Seal seal;
  TemporaryFolder copies_;
  int copied_ = 0;
};

// The promise: on the build that made them, readings and verdicts come out the same to the last bit.
TEST_F(MadeAgain, EverythingComesOutTheSameToTheLastBit) {
  const RederiveReport report = again(ledger());
  EXPECT_EQ(report.runs, probes);
  EXPECT_EQ(report.derived, probes);
  EXPECT_EQ(report.same_verdict, probes);
  EXPECT_EQ(report.bitwise_runs, probes);
  EXPECT_GT(report.readings, 300);
  EXPECT_EQ(report.bitwise, report.readings);
  EXPECT_EQ(report.seal, seal);
  EXPECT_TRUE(report.agrees());
  EXPECT_TRUE(report.listed.empty()) << report.listed[0].serial << report.listed[0].derived_verdict;
}

TEST_F(MadeAgain, TheAnswerDoesNotDependOnTheNumberOfThreads) {
  const std::string path = changed("UPDATE reading SET value = value * 1.001 WHERE check_slug LIKE 'red_%'");
  const RederiveReport one = again(path, {}, 1);
  for (const int threads : {2, 5}) {
    const RederiveReport many = again(path, {}, threads);
    ASSERT_EQ(many.listed.size(), one.listed.size());
    for (std::size_t i = 0; i < one.listed.size(); ++i) EXPECT_EQ(many.listed[i].run, one.listed[i].run);
    ASSERT_EQ(many.checks.size(), one.checks.size());
    for (std::size_t i = 0; i < one.checks.size(); ++i) {
      EXPECT_EQ(many.checks[i].check, one.checks[i].check);
      EXPECT_EQ(many.checks[i].largest, one.checks[i].largest);
      EXPECT_EQ(many.checks[i].largest_run, one.checks[i].largest_run);
    }
  }
}

TEST_F(MadeAgain, AChangedReadingIsNamedInUnitsOfU) {
  const std::string path = changed(
      "UPDATE reading SET value = value + 0.5 * expanded_uncertainty WHERE check_slug = 'red_centroid' AND run ="
      " (SELECT min(run) FROM reading)");
  const RederiveReport report = again(path);
  EXPECT_EQ(report.differing, 1);
  EXPECT_FALSE(report.agrees());
  ASSERT_EQ(report.listed.size(), 1u);
  ASSERT_EQ(report.listed[0].differences.size(), 1u);
  const ReadingDifference& difference = report.listed[0].differences[0];
  EXPECT_EQ(difference.check, "red_centroid");
  EXPECT_EQ(difference.agreement, Agreement::differs);
  EXPECT_NEAR(difference.in_U.value(), 0.5, 1e-9);
  EXPECT_FALSE(difference.other_method);
}

TEST_F(MadeAgain, TheLastBitIsToldFromADifference) {
  // One unit in the last place: another processor family may do that; it is said, and it is no difference.
  const std::string path = changed("UPDATE reading SET value = value * (1 + 2.3e-16) WHERE check_slug = 'red_peak'");
  const RederiveReport report = again(path);
  EXPECT_GT(report.close, 0);
  EXPECT_EQ(report.differing, 0);
  EXPECT_LT(report.bitwise_runs, probes);
  EXPECT_TRUE(report.agrees());
}

TEST_F(MadeAgain, AVerdictThatWasChangedIsFound) {
  const std::string path = changed(
      "UPDATE run_closed SET verdict = CASE verdict WHEN 'pass' THEN 'fail' ELSE 'pass' END"
      " WHERE run = (SELECT min(run) FROM run_closed)");
  const RederiveReport report = again(path);
  EXPECT_EQ(report.same_verdict, probes - 1);
  ASSERT_EQ(report.listed.size(), 1u);
  EXPECT_NE(report.listed[0].stored_verdict, report.listed[0].derived_verdict);
}

TEST_F(MadeAgain, OneRunOneSerialOneLot) {
  RederiveScope scope;
  scope.serial = serial(2);
  EXPECT_EQ(again(ledger(), scope).runs, 1);
  scope.serial = "AQ20-048-99999";
  EXPECT_EQ(again(ledger(), scope).runs, 0);
  scope = {};
  scope.run = db::RunId{1};
  EXPECT_EQ(rederive(ledger(), scope, "").error().id, "run_not_closed");
}

TEST_F(MadeAgain, ItCanBeStopped) {
  std::stop_source stop;
  stop.request_stop();
  RederiveOptions options;
  options.stop = stop.get_token();
  const auto report = rederive(ledger(), {}, "", options).value();
  EXPECT_TRUE(report.stopped);
  EXPECT_EQ(report.derived, 0);
}

// --- Impact

ImpactQuestion wavelength_off(double nm, bool both_ways = false) {
  ImpactQuestion question;
  question.device = "PH-01";
  question.since = {0};
  question.found = Drift{DriftOf::wavelength, nm};
  question.both_ways = both_ways;
  return question;
}

ImpactReport impact_of(const std::string& path, const ImpactQuestion& question, int threads = 2) {
  ImpactOptions options;
  options.threads = threads;
  return impact(path, question, options).value();
}

const ImpactRow& row_of(const ImpactReport& report, const std::string& serial_number) {
  for (const ImpactRow& row : report.rows)
    if (row.serial == serial_number) return row;
  throw std::runtime_error("no row of " + serial_number);
}

TEST_F(MadeAgain, ADeviceThatWasRightChangesNothing) {
  const ImpactReport report = impact_of(ledger(), wavelength_off(0.0));
  ASSERT_GE(report.rows.size(), 3u);
  EXPECT_EQ(report.fails, 0);
  EXPECT_EQ(report.rederived, static_cast<std::int64_t>(report.rows.size()));
  for (const ImpactRow& row : report.rows) EXPECT_EQ(row.margin, row.was_margin) << row.serial;
}

// The sign: a spectrometer that told 0.4 nm too much saw light that was 0.4 nm shorter.
TEST_F(MadeAgain, ADriftGoesIntoTheReadingsTheRightWay) {
  db::Reader reader = db::Reader::open(ledger()).value();
  StoredDocuments documents(reader);
  int looked_at = 0;
  for (const db::RunId run : db::passed_runs_with_device(reader, "PH-01", {0})) {
    const auto stored = db::run_record(reader, run).value();
    const auto basis = documents.basis_of(stored).value();
    const auto captures = stored_captures(reader, stored).value();
    const auto certificates = corrected(basis.certificates(), {DriftOf::wavelength, 0.4});
    const DerivedRun moved = derive(basis, certificates, captures, stored);
    for (const DerivedReading& now : moved.readings)
      for (const db::ReadingRow& then : stored.readings)
        if (then.check == now.reading.check && then.check.ends_with("_centroid")) {
          // Not exactly -0.4: the line's window and the response table stay where they are.
          EXPECT_NEAR(*now.reading.value - *then.value, -0.4, 0.01) << then.check;
          ++looked_at;
        }
  }
  EXPECT_GE(looked_at, 6);
}

TEST_F(MadeAgain, RowsAreRankedAndTheirNumberOfThreadsDoesNotMatter) {
  const ImpactReport one = impact_of(ledger(), wavelength_off(0.8, true), 1);
  const ImpactReport three = impact_of(ledger(), wavelength_off(0.8, true), 3);
  ASSERT_EQ(one.rows.size(), three.rows.size());
  for (std::size_t i = 0; i < one.rows.size(); ++i) {
    EXPECT_EQ(one.rows[i].run, three.rows[i].run);
    EXPECT_EQ(one.rows[i].margin, three.rows[i].margin);
    if (i > 0) EXPECT_LE(one.rows[i - 1].margin, one.rows[i].margin);
  }
  // Both ways is the worse of the two.
  const ImpactReport up = impact_of(ledger(), wavelength_off(0.8)), down = impact_of(ledger(), wavelength_off(-0.8));
  for (const ImpactRow& row : one.rows)
    EXPECT_EQ(*row.margin, std::min(*row_of(up, row.serial).margin, *row_of(down, row.serial).margin)) << row.serial;
}

TEST_F(MadeAgain, ACorrectedCertificateSaysTheSameAsTheDrift) {
  db::Reader reader = db::Reader::open(ledger()).value();
  const auto certificate = db::documents_named(reader, "certificate", "PHC-2026-0101");
  ASSERT_FALSE(certificate.empty());
  auto phantom = measure::read_phantom_certificate(certificate[0].text, "stored").value();
  phantom.wavelength_nm[0] -= 0.8;
  ImpactQuestion question = wavelength_off(0.8);
  question.found = CorrectedCertificate{phantom};
  const ImpactReport by_certificate = impact_of(ledger(), question),
                     by_drift = impact_of(ledger(), wavelength_off(0.8));
  ASSERT_EQ(by_certificate.rows.size(), by_drift.rows.size());
  for (std::size_t i = 0; i < by_drift.rows.size(); ++i) {
    EXPECT_EQ(by_certificate.rows[i].run, by_drift.rows[i].run);
    EXPECT_EQ(by_certificate.rows[i].margin, by_drift.rows[i].margin);
  }
}

// Where captures are gone, what the correction does to runs that have theirs must lead to nearly the same.
TEST_F(MadeAgain, SensitivitiesComeNearToReDerivation) {
  const std::string pruned = copies_.file("pruned.db");
  fs::copy_file(ledger(), pruned);
  const ImpactQuestion question = wavelength_off(0.8);
  const ImpactReport whole = impact_of(ledger(), question);
  std::vector<std::string> without;
  {
    db::StoreOptions options;
    options.path = pruned;
    const SystemClock clock;
    auto store = db::Store::open(options, clock).value();
    std::vector<std::int64_t> captures;
    for (std::size_t i = 0; i < whole.rows.size(); i += 3) {
      db::Reader reader = store->reader();
      const auto record = db::run_record(reader, whole.rows[i].run).value();
      for (const auto& capture : record.captures) captures.push_back(capture.number);
      without.push_back(whole.rows[i].serial);
    }
    const auto outcome = store->commit([&](db::Change& change) { change.prune(captures, "Piet Hallgrim", "over"); });
    ASSERT_TRUE(outcome) << outcome.error().text();
  }
  const ImpactReport report = impact_of(pruned, question);
  EXPECT_EQ(report.by_sensitivity, static_cast<std::int64_t>(without.size()));
  EXPECT_EQ(report.unknown, 0);
  for (const std::string& each : without) {
    const ImpactRow &estimated = row_of(report, each), &derived = row_of(whole, each);
    EXPECT_EQ(estimated.by, ImpactBy::sensitivity);
    EXPECT_EQ(estimated.problem->id, "capture_pruned") << "says why";
    EXPECT_GT(estimated.from_runs, 0);
    EXPECT_EQ(estimated.check, derived.check);
    // 0.8 nm move margins by up to 0.5; the estimate is right to a twentieth of that.
    EXPECT_NEAR(*estimated.margin, *derived.margin, 0.025) << each;
  }
}

TEST_F(MadeAgain, ADeviceThatNoRunHadIsToldAsSuch) {
  ImpactQuestion question = wavelength_off(0.4);
  question.device = "PH-1";
  EXPECT_EQ(impact(ledger(), question).error().id, "impact_no_runs") << "a part of a serial is another serial";
  question.device = "PHC-2026-0101";
  EXPECT_TRUE(impact(ledger(), question));
  question.since = {4'000'000'000'000'000};
  EXPECT_EQ(impact(ledger(), question).error().id, "impact_no_runs");
}

// Straight line by least squares; source of the figures: Norris of NIST StRD is used in tests/limits, here a line that
// is exact: change = 0.5 - 0.25 * value.
TEST(ChangeLine, IsALineFromFiveRunsOnAndAConstantBelow) {
  std::vector<Change> changes;
  for (int i = 0; i < 4; ++i) changes.push_back({1.0 * i, 0.5 - 0.25 * i});
  EXPECT_NEAR(ChangeLine(changes).at(100.0), 0.125, 1e-15) << "the mean of four";
  changes.push_back({4.0, -0.5});
  EXPECT_NEAR(ChangeLine(changes).at(100.0), 0.5 - 25.0, 1e-12);
  EXPECT_EQ(ChangeLine(std::vector<Change>{}).runs(), 0);
  EXPECT_NEAR(ChangeLine(std::vector<Change>(6, {3.0, 0.2})).at(9.0), 0.2, 1e-15) << "no spread, no slope";
}

// Each kind of drift moves what it names and nothing of the other device.
TEST(Drift, CorrectsWhatItNames) {
  measure::Certificates certificates;
  certificates.phantom.wavelength_nm = {600.0, 0.44};
  certificates.phantom.slit_nm = 2.5;
  certificates.phantom.set_points = {{1.0, {0.02, 0.02}, 1.0}};
  const auto at = [&](DriftOf of, double by) { return corrected(certificates, {of, by}); };
  EXPECT_EQ(at(DriftOf::wavelength, 0.4).phantom.wavelength_nm[0], 599.6);
  EXPECT_EQ(at(DriftOf::temperature, 0.5).phantom.true_temperature_C(25.5), 25.0);
  EXPECT_EQ(at(DriftOf::slit, 0.5).phantom.slit_nm, 2.0);
  EXPECT_NEAR(at(DriftOf::ratio, 1.0).phantom.set_points[0].ratio, 1.0 / 1.01, 1e-15);
  EXPECT_NEAR(at(DriftOf::modulation, 1.0).phantom.set_points[0].modulation.infrared, 0.02 / 1.01, 1e-15);
  EXPECT_EQ(at(DriftOf::modulation, 1.0).phantom.set_points[0].ratio, 1.0);
  EXPECT_NEAR(at(DriftOf::drive, 2.0).adapter.drive_scale, 1.0 / 1.02, 1e-15);
  EXPECT_NEAR(at(DriftOf::voltage, -2.0).adapter.voltage_scale, 1.0 / 0.98, 1e-15);
  EXPECT_NEAR(at(DriftOf::resistance, 2.0).adapter.resistance_scale, 1.0 / 1.02, 1e-15);
  EXPECT_NEAR(at(DriftOf::photocurrent, 2.0).adapter.photocurrent_scale, 1.0 / 1.02, 1e-15);
  for (const char* word :
       {"wavelength", "temperature", "slit", "ratio", "modulation", "drive", "photocurrent", "voltage", "resistance"})
    EXPECT_EQ(slug(find_drift(word).value()), word);
  EXPECT_FALSE(find_drift("colour"));
}

}  // namespace
}  // namespace probewright::trace
