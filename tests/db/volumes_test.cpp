// Years: volumes, retention, ledgers of earlier layouts.
#include "db/volumes.h"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <fstream>

#include "db/file_work.h"
#include "db/queries/capture_bytes.h"
#include "db/queries/document.h"
#include "db/queries/entries.h"
#include "db/queries/runs_of_serial.h"
#include "db/queries/standing.h"
#include "db/retention.h"
#include "db/schema/schema.h"
#include "db/sha256.h"
#include "db/verify.h"
#include "sample.h"

namespace probewright::db {
namespace {

using namespace sample;
namespace fs = std::filesystem;

class VolumesTest : public testing::Test {
 protected:
  VolumesTest() {
    auto store = open(options(path), clock);
    whole_run(*store, "AQ20-048-00001", entropy, "pass");
    whole_run(*store, "AQ20-048-00002", entropy, "fail");
    whole_run(*store, "AQ20-048-00002", entropy, "void");
    demand(store->commit([](Change& change) {
      const Digest digest = sha256(sheet().text);
      change.add_signature({digest, "Dalia Oduya", "engineer", "drafted", "", ""});
      change.add_signature({digest, "Maren Quill", "quality", "approved", "", ""});
      change.put_in_force(digest, {1796105900000000}, "Maren Quill", "first");
      change.add_entry("lot_opened", "Maren Quill", Body::Object{{"lot", "AQ20-W48-07"}});
      change.add_entry("lot_opened", "Maren Quill", Body::Object{{"lot", "AQ20-W48-06"}});
      change.add_entry("lot_closed", "Maren Quill", Body::Object{{"lot", "AQ20-W48-06"}});
      change.add_entry("hold", "Maren Quill",
                       Body::Object{{"name", "AQ20-048-00001"}, {"reason", "odd"}, {"subject", "serial"}});
    }));
    last_of_first = store->seal();
  }
  Result<ClosedVolume> close() {
    return close_volume({path, "Piet Hallgrim", "end of the year", "0.1.0", "0000000"}, clock);
  }

