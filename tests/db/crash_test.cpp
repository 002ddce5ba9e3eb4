// A machine that stops at any write, a disk that fails at any write, sync or truncation: what was told as committed is
// there at the next start, the chain verifies, no run is half there.
#include <gtest/gtest.h>
#include <sys/wait.h>
#include <unistd.h>

#include <csignal>
#include <functional>

#include "db/memory_vfs.h"
#include "db/queries/open_runs.h"
#include "db/queries/runs_of_serial.h"
#include "db/queries/seal.h"
#include "db/verify.h"
#include "sample.h"

namespace probewright::db {
namespace {

using namespace sample;

constexpr std::size_t readings_of_run = 7, captures_of_run = 2;

StoreOptions on(const MemoryVfs& vfs) {
  auto with = options("ledger.db");
  with.vfs = vfs.name();
  with.exclusive = true;
  with.lease = false;
  with.checkpoint_pages = 16;  // so that the log is copied into the file in the midst of it
  return with;
}

/// What the store said is on the disk.
struct Told {
  std::vector<Seal> seals;
  std::vector<std::string> closed;  ///< serials
};

/// Runs until done or until the store has trouble. Serials are numbered from `first`.
void work(MemoryDisk& disk, Told& told, int runs, int first = 1) {
  MemoryVfs vfs(disk, "work");
  HandClock clock;
  auto opened = Store::open(on(vfs), clock);
  if (!opened) return;
  Store& store = **opened;
  told.seals.push_back(store.seal());
  SeededEntropy entropy(static_cast<std::uint64_t>(first));
  for (int i = first; i < first + runs; ++i) {
    const std::string serial = "AQ20-048-" + std::to_string(i);
    RunId run;
    const Store::Job steps[] = {[&](Change& change) { add_documents(change), run = change.open_run(opening(serial)); },
                                [&](Change& change) {
                                  change.add_capture(run, "spectrum_red", "", wave(entropy, 300));
                                  change.add_capture(run, "pulses", "1p0", wave(entropy, 4000));
                                  change.add_readings(run, readings(entropy));
                                },
                                [&](Change& change) { change.close_run(closing(run, "pass")); }};
    for (const Store::Job& step : steps) {
      const auto outcome = store.commit(step);
      ASSERT_EQ(outcome.has_value(), !store.trouble().has_value()) << "no job of these is refused";
      if (!outcome) return;
      told.seals.push_back(store.seal());
    }
    told.closed.push_back(serial);
  }
}

/// A ledger that was begun and closed, so that each trial need not begin one.
const Bytes& begun() {
  static const Bytes image = [] {
    MemoryDisk disk;
    Told told;
    work(disk, told, 0);
    return disk.content("ledger.db");
  }();
  return image;
}

std::unique_ptr<MemoryDisk> begun_disk(const DiskFaults& faults = {}) {
  auto disk = std::make_unique<MemoryDisk>();
  disk->put("ledger.db", begun());
  disk->set_faults(faults);
  return disk;
}

void expect_whole(const RunRecord& run) {
  EXPECT_EQ(run.readings.size(), run.captures.size() == captures_of_run ? readings_of_run : 0u);
  if (run.closing) EXPECT_EQ(run.readings.size(), readings_of_run);
}

/// Opens the disk as the next start does, and checks what must hold.
void expect_sound(MemoryDisk& disk, const Told& told, const std::string& story) {
  SCOPED_TRACE(story);
  MemoryVfs vfs(disk, "look");
  HandClock clock;
  {
    auto opened = Store::open(on(vfs), clock);
    ASSERT_TRUE(opened) << opened.error().text();
    Reader reader = (*opened)->reader();
    EXPECT_EQ(reader.connection().ask("PRAGMA auto_vacuum"), "2");
    for (const Seal& seal : told.seals)
      ASSERT_TRUE(seal_at(reader, seal.entry) == seal) << "told as committed, now missing: entry " << seal.entry;
    for (const std::string& serial : told.closed) {
      const auto runs = runs_of_serial(reader, serial);
      ASSERT_EQ(runs.size(), 1u) << serial;
      EXPECT_TRUE(runs[0].closing) << serial;
      expect_whole(runs[0]);
    }
    for (const OpenRun& open : open_runs(reader)) expect_whole(*run_record(reader, open.run));
  }
  VerifyOptions look;
  look.vfs = vfs.name();
  look.exclusive = true;
  if (!told.seals.empty()) look.printed = told.seals.back();
  const auto report = verify("ledger.db", look);
  ASSERT_TRUE(report) << report.error().text();
  EXPECT_TRUE(report->ok()) << canonical(report_body(*report));
}

DiskCounts count_calls(MemoryDisk& disk, int runs) {
  Told told;
  work(disk, told, runs);
  EXPECT_EQ(told.closed.size(), static_cast<std::size_t>(runs));
  return disk.counts();
}

TEST(Crash, TheModelLosesWhatWasNotSynced) {
  MemoryDisk disk;
  Told told;
  work(disk, told, 1);
  const DiskCounts counts = disk.counts();
  EXPECT_GT(counts.writes, 30);
  EXPECT_GT(counts.syncs, 4);
  int lost = 0;
  for (std::int64_t at = 1; at < counts.operations(); at += 5) {
    MemoryDisk stopped;
    DiskFaults faults;
    faults.die_at = at;
    stopped.set_faults(faults);
    Told ignored;
    work(stopped, ignored, 1);
    const auto survivor = stopped.after_crash(static_cast<std::uint64_t>(at));
    lost += survivor->content("ledger.db-wal") != stopped.content("ledger.db-wal") ||
            survivor->content("ledger.db") != stopped.content("ledger.db");
  }
  EXPECT_GT(lost, 10) << "a model that loses nothing shows nothing";
}

void stop_at_each(bool with_begin, int runs) {
  const auto start = [&](const DiskFaults& faults) {
    if (!with_begin) return begun_disk(faults);
    auto disk = std::make_unique<MemoryDisk>();
    disk->set_faults(faults);
    return disk;
  };
  const std::int64_t operations = count_calls(*start({}), runs).operations();
  for (std::int64_t at = 1; at <= operations && !testing::Test::HasFatalFailure(); ++at) {
    DiskFaults faults;
    faults.die_at = at;
    const auto disk = start(faults);
    Told told;
    work(*disk, told, runs);
    const auto survivor = disk->after_crash(static_cast<std::uint64_t>(at));
    expect_sound(*survivor, told, "stopped at operation " + std::to_string(at));
  }
  std::printf("stopped at each of %lld operations\n", static_cast<long long>(operations));
}

TEST(Crash, StoppedAtEveryOperationWhileALedgerBegins) { stop_at_each(true, 0); }

TEST(Crash, StoppedAtEveryOperationOfTwoRuns) { stop_at_each(false, 2); }

/// Fails one call in turn, works until the store says trouble, starts again on the same machine, works on, and then the
/// power goes: all that was told, before and after, is there.
void fail_each(std::int64_t calls, std::int64_t DiskFaults::*which, bool from_then_on, const std::string& name) {
  int troubled = 0;
  for (std::int64_t at = 1; at <= calls && !testing::Test::HasFatalFailure(); ++at) {
    DiskFaults faults;
    faults.*which = at;
    faults.from_then_on = from_then_on;
    const auto disk = begun_disk(faults);
    Told told;
    work(*disk, told, 1);
    troubled += told.closed.empty();
    const auto again = disk->after_restart();
    Told later;
    work(*again, later, 1, 100);
    ASSERT_EQ(later.closed.size(), 1u) << name << " " << at;
    told.seals.insert(told.seals.end(), later.seals.begin(), later.seals.end());
    told.closed.insert(told.closed.end(), later.closed.begin(), later.closed.end());
    const auto survivor = again->after_crash(static_cast<std::uint64_t>(at));
    expect_sound(*survivor, told, name + " " + std::to_string(at));
  }
  EXPECT_GT(troubled, 0);
  std::printf("%s: %lld calls failed in turn, %d ended in trouble\n", name.c_str(), static_cast<long long>(calls),
              troubled);
}

DiskCounts calls_of_one_run() { return count_calls(*begun_disk(), 1); }

TEST(Crash, EachWriteFailing) { fail_each(calls_of_one_run().writes, &DiskFaults::fail_write, false, "write failing"); }

TEST(Crash, EachWriteFailingFromThenOn) {
  fail_each(calls_of_one_run().writes, &DiskFaults::fail_write, true, "every write failing from");
}

TEST(Crash, EachWriteCutShort) {
  fail_each(calls_of_one_run().writes, &DiskFaults::short_write, false, "write cut short");
}

TEST(Crash, EachSyncFailing) {
  fail_each(calls_of_one_run().syncs, &DiskFaults::fail_sync, false, "sync failing");
  fail_each(calls_of_one_run().syncs, &DiskFaults::fail_sync, true, "every sync failing from");
}

TEST(Crash, EachCallFailingWhileALedgerBegins) {
  MemoryDisk whole;
  const DiskCounts calls = count_calls(whole, 0);
  const auto begin_with = [](std::int64_t DiskFaults::*which, std::int64_t at) {
    DiskFaults faults;
    faults.*which = at;
    MemoryDisk disk;
    disk.set_faults(faults);
    Told told;
    work(disk, told, 0);
    const auto again = disk.after_restart();
    work(*again, told, 0);
    ASSERT_FALSE(told.seals.empty()) << "call " << at;
    const auto survivor = again->after_crash(static_cast<std::uint64_t>(at));
    expect_sound(*survivor, told, "call " + std::to_string(at) + " failed");
  };
  for (std::int64_t at = 1; at <= calls.writes && !HasFatalFailure(); ++at) begin_with(&DiskFaults::fail_write, at);
  for (std::int64_t at = 1; at <= calls.syncs && !HasFatalFailure(); ++at) begin_with(&DiskFaults::fail_sync, at);
}

// A log that could be read but was no longer going to be saved was copied into the file; the power went in the midst of
// it, and the file was torn with no log to mend it. The next start writes such a log again first.
TEST(Crash, TheNextStartAfterAFailedSyncStoppedAtEachOperation) {
  const std::int64_t syncs = calls_of_one_run().syncs;
  int stops = 0;
  for (std::int64_t sync = 1; sync <= syncs && !HasFatalFailure(); ++sync) {
    DiskFaults faults;
    faults.fail_sync = sync;
    faults.from_then_on = true;  // so that closing cannot clear the log away either
    const auto disk = begun_disk(faults);
    Told told;
    work(*disk, told, 1);
    for (std::int64_t at = 1; !HasFatalFailure(); ++at, ++stops) {
      const auto again = disk->after_restart();
      DiskFaults stop;
      stop.die_at = at;
      again->set_faults(stop);
      Told ignored;
      work(*again, ignored, 0);
      if (!again->dead()) break;
      const auto survivor = again->after_crash(static_cast<std::uint64_t>(sync * 1000 + at));
      expect_sound(*survivor, told,
                   "sync " + std::to_string(sync) + " failed, next start stopped at " + std::to_string(at));
    }
  }
  std::printf("%lld syncs failed in turn, the next start stopped at %d operations\n", static_cast<long long>(syncs),
              stops);
}

TEST(Crash, ADiskThatIsFullAtEachSize) {
  int full = 0;
  for (auto size = static_cast<std::int64_t>(begun().size());; size += 4096 + 512) {
    DiskFaults faults;
    faults.full_at = size;
    const auto disk = begun_disk(faults);
    Told told;
    work(*disk, told, 2);
    if (told.closed.size() == 2 || HasFatalFailure()) break;
    ++full;
    const auto survivor = disk->after_restart();
    expect_sound(*survivor, told, "disk full at " + std::to_string(size));
  }
  EXPECT_GT(full, 10);
}

// On real files: the process is killed with its log beside the file, the next one takes over lease and log.
TEST(Crash, AKilledProcessLeavesWhatItToldAndNoLease) {
  Folder folder;
  const std::string path = folder.file("ledger.db");
  int ends[2];
  ASSERT_EQ(pipe(ends), 0);
  const pid_t child = fork();
  if (child == 0) {
    HandClock clock;
    auto store = open(options(path), clock);
    SeededEntropy entropy(2);
    for (const char* serial : {"AQ20-048-00001", "AQ20-048-00003", "AQ20-048-00004"})
      whole_run(*store, serial, entropy);
    demand(store->commit([](Change& change) { change.open_run(opening("AQ20-048-00002")); }));
    const Seal seal = store->seal();
    if (write(ends[1], &seal, sizeof seal) == static_cast<ssize_t>(sizeof seal)) ::kill(getpid(), SIGKILL);
    _exit(1);
  }
  ASSERT_GT(child, 0);
  Seal told;
  ASSERT_EQ(read(ends[0], &told, sizeof told), static_cast<ssize_t>(sizeof told));
  close(ends[0]), close(ends[1]);
  int status = 0;
  ASSERT_EQ(waitpid(child, &status, 0), child);
  EXPECT_TRUE(WIFSIGNALED(status));
  // A log of more than 128 KiB could not be written again at first: SQLite's own VFS writes at most so much at once.
  ASSERT_GT(std::filesystem::file_size(path + "-wal"), 131072u);
  {
    HandClock clock;
    auto store = open(options(path), clock);
    EXPECT_EQ(store->seal(), told);
    Reader reader = store->reader();
    ASSERT_EQ(open_runs(reader).size(), 1u);
    EXPECT_EQ(open_runs(reader)[0].serial, "AQ20-048-00002");
  }
  VerifyOptions look;
  look.printed = told;
  EXPECT_TRUE(verify(path, look)->ok());
}

TEST(Crash, AStoreWithTroubleTakesNothingMore) {
  MemoryDisk disk;
  MemoryVfs vfs(disk, "trouble");
  HandClock clock;
  auto store = open(on(vfs), clock);
  DiskFaults faults;
  faults.fail_sync = 1;
  disk.set_faults(faults);
  const Store::Job job = [](Change& change) { change.add_entry("cleaning", "Imre Vasko", Body::Object{}); };
  const std::vector<Store::Job> jobs{job, job};
  const auto outcomes = store->commit_group(jobs);
  ASSERT_EQ(outcomes.size(), 2u);
  EXPECT_EQ(outcomes[0].error().id, "ledger_io");
  EXPECT_EQ(outcomes[1].error().id, "ledger_io");
  EXPECT_EQ(outcomes[1].error().kind(), ProblemKind::ledger_trouble);
  EXPECT_TRUE(store->trouble());
  EXPECT_EQ(store->commit(job).error().id, "ledger_failed")
      << "the disk works again, the store does not know what is on it";
  store.reset();
  store = open(on(vfs), clock);
  EXPECT_TRUE(store->commit(job));
}

TEST(Crash, TheSameSeedGivesTheSameSealAndTheSameFiles) {
  const auto once = [](std::uint64_t seed) {
    MemoryDisk disk;
    MemoryVfs vfs(disk, "seeded", seed);
    HandClock clock;
    SeededEntropy entropy(seed);
    auto store = open(on(vfs), clock);
    whole_run(*store, "AQ20-048-00001", entropy);
    const Seal seal = store->seal();
    store.reset();  // copies the log into the file
    return std::pair{seal, disk.content("ledger.db")};
  };
  const auto first = once(1);
  EXPECT_TRUE(first == once(1));
  EXPECT_FALSE(first.first == once(2).first);
}

TEST(Crash, ASecondConnectionIsKeptOutWhileTheFirstHoldsTheFile) {
  MemoryDisk disk;
  MemoryVfs vfs(disk, "alone");
  HandClock clock;
  auto store = open(on(vfs), clock);
  auto second = on(vfs);
  second.wait_for_locks_ms = 0;
  EXPECT_EQ(Store::open(second, clock).error().id, "ledger_locked");
}

}  // namespace
}  // namespace probewright::db
