// Backups, restoring, read-only copies: what leaves the station and what comes back.
#include "db/backup.h"

#include <gmock/gmock.h>
#include <gtest/gtest.h>
#include <sys/stat.h>

#include <fstream>
#include <thread>

#include "db/file_work.h"
#include "db/queries/entries.h"
#include "db/queries/runs_of_serial.h"
#include "db/restore.h"
#include "sample.h"

namespace probewright::db {
namespace {

using namespace sample;
namespace fs = std::filesystem;

std::vector<std::string> names_in(const fs::path& folder) {
  std::vector<std::string> names;
  for (const auto& item : fs::directory_iterator(folder)) names.push_back(item.path().filename().string());
  std::sort(names.begin(), names.end());
  return names;
}

class BackupTest : public testing::Test {
 protected:
  BackupTest() : store(open(options(path), clock)) {
    whole_run(*store, "AQ20-048-00001", entropy);
    whole_run(*store, "AQ20-048-00002", entropy, "fail");
  }
  HandClock clock;
  Folder folder, elsewhere;
  std::string path = folder.file("ledger.db"), backup = elsewhere.file("backup.db");
  SeededEntropy entropy{3};
  std::unique_ptr<Store> store;
};

TEST_F(BackupTest, IsOneFileInOneStateThatVerifiesAndNothingLiesBeside) {
  const Seal before = store->seal();
  const auto copy = copy_ledger(path, backup);
  ASSERT_TRUE(copy) << copy.error().text();
  EXPECT_EQ(copy->report.seal, before);
  EXPECT_EQ(copy->report.runs, 2);
  EXPECT_EQ(copy->size, static_cast<std::int64_t>(fs::file_size(backup)));
  EXPECT_EQ(names_in(elsewhere.path), std::vector<std::string>{"backup.db"});
  Connection connection(backup, Access::immutable);
  EXPECT_EQ(connection.ask("PRAGMA journal_mode"), "delete");
  EXPECT_EQ(connection.ask("PRAGMA auto_vacuum"), "2");
  EXPECT_EQ(store->seal(), before) << "the source is only read";
}

TEST_F(BackupTest, IsTakenWhileTheLineWrites) {
  std::atomic<bool> done{false};
  int written = 0;
  std::jthread writer([&] {
    while (!done) whole_run(*store, "AQ20-050-" + std::to_string(++written), entropy);
  });
  for (int i = 0; i < 5; ++i) {
    const auto copy = copy_ledger(path, elsewhere.file("b" + std::to_string(i)));
    EXPECT_TRUE(copy) << copy.error().text();
  }
  done = true;
  writer.join();
  EXPECT_GT(written, 0);
  EXPECT_TRUE(verify(path)->ok());
}

TEST_F(BackupTest, NeverWritesOverAnything) {
  std::ofstream(backup) << "precious";
  EXPECT_EQ(copy_ledger(path, backup).error().id, "file_exists");
  EXPECT_EQ(fs::file_size(backup), 8u);
  EXPECT_EQ(copy_ledger(path, path).error().id, "file_exists");
  EXPECT_EQ(copy_ledger(folder.file("none.db"), elsewhere.file("b")).error().id, "ledger_cannot_open");
  EXPECT_EQ(names_in(elsewhere.path), std::vector<std::string>{"backup.db"});
}

TEST_F(BackupTest, ADamagedLedgerGivesNoBackup) {
  store.reset();
  {
    Connection stray(path, Access::read_write);
    stray.run("DROP TRIGGER reading_no_update; UPDATE reading SET value = value + 1 WHERE check_slug = 'red_centroid'");
  }
  const auto copy = copy_ledger(path, backup);
  ASSERT_FALSE(copy);
  EXPECT_EQ(copy.error().id, "backup_differs");
  EXPECT_TRUE(names_in(elsewhere.path).empty()) << "what cannot be trusted is taken away";
}

TEST_F(BackupTest, CanBeStoppedAndTellsHowFarItIs) {
  CopyOptions how;
  std::stop_source stop;
  stop.request_stop();
  how.stop = stop.get_token();
  EXPECT_FALSE(copy_ledger(path, backup, how));
  EXPECT_TRUE(names_in(elsewhere.path).empty());
  std::int64_t last = 0, of = 0;
  how.stop = {};
  how.progress = [&](std::int64_t done, std::int64_t total) {
    EXPECT_LE(done, total);
    last = done, of = total;
  };
  EXPECT_TRUE(copy_ledger(path, backup, how));
  EXPECT_EQ(last, of);
  EXPECT_GT(of, 0);
}

TEST_F(BackupTest, IsRestoredWithAnEntryThatSaysSo) {
  const auto copy = copy_ledger(path, backup).value();
  whole_run(*store, "AQ20-048-00003", entropy);  // lost with the disk
  const Seal lost = store->seal();
  store.reset();
  fs::remove(path);
  RestoreOptions how;
  how.who = "Piet Hallgrim";
  how.reason = "the disk died";
  how.printed = copy.report.seal;
  const auto restored = restore_ledger(backup, path, clock, how);
  ASSERT_TRUE(restored) << restored.error().text();
  store = open(options(path), clock);
  Reader reader = store->reader();
  const auto told = entries(reader, store->seal().entry, store->seal().entry).front();
  EXPECT_EQ(told.kind, "restored") << "and no entry that it was moved";
  EXPECT_EQ(told.data.number("entry"), copy.report.seal.entry);
  EXPECT_EQ(told.data.text("reason"), "the disk died");
  EXPECT_EQ(runs_of_serial(reader, "AQ20-048-00002").size(), 1u);
  whole_run(*store, "AQ20-048-00004", entropy);
  VerifyOptions with;
  with.printed = lost;
  EXPECT_FALSE(verify(path, with)->ok()) << "a seal from after the backup shows that history was cut";
  with.printed = copy.report.seal;
  EXPECT_TRUE(verify(path, with)->ok());
}

TEST_F(BackupTest, ABackupThatDoesNotAgreeIsNotRestored) {
  copy_ledger(path, backup).value();
  store.reset();
  fs::remove(path);
  RestoreOptions how;
  how.who = "Piet Hallgrim";
  how.printed = Seal{3, {}};
  EXPECT_EQ(restore_ledger(backup, path, clock, how).error().id, "backup_differs");
  EXPECT_FALSE(fs::exists(path));
  how.printed.reset();
  {
    std::fstream file(backup, std::ios::in | std::ios::out | std::ios::binary);
    const std::string bytes{std::istreambuf_iterator<char>(file), {}};
    file.seekp(static_cast<std::streamoff>(bytes.rfind("Imre Vasko")));
    file << "Irme";
  }
  EXPECT_FALSE(restore_ledger(backup, path, clock, how));
  EXPECT_FALSE(fs::exists(path));
}

TEST_F(BackupTest, ADrillLeavesNothingBehind) {
  copy_ledger(path, backup).value();
  const auto drill = restore_drill(backup, elsewhere.file("drill.db"), {});
  ASSERT_TRUE(drill);
  EXPECT_EQ(drill->report.runs, 2);
  EXPECT_EQ(names_in(elsewhere.path), std::vector<std::string>{"backup.db"});
}

/// Takes the right to write away from a folder and gives it back. Root may write anyway, so the folder of the copy is
/// also watched for what lies in it.
class ReadOnlyFolder {
 public:
  explicit ReadOnlyFolder(fs::path path) : path_(std::move(path)) { ::chmod(path_.c_str(), 0555); }
  ~ReadOnlyFolder() { ::chmod(path_.c_str(), 0755); }
  fs::path path_;
};

TEST_F(BackupTest, AnAuditorsCopyInAReadOnlyFolderAnswersAndLeavesNoFileBehind) {
  copy_ledger(path, backup).value();
  const ReadOnlyFolder sealed(elsewhere.path);
  for (const ReadFrom from : {ReadFrom::live, ReadFrom::archive}) {
    auto reader = Reader::open(backup, from);
    ASSERT_TRUE(reader);
    EXPECT_EQ(runs_of_serial(*reader, "AQ20-048-00002").at(0).closing->verdict, "fail");
    EXPECT_EQ(names_in(elsewhere.path), std::vector<std::string>{"backup.db"}) << "while it is open";
  }
  EXPECT_TRUE(verify(backup)->ok());
  EXPECT_EQ(names_in(elsewhere.path), std::vector<std::string>{"backup.db"});
}

// A ledger that somebody simply copied with the line at rest is still in WAL mode. Where the folder can be written,
// SQLite would put two files beside it and a reader cannot take them away.
TEST_F(BackupTest, AFileThatWasSimplyCopiedAnswersAndLeavesNoFileBehind) {
  store.reset();
  fs::copy_file(path, backup);
  {
    auto reader = Reader::open(backup);
    ASSERT_TRUE(reader);
    EXPECT_EQ(runs_of_serial(*reader, "AQ20-048-00001").size(), 1u);
  }
  EXPECT_TRUE(verify(backup)->ok());
  EXPECT_EQ(names_in(elsewhere.path), std::vector<std::string>{"backup.db"});
}

TEST_F(BackupTest, NothingIsLeftBesideALedgerThatIsNotThere) {
  StoreOptions missing = options(elsewhere.file("none.db"));
  missing.create = false;
  EXPECT_EQ(Store::open(missing, clock).error().id, "ledger_cannot_open");
  EXPECT_TRUE(names_in(elsewhere.path).empty());
}

TEST_F(BackupTest, AMovedOrCopiedFileIsNoticedOnce) {
  store.reset();
  store = open(options(path), clock);
  const Seal still = store->seal();
  store.reset();
  store = open(options(path), clock);
  EXPECT_EQ(store->seal(), still) << "opened again where it was: nothing to say";
  store.reset();
  fs::copy_file(path, backup);
  auto copied = open(options(backup), clock);
  Reader reader = copied->reader();
  EXPECT_EQ(entries(reader, copied->seal().entry, copied->seal().entry).front().kind, "file_moved");
  const Seal told = copied->seal();
  copied.reset();
  copied = open(options(backup), clock);
  EXPECT_EQ(copied->seal(), told);
  // Put back over the old one, as a hasty person restores: another file under the old name.
  fs::remove(path);
  fs::copy_file(backup, path);
  store = open(options(path), clock);
  Reader again = store->reader();
  const auto last = entries(again, store->seal().entry, store->seal().entry).front();
  EXPECT_EQ(last.kind, "file_moved");
  EXPECT_EQ(last.data.find("before")->text("path"), last.data.find("now")->text("path"));
}

TEST_F(BackupTest, AFileThatIsTakenAwayUnderTheLineStopsIt) {
  fs::rename(path, backup);
  const auto outcome =
      store->commit([](Change& change) { change.add_entry("cleaning", "Imre Vasko", Body::Object{}); });
  ASSERT_FALSE(outcome);
  EXPECT_EQ(outcome.error().id, "ledger_moved_away");
  EXPECT_TRUE(store->trouble());
}

TEST_F(BackupTest, AClockThatIsSetIsAnEntry) {
  /// UTC can be set, steady time cannot.
  class SetClock final : public Clock {
   public:
    UtcTime utc_now() const override { return utc; }
    SteadyTime steady_now() const override { return {std::chrono::seconds{100}}; }
    UtcTime utc{1796105772000000};
  } set;
  store.reset();
  auto at = open(options(elsewhere.file("l.db")), set);
  const auto note = [](Change& change) { change.add_entry("cleaning", "Imre Vasko", Body::Object{}); };
  set.utc.microseconds += 1'500'000;
  demand(at->commit(note));
  EXPECT_EQ(at->seal().entry, 2) << "small corrections are none";
  set.utc.microseconds -= 3'600'000'000;
  demand(at->commit(note));
  Reader reader = at->reader();
  const auto steps = entries(reader, 1, 99, "clock_step");
  ASSERT_EQ(steps.size(), 1u);
  EXPECT_EQ(steps[0].number, 3);
  EXPECT_EQ(steps[0].data.number("microseconds"), -3'600'000'000);
  demand(at->commit(note));
  EXPECT_EQ(entries(reader, 1, 99, "clock_step").size(), 1u);
}

}  // namespace
}  // namespace probewright::db