  HandClock clock;
  Folder folder;
  std::string path = folder.file("ledger.db");
  SeededEntropy entropy{4};
  Seal last_of_first;
};

TEST_F(VolumesTest, TheNextOneBeginsWithTheSealAndWhatStands) {
  const auto closed = close();
  ASSERT_TRUE(closed) << closed.error().text();
  EXPECT_EQ(closed->archive, folder.file("ledger-volume-001.db"));
  EXPECT_EQ(closed->seal.entry, last_of_first.entry + 1);
  EXPECT_EQ(closed->documents, 1);
  EXPECT_EQ(closed->tries, 1);
  EXPECT_EQ(closed->standing, 2);
  for (const auto& item : fs::directory_iterator(folder.path))
    EXPECT_THAT(item.path().filename().string(),
                testing::AnyOf("ledger.db", "ledger.db.lease", "ledger-volume-001.db"));
  EXPECT_EQ(volumes_beside(path), (std::vector<std::string>{closed->archive, path}));
  EXPECT_FALSE(broken_link(volumes_beside(path)).value());

  VerifyOptions archive;
  archive.archive = true;
  archive.printed = closed->seal;
  EXPECT_TRUE(verify(closed->archive, archive)->ok());
  EXPECT_TRUE(verify(path)->ok());

  auto store = open(options(path), clock);
  EXPECT_EQ(store->volume(), 2);
  Reader reader = store->reader();
  EXPECT_EQ(entries(reader, 1, 1).front().data.text("previous_seal"), to_hex(closed->seal.hash));
  const auto in_force = document_in_force(reader, "sheet", "AQ-20", {1796105950000000});
  ASSERT_TRUE(in_force);
  ASSERT_EQ(in_force->signatures.size(), 2u);
  EXPECT_EQ(in_force->signatures[0].signer, "Dalia Oduya");
  EXPECT_LT(in_force->signatures[0].signed_at, entries(reader, 1, 1).front().time) << "signed then, not now";
  EXPECT_TRUE(held_subjects(reader).contains({"serial", "AQ20-048-00001"}));
  ASSERT_EQ(open_lots(reader).size(), 1u);
  EXPECT_EQ(open_lots(reader)[0].data.text("lot"), "AQ20-W48-07");
}

// A volume that closes must not give a failed probe new tries.
TEST_F(VolumesTest, TriesCountOnOverVolumes) {
  ASSERT_TRUE(close());
  {
    auto store = open(options(path), clock);
    demand(store->commit([](Change& change) {
      EXPECT_EQ(change.tries("AQ20-048-00002", "production"), 2);
      EXPECT_EQ(change.tries("AQ20-048-00001", "production"), 0) << "it passed";
    }));
    whole_run(*store, "AQ20-048-00002", entropy, "fail");
    Reader reader = store->reader();
    EXPECT_EQ(runs_of_serial(reader, "AQ20-048-00002").at(0).opened.try_number, 3);
  }
  ASSERT_TRUE(close());
  auto store = open(options(path), clock);
  EXPECT_EQ(store->volume(), 3);
  demand(store->commit([](Change& change) { EXPECT_EQ(change.tries("AQ20-048-00002", "production"), 3); }));
  EXPECT_FALSE(broken_link(volumes_beside(path)).value());
}

TEST_F(VolumesTest, AClosedVolumeTakesNothingMoreFromAnybody) {
  const std::string archive = close().value().archive;
  fs::permissions(archive, fs::perms::owner_write, fs::perm_options::add);
  EXPECT_EQ(Store::open(options(archive), clock).error().id, "ledger_volume_closed");
  Connection raw(archive, Access::read_write);
  try {
    raw.run("INSERT INTO entry SELECT max(number) + 1, time, kind, who, body, hash FROM entry");
    ADD_FAILURE() << "was taken";
  } catch (const Error& error) {
    EXPECT_THAT(error.problem().text(), testing::HasSubstr("the volume is closed"));
  }
}

TEST_F(VolumesTest, AnotherVolumeInTheChainIsFound) {
  const std::string first = close().value().archive;
  Folder other;
  const std::string foreign = other.file("ledger.db");
  begin_second_volume(foreign, clock);
  const auto broken = broken_link({first, foreign}).value();
  ASSERT_TRUE(broken);
  EXPECT_EQ(broken->path, foreign);
  ASSERT_TRUE(close());
  EXPECT_THAT(broken_link({first, path}).value()->what, testing::HasSubstr("is volume 3, not 2"));
}

TEST_F(VolumesTest, NoVolumeClosesOverAnOpenRunOrALine) {
  {
    auto store = open(options(path), clock);
    EXPECT_EQ(close().error().id, "ledger_in_use");
    demand(store->commit([](Change& change) { change.open_run(opening("AQ20-048-00003")); }));
  }
  EXPECT_EQ(close().error().id, "volume_runs_open");
  EXPECT_TRUE(verify(path)->ok());
  EXPECT_EQ(close_volume({folder.file("none.db"), "Piet Hallgrim", "", "", ""}, clock).error().id,
            "ledger_cannot_open");
}

// A power cut at each step of the exchange: the ledger always has its name again, and closing goes on.
TEST_F(VolumesTest, AClosingThatWasCutShortGoesOn) {
  const std::string archive = volume_path(path, 1);
  {
    // Another file has the archive's name: found only after the volume was ended on disk.
    std::ofstream(archive) << "in the way";
    EXPECT_EQ(close().error().id, "file_exists");
    EXPECT_EQ(Store::open(options(path), clock).error().id, "ledger_volume_closed");
    fs::remove(archive);
  }
  ASSERT_TRUE(close());
  // Between the last two renames: no file has the ledger's name, the next volume lies ready.
  fs::rename(path, next_volume_path(path));
  StoreOptions no_new_one = options(path);
  no_new_one.create = false;
  EXPECT_EQ(Store::open(no_new_one, clock).value()->volume(), 2);
  EXPECT_FALSE(file_exists(next_volume_path(path)));
  // Before them: the old one still has the name, the next one is ready.
  fs::rename(path, next_volume_path(path));
  fs::rename(archive, path);
  EXPECT_EQ(Store::open(options(path), clock).error().id, "ledger_volume_closed");
  ASSERT_TRUE(close());
  EXPECT_EQ(Store::open(options(path), clock).value()->volume(), 2);
  EXPECT_FALSE(broken_link(volumes_beside(path)).value());
}

class RetentionTest : public testing::Test {
 protected:
  RunId run(const std::string& serial, const std::string& lot) {
    RunId id;
    demand(store->commit([&](Change& change) {
      add_documents(change);
      RunOpened opened = opening(serial);
      opened.lot = lot;
      id = change.open_run(opened);
      change.add_capture(id, "spectrum_red", "", wave(entropy, 400));
      change.add_readings(id, readings(entropy));
      change.close_run(closing(id, "pass"));
    }));
    return id;
  }
  void note(const std::string& kind, const Body& data) {
    demand(store->commit([&](Change& change) { change.add_entry(kind, "Maren Quill", data); }));
  }
  PrunePlan plan(const RetentionRules& rules) {
    Reader reader = store->reader();
    return plan_prune(reader, rules);
  }
  HandClock clock;
  Folder folder;
  std::string path = folder.file("ledger.db");
  SeededEntropy entropy{4};
  std::unique_ptr<Store> store{open(options(path), clock)};
};

TEST_F(RetentionTest, TakesWhatTheRulesSayAndNothingOfAnOpenOrHeldLot) {
  run("AQ20-001-00001", "closed");
  run("AQ20-001-00002", "open");
  run("AQ20-001-00003", "closed, held");
  run("AQ20-001-00004", "never opened");
  run("AQ20-001-00005", "");
  run("AQ20-001-00006", "closed");
  for (const char* lot : {"closed", "open", "closed, held"}) note("lot_opened", Body::Object{{"lot", lot}});
  for (const char* lot : {"closed", "closed, held"}) note("lot_closed", Body::Object{{"lot", lot}});
  note("hold", Body::Object{{"name", "closed, held"}, {"reason", "x"}, {"subject", "lot"}});
  note("hold", Body::Object{{"name", "AQ20-001-00006"}, {"reason", "x"}, {"subject", "serial"}});
  note("hold", Body::Object{{"name", "AQ20-001-00005"}, {"reason", "x"}, {"subject", "serial"}});
  note("hold_released", Body::Object{{"name", "AQ20-001-00005"}, {"reason", "y"}, {"subject", "serial"}});
  const RetentionRules now{clock.now, 0};
  clock.now.microseconds += 1'000'000'000;
  run("AQ20-001-00007", "");

  const PrunePlan told = plan(now);
  EXPECT_EQ(told.runs, 2) << "00001 and 00005";
  EXPECT_EQ(told.in_period, 1);
  EXPECT_EQ(told.lot_open, 2) << "a lot that no entry closed counts as open";
  EXPECT_EQ(told.held, 2);
  ASSERT_EQ(told.captures.size(), 2u);

  EXPECT_EQ(prune(*store, told, "Piet Hallgrim", "record period is over").value(), 2);
  EXPECT_TRUE(plan(now).captures.empty());
  EXPECT_TRUE(verify(path)->ok());
  Reader reader = store->reader();
  EXPECT_EQ(capture_bytes(reader, told.captures[0]).error().id, "capture_pruned");
  // A hold on a document of the runs keeps all of them.
  note("hold", Body::Object{{"name", "PH-07"}, {"reason", "x"}, {"subject", "document"}});
  clock.now.microseconds += 1'000'000'000;
  const PrunePlan later = plan({clock.now, 0});
  EXPECT_EQ(later.held, 3);
  EXPECT_TRUE(later.captures.empty());
}

TEST_F(RetentionTest, OneInNIsChosenByTheSerialAlone) {
  int kept = 0;
  for (int i = 0; i < 10000; ++i) kept += is_kept("AQ20-048-" + std::to_string(10000 + i), 20);
  EXPECT_NEAR(kept, 500, 100) << "4.6 standard deviations of a binomial count";
  EXPECT_FALSE(is_kept("AQ20-048-00001", 0));
  EXPECT_TRUE(is_kept("AQ20-048-00001", 1));
  // By coreutils and python3: int("$(printf AQ20-048-00007 | sha256sum | head -c 16)", 16) % n
  EXPECT_TRUE(is_kept("AQ20-048-00007", 2));
  EXPECT_FALSE(is_kept("AQ20-048-00007", 3));
  EXPECT_TRUE(is_kept("AQ20-048-00007", 4));
  EXPECT_TRUE(is_kept("AQ20-048-00007", 5));
  run("AQ20-001-00001", "");
  run("AQ20-001-00002", "");
  EXPECT_EQ(plan({{clock.now.microseconds + 1}, 1}).chosen, 2);
}

TEST_F(RetentionTest, GivesTheSpaceBack) {
  for (int i = 0; i < 60; ++i) run("AQ20-001-" + std::to_string(i), "");
  store.reset();
  store = open(options(path), clock);
  const auto before = fs::file_size(path);
  ASSERT_TRUE(prune(*store, plan({clock.now, 0}), "Piet Hallgrim", "over"));
  store.reset();
  EXPECT_LT(fs::file_size(path), before * 9 / 10);
  EXPECT_TRUE(verify(path)->ok());
}

// One small ledger of each released layout stays in the tree as it was written then.
class ReleasedLayout : public testing::TestWithParam<std::int64_t> {};

TEST_P(ReleasedLayout, IsReadVerifiedAndBroughtUpToDate) {
  HandClock clock;
  Folder folder;
  const std::string path = folder.file("ledger.db"), step = std::to_string(GetParam());
  fs::copy_file(PW_SOURCE_DIR "/tests/db/released/step_" + step + ".db", path);
  fs::permissions(path, fs::perms::owner_write, fs::perm_options::add);
  const auto before = verify(path).value();
  EXPECT_TRUE(before.ok()) << altered_problem(path, before.first_fault.value_or(Fault{})).text();
  {
    auto reader = Reader::open(path).value();
    EXPECT_EQ(runs_of_serial(reader, "AQ20-048-00001").at(0).closing->verdict, "pass");
    EXPECT_EQ(reader.connection().ask("PRAGMA user_version"), step);
  }
  StoreOptions how = options(path);
  how.lease = false;
  if (GetParam() < newest_step)
    EXPECT_EQ(Store::open(how, clock).error().id, "ledger_older") << "a passing command leaves the layout alone";
  SeededEntropy entropy(2);
  {
    auto store = open(options(path), clock);
    whole_run(*store, "AQ20-048-00009", entropy);
    Reader reader = store->reader();
    const auto steps = entries(reader, 1, 999, "layout_step");
    ASSERT_EQ(steps.size(), GetParam() < newest_step ? 1u : 0u);
  }
  VerifyOptions with;
  with.printed = before.seal;
  const auto after = verify(path, with).value();
  EXPECT_TRUE(after.ok()) << altered_problem(path, after.first_fault.value_or(Fault{})).text();
  EXPECT_EQ(after.runs, before.runs + 1);
  // Everything that was there is there as it was, and the layout is that of a new ledger.
  Connection connection(path, Access::read_only);
  EXPECT_EQ(schema_difference(connection).what, "");
}

INSTANTIATE_TEST_SUITE_P(Steps, ReleasedLayout, testing::Range<std::int64_t>(1, newest_step + 1));

}  // namespace
}  // namespace probewright::db
