// What a group costs: figures are printed, not judged (they depend on the disk); that nothing is lost is judged.
#include <gtest/gtest.h>

#include <chrono>
#include <cstdio>

#include "db/verify.h"
#include "sample.h"

namespace probewright::db {
namespace {

using namespace sample;

/// Whole runs in groups of `size` runs a commit; returns runs a second.
double runs_per_second(std::size_t size, int runs) {
  Folder folder;
  HandClock clock;
  SeededEntropy entropy(1);
  const std::string path = folder.file("ledger.db");
  auto store = open(options(path), clock);
  demand(store->commit(add_documents));
  const auto start = std::chrono::steady_clock::now();
  for (int done = 0; done < runs; done += static_cast<int>(size)) {
    std::vector<Store::Job> jobs;
    for (std::size_t i = 0; i < size; ++i)
      jobs.push_back([&](Change& change) {
        const RunId run = change.open_run(opening("AQ20-048-" + std::to_string(change.seal().entry)));
        change.add_capture(run, "pulses", "1p0", wave(entropy, 10000));
        change.add_readings(run, readings(entropy));
        change.close_run(closing(run, "pass"));
      });
    for (const auto& outcome : store->commit_group(jobs)) demand(outcome);
  }
  const double seconds = std::chrono::duration<double>(std::chrono::steady_clock::now() - start).count();
  store.reset();
  const auto report = verify(path).value();
  EXPECT_TRUE(report.ok());
  EXPECT_GE(report.runs, runs);
  return static_cast<double>(report.runs) / seconds;
}

TEST(GroupCommit, Figures) {
  for (const std::size_t size : {1u, 4u, 16u})
    std::printf("%2zu whole runs a commit (7 readings, 20 kB captured each): %.0f runs a second\n", size,
                runs_per_second(size, 64));
}

}  // namespace
}  // namespace probewright::db
