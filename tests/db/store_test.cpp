#include "db/store.h"

#include <gmock/gmock.h>
#include <gtest/gtest.h>
#include <sqlite3.h>

#include <cmath>
#include <fstream>

#include "db/queries/capture_bytes.h"
#include "db/queries/document.h"
#include "db/queries/entries.h"
#include "db/queries/open_runs.h"
#include "db/queries/runs_of_serial.h"
#include "db/queries/seal.h"
#include "db/queries/tries.h"
#include "db/sha256.h"
#include "db/verify.h"
#include "sample.h"

namespace probewright::db {
namespace {

using namespace sample;
using testing::ElementsAre;

class StoreTest : public testing::Test {
 protected:
  StoreTest() : path(folder.file("ledger.db")), store(open(options(path), clock)) {}

  std::string problem_of_job(const Store::Job& job) {
    const auto outcome = store->commit(job);
    return outcome ? "" : outcome.error().id;
  }
  RunId opened_run(const std::string& serial) {
    RunId run;
    demand(store->commit([&](Change& change) {
      add_documents(change);
      run = change.open_run(opening(serial));
    }));
    return run;
  }
  void reopen() {
    store.reset();
    store = open(options(path), clock);
  }
  VerifyReport verified() { return verify(path).value(); }

  HandClock clock;
  Folder folder;
  std::string path;
  std::unique_ptr<Store> store;
  SeededEntropy entropy{7};
};

TEST_F(StoreTest, BeginsWithOneEntryInTheModesThatTheDesignAsks) {
  EXPECT_EQ(store->seal().entry, 1);
  EXPECT_EQ(store->station(), "Quay-1");
  EXPECT_FALSE(store->emulated());
  auto reader = Reader::open(path).value();
  EXPECT_EQ(reader.connection().ask("PRAGMA journal_mode"), "wal");
  EXPECT_EQ(reader.connection().ask("PRAGMA auto_vacuum"), "2");
  const auto first = entries(reader, 1, 1);
  ASSERT_EQ(first.size(), 1u);
  EXPECT_EQ(first[0].kind, "ledger_begun");
  EXPECT_EQ(first[0].data.text("station"), "Quay-1");
}

TEST_F(StoreTest, AWholeRunComesBackAsItWasGiven) {
  SeededEntropy first{11}, again{11};
  const RunId run = whole_run(*store, "AQ20-048-00001", first);
  auto reader = Reader::open(path).value();
  const auto runs = runs_of_serial(reader, "AQ20-048-00001");
  ASSERT_EQ(runs.size(), 1u);
  const RunRecord& record = runs[0];
  EXPECT_EQ(record.run, run);
  EXPECT_EQ(record.opened.operator_name, "Imre Vasko");
  EXPECT_EQ(record.opened.try_number, 1);
  EXPECT_EQ(record.opened.ambient_temperature_C, 23.25);
  ASSERT_EQ(record.documents.size(), 2u);
  EXPECT_EQ(record.documents[1].name, "AQ-20");
  EXPECT_EQ(record.documents[1].revision, "7");
  ASSERT_EQ(record.opened.devices.size(), 2u);
  EXPECT_EQ(record.opened.devices[0].certificate, sha256(certificate().text));
  EXPECT_FALSE(record.opened.devices[1].certificate);
  ASSERT_TRUE(record.closing);
  EXPECT_EQ(record.closing->verdict, "pass");
  EXPECT_TRUE(record.closing->provisional);
  EXPECT_EQ(record.closing->hash, store->seal().hash);
  EXPECT_EQ(record.closing->bench.text("lid"), "closed");
  EXPECT_GT(record.closing->closed_at, record.opened_at);

  ASSERT_EQ(record.captures.size(), 2u);
  const Bytes spectrum = wave(again, 400), pulses = wave(again, 1500);
  EXPECT_EQ(capture_bytes(reader, record.captures[0].number).value(), spectrum);
  EXPECT_EQ(capture_bytes(reader, record.captures[1].number).value(), pulses);
  EXPECT_EQ(record.captures[1].packing, "zstd");
  EXPECT_LT(record.captures[1].stored_size, record.captures[1].decoded_size);

  const auto given = readings(again);
  ASSERT_EQ(record.readings.size(), given.size());
  for (const ReadingRow& wanted : given) {
    const auto found = std::find_if(record.readings.begin(), record.readings.end(),
                                    [&](const ReadingRow& row) { return row.check == wanted.check; });
    ASSERT_NE(found, record.readings.end()) << wanted.check;
    EXPECT_EQ(found->value, wanted.value);
    EXPECT_EQ(found->none_reason, wanted.none_reason);
    EXPECT_EQ(found->expanded_uncertainty, wanted.expanded_uncertainty);
    EXPECT_EQ(found->upper, wanted.upper);
    EXPECT_EQ(found->acceptance_lower, wanted.acceptance_lower);
    EXPECT_EQ(found->margin, wanted.margin);
    EXPECT_EQ(found->ok, wanted.ok);
    EXPECT_EQ(found->cut_short, wanted.cut_short);
  }
  EXPECT_EQ(record.readings.front().check, "id_resistance") << "catalogue order, not the order made";
}

TEST_F(StoreTest, NegativeZeroIsStoredAsZero) {
  const RunId run = whole_run(*store, "AQ20-048-00001", entropy);
  auto reader = store->reader();
  const auto record = run_record(reader, run);
  for (const ReadingRow& row : record->readings)
    if (row.check == "dark_current") EXPECT_FALSE(std::signbit(*row.value));
}

TEST_F(StoreTest, NumbersThatAreNotFiniteAreRefused) {
  const RunId run = opened_run("AQ20-048-00001");
  for (const double value : {std::nan(""), HUGE_VAL, -HUGE_VAL}) {
    auto rows = readings(entropy);
    rows[0].value = value;
    EXPECT_EQ(problem_of_job([&](Change& change) { change.add_readings(run, rows); }), "reading_not_finite");
    rows = readings(entropy);
    rows[2].margin = value;
    EXPECT_EQ(problem_of_job([&](Change& change) { change.add_readings(run, rows); }), "reading_not_finite");
  }
  auto reader = store->reader();
  EXPECT_TRUE(run_record(reader, run)->readings.empty()) << "a refused group leaves nothing";
}

TEST_F(StoreTest, OneJobOfAGroupFailsAlone) {
  RunId first, third;
  const std::vector<Store::Job> jobs{
      [&](Change& change) { add_documents(change), first = change.open_run(opening("AQ20-048-00001")); },
      [&](Change& change) {
        change.add_entry("cleaning", "Imre Vasko", Body::Object{});
        change.open_run(opening("AQ20-048-00002", true));  // emulated: refused here
      },
      [&](Change& change) { third = change.open_run(opening("AQ20-048-00003")); },
      [](Change&) { throw std::runtime_error("a mistake"); },
      [](Change& change) {
        change.add_entry("cleaning", "Imre Vasko", Body::Object{{"nest", 2}});
      }};
  const auto outcomes = store->commit_group(jobs);
  ASSERT_EQ(outcomes.size(), 5u);
  EXPECT_TRUE(outcomes[0]);
  EXPECT_EQ(outcomes[1].error().id, "run_refused_emulated");
  EXPECT_TRUE(outcomes[2]);
  EXPECT_EQ(outcomes[3].error().id, "ledger_job");
  EXPECT_TRUE(outcomes[4]);
  auto reader = store->reader();
  std::vector<std::string> kinds;
  for (const auto& entry : entries(reader, 1, 100)) kinds.push_back(entry.kind);
  EXPECT_THAT(kinds,
              ElementsAre("ledger_begun", "document", "document", "document", "run_opened", "run_opened", "cleaning"));
  EXPECT_EQ(third.value, first.value + 1);
  EXPECT_EQ(store->seal().entry, 7);
  EXPECT_FALSE(store->trouble());
  EXPECT_TRUE(verified().ok());
}

TEST_F(StoreTest, TriesAreCountedByTheStore) {
  whole_run(*store, "AQ20-048-00001", entropy, "fail");
  whole_run(*store, "AQ20-048-00001", entropy, "void");
  auto engineering = opening("AQ20-048-00001");
  engineering.purpose = "engineering";
  demand(store->commit([&](Change& change) { change.open_run(engineering); }));
  auto wrong = opening("AQ20-048-00001");
  wrong.try_number = 2;
  EXPECT_EQ(problem_of_job([&](Change& change) { change.open_run(wrong); }), "run_try_number");
  wrong.try_number = 3;
  EXPECT_EQ(problem_of_job([&](Change& change) {
              EXPECT_EQ(change.tries("AQ20-048-00001", "production"), 2);
              change.open_run(wrong);
            }),
            "");
  auto reader = store->reader();
  const auto tries = tries_of_serial(reader, "AQ20-048-00001", "production");
  ASSERT_EQ(tries.size(), 3u);
  EXPECT_EQ(tries[0].verdict, "fail");
  EXPECT_EQ(tries[1].verdict, "void");
  EXPECT_EQ(tries[1].cause, "device_lost");
  EXPECT_EQ(tries[2].verdict, "");
  EXPECT_EQ(tries[2].try_number, 3);
  EXPECT_EQ(tries_of_serial(reader, "AQ20-048-00001").size(), 4u);
}

TEST_F(StoreTest, AVerdictThatItsReadingsContradictIsRefused) {
  const RunId run = opened_run("AQ20-048-00001");
  const auto close = [&](const RunClosed& closed) {
    return problem_of_job([&](Change& change) { change.close_run(closed); });
  };
  EXPECT_EQ(close(closing(run, "pass")), "run_verdict_contradicts") << "nothing was judged";
  EXPECT_EQ(close(closing(run, "fail")), "run_verdict_contradicts") << "the failing check has no reading";
  demand(store->commit([&](Change& change) { change.add_readings(run, readings(entropy, true)); }));
  EXPECT_EQ(close(closing(run, "pass")), "run_verdict_contradicts") << "a reading is not ok";
  auto unnamed = closing(run, "void");
  unnamed.cause.clear();
  EXPECT_EQ(close(unnamed), "run_verdict_contradicts");
  auto odd = closing(run, "maybe");
  odd.failing = {"red_centroid"};
  EXPECT_EQ(close(odd), "ledger_refused");
  EXPECT_EQ(close(closing(run, "fail")), "");
  EXPECT_EQ(close(closing(run, "fail")), "run_is_closed");
}

TEST_F(StoreTest, APassNeedsAReadingForEveryJudgedCheck) {
  const RunId run = opened_run("AQ20-048-00001");
  auto rows = readings(entropy);
  rows[1].value.reset();
  rows[1].none_reason = "clipped";
  rows[1].ok = "none";
  demand(store->commit([&](Change& change) { change.add_readings(run, rows); }));
  EXPECT_EQ(problem_of_job([&](Change& change) { change.close_run(closing(run, "pass")); }), "run_verdict_contradicts");
}

TEST_F(StoreTest, AClosedRunTakesNothingMore) {
  const RunId run = whole_run(*store, "AQ20-048-00001", entropy);
  EXPECT_EQ(problem_of_job([&](Change& change) { change.add_readings(run, readings(entropy)); }), "run_is_closed");
  EXPECT_EQ(problem_of_job([&](Change& change) { change.add_capture(run, "pulses", "", {}); }), "run_is_closed");
  EXPECT_EQ(problem_of_job([&](Change& change) { change.add_readings({999}, readings(entropy)); }), "run_unknown");
}

TEST_F(StoreTest, ReadingsAreCheckedBeforeTheyAreKept) {
  const RunId run = opened_run("AQ20-048-00001");
  const auto add = [&](auto change_row) {
    auto rows = readings(entropy);
    change_row(rows[0]);
    return problem_of_job([&](Change& change) { change.add_readings(run, rows); });
  };
  EXPECT_EQ(add([](ReadingRow& row) { row.check = "no_such_check"; }), "reading_check_unknown");
  EXPECT_EQ(add([](ReadingRow& row) { row.none_reason = "clipped"; }), "reading_incomplete");
  EXPECT_EQ(add([](ReadingRow& row) { row.value.reset(); }), "reading_incomplete");
  EXPECT_EQ(add([](ReadingRow& row) { row.ok = "fine"; }), "ledger_refused");
  EXPECT_EQ(add([](ReadingRow& row) { row.check = "infrared_centroid"; }), "ledger_refused")
      << "one row for each check";
  EXPECT_EQ(add([](ReadingRow&) {}), "");
}

TEST_F(StoreTest, ADocumentIsKeptOnceAndUnderOneName) {
  demand(store->commit([](Change& change) { add_documents(change); }));
  const auto entry = store->seal().entry;
  demand(store->commit([](Change& change) { add_documents(change); }));
  EXPECT_EQ(store->seal().entry, entry);
  auto renamed = model();
  renamed.revision = "4";
  EXPECT_EQ(problem_of_job([&](Change& change) { change.add_document(renamed); }), "document_differs");
  auto binary = model();
  binary.text += '\0';
  EXPECT_EQ(problem_of_job([&](Change& change) { change.add_document(binary); }), "document_not_text");
  auto unknown = opening("AQ20-048-00001");
  unknown.documents.push_back({"budget", sha256("unknown")});
  EXPECT_EQ(problem_of_job([&](Change& change) { change.open_run(unknown); }), "document_unknown");
}

TEST_F(StoreTest, ADocumentComesIntoForceWithTwoPeopleAndNeverInThePast) {
  const Digest digest = sha256(sheet().text);
  const auto sign = [&](const std::string& who, const std::string& role) {
    return problem_of_job([&](Change& change) { change.add_signature({digest, who, role, "approved", "", ""}); });
  };
  const auto force = [&](UtcTime from) {
    return problem_of_job([&](Change& change) { change.put_in_force(digest, from, "Maren Quill", "first sheet"); });
  };
  const auto later = [&](int seconds) { return UtcTime{clock.now.microseconds + seconds * 1'000'000}; };
  EXPECT_EQ(sign("Dalia Oduya", "engineer"), "document_unknown");
  demand(store->commit([](Change& change) { add_documents(change); }));
  EXPECT_EQ(sign("Dalia Oduya", "engineer"), "");
  EXPECT_EQ(force(later(10)), "document_unsigned");
  EXPECT_EQ(sign("Dalia Oduya", "quality"), "signature_twice");
  EXPECT_EQ(force(later(10)), "document_unsigned");
  EXPECT_EQ(sign("Maren Quill", "quality"), "");
  EXPECT_EQ(force(later(-1)), "in_force_past");
  const UtcTime from = later(10), until = later(20);
  EXPECT_EQ(force(from), "");
  demand(store->commit([&](Change& change) { change.withdraw(digest, until, "Maren Quill", "replaced"); }));

  auto reader = Reader::open(path).value();
  const auto in_force = [&](std::int64_t microseconds) {
    return document_in_force(reader, "sheet", "AQ-20", {microseconds}).has_value();
  };
  EXPECT_FALSE(in_force(from.microseconds - 1));
  EXPECT_TRUE(in_force(from.microseconds));
  EXPECT_TRUE(in_force(until.microseconds - 1));
  EXPECT_FALSE(in_force(until.microseconds));
  const auto document = document_by_digest(reader, digest);
  ASSERT_TRUE(document);
  EXPECT_EQ(document->text, sheet().text);
  ASSERT_EQ(document->signatures.size(), 2u);
  EXPECT_EQ(document->signatures[1].signer, "Maren Quill");
  EXPECT_EQ(documents_named(reader, "sheet", "AQ-20").size(), 1u);
  EXPECT_TRUE(verified().ok());
}

TEST_F(StoreTest, OpenRunsAreFoundWithWhatDecidesTheirEnd) {
  whole_run(*store, "AQ20-048-00001", entropy);
  const RunId run = opened_run("AQ20-048-00002");
  demand(store->commit([&](Change& change) { change.add_readings(run, readings(entropy, true)); }));
  reopen();
  auto reader = store->reader();
  const auto open = open_runs(reader, "Quay-1");
  ASSERT_EQ(open.size(), 1u);
  EXPECT_EQ(open[0].run, run);
  EXPECT_EQ(open[0].serial, "AQ20-048-00002");
  EXPECT_EQ(open[0].readings, 7);
  EXPECT_THAT(open[0].not_ok, ElementsAre("red_centroid"));
  EXPECT_TRUE(open_runs(reader, "Quay-2").empty());
  demand(store->commit([&](Change& change) { change.close_run(closing(run, "fail")); }));
  EXPECT_TRUE(open_runs(reader).empty());
}

TEST_F(StoreTest, PrunedBytesGoAndTheirDigestsStay) {
  const RunId run = whole_run(*store, "AQ20-048-00001", entropy);
  auto reader = store->reader();
  const auto captures = run_record(reader, run)->captures;
  const std::int64_t one = captures[0].number;
  const RunId open = opened_run("AQ20-048-00002");
  std::int64_t young = 0;
  demand(store->commit([&](Change& change) { young = change.add_capture(open, "pulses", "", wave(entropy, 100)); }));
  EXPECT_EQ(problem_of_job([&](Change& change) { change.prune({&young, 1}, "Piet Hallgrim", "x"); }), "run_is_open");
  demand(store->commit([&](Change& change) { change.prune({&one, 1}, "Piet Hallgrim", "record period is over"); }));
  EXPECT_EQ(capture_bytes(reader, one).error().id, "capture_pruned");
  EXPECT_TRUE(capture_bytes(reader, captures[1].number));
  EXPECT_TRUE(run_record(reader, run)->captures[0].pruned);
  EXPECT_EQ(capture_bytes(reader, 999).error().id, "capture_unknown");
  EXPECT_TRUE(verified().ok());
}

TEST_F(StoreTest, EntriesWithTablesOfTheirOwnAreNotWrittenAsOthers) {
  for (const char* kind :
       {"run_opened", "run_closed", "document", "document_signed", "document_state", "prune", "ledger_begun"})
    EXPECT_EQ(problem_of_job([&](Change& change) { change.add_entry(kind, "x", Body::Object{}); }),
              "entry_kind_reserved");
  EXPECT_EQ(problem_of_job([](Change& change) { change.add_entry("bad", "\xff", Body::Object{}); }), "ledger_job")
      << "text that is not UTF-8";
}

TEST_F(StoreTest, OnlyOneLineHoldsTheLease) {
  const auto second = Store::open(options(path), clock);
  ASSERT_FALSE(second);
  EXPECT_EQ(second.error().id, "ledger_in_use");
  auto beside = options(path);
  beside.lease = false;
  auto command = open(beside, clock);
  EXPECT_FALSE(store->others_wrote());
  demand(command->commit([](Change& change) { change.add_entry("hold", "Maren Quill", Body::Object{{"lot", "L"}}); }));
  EXPECT_TRUE(store->others_wrote());
  EXPECT_FALSE(store->others_wrote());
  demand(store->commit([](Change& change) { change.add_entry("cleaning", "Imre Vasko", Body::Object{}); }));
  EXPECT_FALSE(store->others_wrote()) << "its own writing does not count";
  EXPECT_EQ(store->seal().entry, 3);
  EXPECT_TRUE(verified().ok());
}

TEST_F(StoreTest, AnEmulatedLedgerAndARealOneDoNotMix) {
  auto emulated_options = options(folder.file("emulated.db"));
  emulated_options.emulated = true;
  auto emulated = open(emulated_options, clock);
  EXPECT_TRUE(emulated->emulated());
  const auto outcome = emulated->commit([](Change& change) { add_documents(change), change.open_run(opening("S")); });
  ASSERT_FALSE(outcome);
  EXPECT_EQ(outcome.error().id, "run_refused_emulated");
  EXPECT_EQ(outcome.error().kind(), ProblemKind::not_ready);
  EXPECT_TRUE(emulated->commit([](Change& change) { add_documents(change), change.open_run(opening("S", true)); }));
  auto training = opening("S");
  training.purpose = "training";
  EXPECT_TRUE(emulated->commit([&](Change& change) { change.open_run(training); }));
}

TEST_F(StoreTest, AnotherStationIsRefused) {
  store.reset();
  auto other = options(path);
  other.station = "Quay-2";
  EXPECT_EQ(Store::open(other, clock).error().id, "ledger_other_station");
  other.station.clear();
  EXPECT_EQ(open(other, clock)->station(), "Quay-1");
}

TEST_F(StoreTest, AClockThatStandsBehindIsSeen) {
  EXPECT_EQ(store->clock_behind().count(), 0);
  clock.now.microseconds -= 5'000'000;
  EXPECT_GT(store->clock_behind(), clock_tolerance);
  auto reader = store->reader();
  EXPECT_GT(newest_entry_time(reader), clock.now);
}

void change_file(const std::string& path, const std::string& sql) {
  sqlite3* handle = nullptr;
  ASSERT_EQ(sqlite3_open(path.c_str(), &handle), SQLITE_OK);
  ASSERT_EQ(sqlite3_exec(handle, sql.c_str(), nullptr, nullptr, nullptr), SQLITE_OK) << sqlite3_errmsg(handle);
  sqlite3_close(handle);
}

TEST_F(StoreTest, ANewerLedgerIsRefusedAndNotTouched) {
  store.reset();
  change_file(path, "PRAGMA user_version=99");
  const auto before = sha256(std::string(std::istreambuf_iterator<char>(std::ifstream(path).rdbuf()), {}));
  const auto outcome = Store::open(options(path), clock);
  ASSERT_FALSE(outcome);
  EXPECT_EQ(outcome.error().id, "ledger_newer");
  EXPECT_EQ(Reader::open(path).error().id, "ledger_newer");
  EXPECT_EQ(verify(path).error().id, "ledger_newer");
  EXPECT_EQ(before, sha256(std::string(std::istreambuf_iterator<char>(std::ifstream(path).rdbuf()), {})));
}

TEST_F(StoreTest, FilesThatAreNotLedgersAreRefusedInWords) {
  const std::string text = folder.file("text.db");
  std::ofstream(text) << std::string(5000, 'x');
  EXPECT_EQ(Store::open(options(text), clock).error().id, "ledger_not_a_ledger");
  const std::string other = folder.file("other.db");
  change_file(other, "CREATE TABLE t(a)");
  EXPECT_EQ(Store::open(options(other), clock).error().id, "ledger_not_a_ledger");
  EXPECT_EQ(Reader::open(other).error().id, "ledger_not_a_ledger");
  auto missing = options(folder.file("missing.db"));
  missing.create = false;
  EXPECT_EQ(Store::open(missing, clock).error().id, "ledger_cannot_open");
  EXPECT_EQ(Reader::open(missing.path).error().id, "ledger_cannot_open");
  EXPECT_EQ(Store::open(options(folder.file("no/such/folder.db")), clock).error().id, "ledger_cannot_open");
}

TEST_F(StoreTest, OpeningFindsAnAlteredTrigger) {
  store.reset();
  change_file(path, "DROP TRIGGER entry_no_delete");
  const auto outcome = Store::open(options(path), clock);
  ASSERT_FALSE(outcome);
  EXPECT_EQ(outcome.error().id, "ledger_layout_altered");
  EXPECT_NE(outcome.error().text().find("entry_no_delete"), std::string::npos);
}

TEST_F(StoreTest, OpeningFindsAnAlteredReadingOfARecentRun) {
  const RunId run = whole_run(*store, "AQ20-048-00001", entropy);
  store.reset();
  change_file(path,
              "DROP TRIGGER reading_no_update; UPDATE reading SET value = value + 1 WHERE check_slug = 'red_centroid';"
              "CREATE TRIGGER reading_no_update BEFORE UPDATE ON reading\n"
              "BEGIN SELECT RAISE(ABORT, 'reading: what is written stays'); END;");
  const auto outcome = Store::open(options(path), clock);
  ASSERT_FALSE(outcome);
  EXPECT_EQ(outcome.error().id, "ledger_altered");
  EXPECT_NE(outcome.error().text().find("red_centroid"), std::string::npos) << outcome.error().text();
  const auto report = verified();
  ASSERT_FALSE(report.ok());
  EXPECT_EQ(report.first_fault->table, "reading");
  EXPECT_EQ(report.first_fault->column, "value");
  EXPECT_EQ(report.first_fault->row, "run " + std::to_string(run.value) + ", check_slug red_centroid");
}

}  // namespace
}  // namespace probewright::db
