// How fast the ledger is, each figure beside a named baseline measured in the same run:
//   ledger_speed FOLDER [RUNS]     RUNS: 100000 unless told; FOLDER is made, and kept for a look
#include <sqlite3.h>
#include <sys/resource.h>

#include <algorithm>
#include <chrono>
#include <cstdio>
#include <filesystem>

#include "db/verify.h"
#include "station/base/numbers.h"
#include "station/trace/history.h"
#include "tests/speed/bare_rows.h"
#include "tests/speed/made_ledger.h"

namespace probewright::speed {
namespace {

namespace fs = std::filesystem;
using Clock = std::chrono::steady_clock;

double since(Clock::time_point begin) { return std::chrono::duration<double>(Clock::now() - begin).count(); }

/// Processor time so far: on a busy machine it says more than the clock on the wall. `of` RUSAGE_SELF or
/// RUSAGE_CHILDREN.
double cpu_s(int of = RUSAGE_SELF) {
  rusage used{};
  getrusage(of, &used);
  return static_cast<double>(used.ru_utime.tv_sec + used.ru_stime.tv_sec) +
         1e-6 * static_cast<double>(used.ru_utime.tv_usec + used.ru_stime.tv_usec);
}

void say(const std::string& line) { std::printf("%s\n", line.c_str()), std::fflush(stdout); }

bool verdict(bool good, const std::string& line) { return say((good ? "  within: " : "  MISSED: ") + line), good; }

void make(const std::string& path, std::int64_t runs) {
  const CountedClock clock;
  const auto begin = Clock::now();
  auto store = db::Store::open(store_options(path), clock).value();
  std::int64_t made = 0;
  make_runs(*store, {runs, 100, 10000}, [&](std::int64_t more) {
    made += more;
    if (made % 100000 == 0) say("    " + std::to_string(made) + " runs after " + fixed(since(begin), 0) + " s");
  });
  store.reset();
  say("made " + std::to_string(runs) + " runs of 40 readings, " +
      fixed(static_cast<double>(fs::file_size(path)) / 1e9, 2) + " GB, in " + fixed(since(begin), 1) + " s");
}

/// Sorted times in ms.
double percentile(std::vector<double> times, double part) {
  std::sort(times.begin(), times.end());
  return times[static_cast<std::size_t>(part * static_cast<double>(times.size() - 1))];
}

/// The rows of one serial by SQLite's own calls: what any reader has to fetch.
std::int64_t plain_life(sqlite3_stmt* runs, sqlite3_stmt* readings, const std::string& serial) {
  std::int64_t rows = 0;
  sqlite3_bind_text(runs, 1, serial.c_str(), -1, SQLITE_TRANSIENT);
  while (sqlite3_step(runs) == SQLITE_ROW) {
    sqlite3_bind_int64(readings, 1, sqlite3_column_int64(runs, 0));
    while (sqlite3_step(readings) == SQLITE_ROW) rows += sqlite3_column_bytes(readings, 2) > 0;
    sqlite3_reset(readings);
  }
  sqlite3_reset(runs);
  return rows;
}

bool life_of_serials(const std::string& path, std::int64_t runs) {
  constexpr int asked = 2000;
  SeededEntropy entropy(3);
  auto reader = db::Reader::open(path).value();
  sqlite3* db = nullptr;
  sqlite3_open_v2(path.c_str(), &db, SQLITE_OPEN_READONLY, nullptr);
  sqlite3_stmt *of_serial = nullptr, *of_run = nullptr;
  sqlite3_prepare_v2(db, "SELECT * FROM run WHERE serial = ?", -1, &of_serial, nullptr);
  sqlite3_prepare_v2(db, "SELECT * FROM reading WHERE run = ?", -1, &of_run, nullptr);
  std::vector<double> ours, plain;
  std::int64_t found = 0;
  for (int i = 0; i < asked; ++i) {
    const auto draw = [&] {
      return serial_of(static_cast<std::int64_t>(entropy.next() % static_cast<std::uint64_t>(runs)));
    };
    const std::string first = draw(), second = draw();  // each asked once, so that neither warms the other's pages
    auto begin = Clock::now();
    found += static_cast<std::int64_t>(trace::history_of(reader, first).runs.size());
    ours.push_back(1e3 * since(begin));
    begin = Clock::now();
    found += plain_life(of_serial, of_run, second) > 0;
    plain.push_back(1e3 * since(begin));
  }
  sqlite3_finalize(of_serial);
  sqlite3_finalize(of_run);
  sqlite3_close(db);
  say("life of a serial: median " + fixed(percentile(ours, 0.5), 3) + " ms, p99 " + fixed(percentile(ours, 0.99), 3) +
      " ms; baseline, plain SELECTs by the C calls: median " + fixed(percentile(plain, 0.5), 3) + " ms, p99 " +
      fixed(percentile(plain, 0.99), 3) + " ms; ratio of medians " +
      fixed(percentile(ours, 0.5) / percentile(plain, 0.5), 2));
  return verdict(percentile(ours, 0.99) < 5.0 && found > asked, "p99 below 5 ms");
}

bool opening(const std::string& path) {
  const SystemClock clock;
  std::vector<double> ours, plain;
  for (int i = 0; i < 9; ++i) {
    auto begin = Clock::now();
    db::StoreOptions options = store_options(path);
    auto store = db::Store::open(options, clock).value();
    ours.push_back(1e3 * since(begin));
    store.reset();
    begin = Clock::now();
    sqlite3* db = nullptr;
    sqlite3_open(path.c_str(), &db);
    sqlite3_exec(db, "PRAGMA synchronous=FULL; BEGIN IMMEDIATE; SELECT max(number) FROM entry; COMMIT", nullptr,
                 nullptr, nullptr);
    sqlite3_close(db);
    plain.push_back(1e3 * since(begin));
  }
  say("opening for writing (layout, newest 100 entries, their runs): median " + fixed(percentile(ours, 0.5), 1) +
      " ms; baseline, sqlite3_open and one look: " + fixed(percentile(plain, 0.5), 1) + " ms; ratio " +
      fixed(percentile(ours, 0.5) / percentile(plain, 0.5), 1));
  return verdict(percentile(ours, 0.5) < 100.0, "below 100 ms");
}

bool verifying(const std::string& path) {
  // The file once through the page cache, so that neither pays for the disk alone.
  const std::string warm = "cat '" + path + "' > /dev/null", sum = "sha256sum '" + path + "' > /dev/null";
  if (std::system(warm.c_str()) != 0) return false;
  auto begin = Clock::now();
  const double sum_cpu_before = cpu_s(RUSAGE_CHILDREN);
  if (std::system(sum.c_str()) != 0) return false;
  const double baseline = since(begin), sum_cpu = cpu_s(RUSAGE_CHILDREN) - sum_cpu_before;
  begin = Clock::now();
  const double cpu_before = cpu_s();
  const auto report = db::verify(path).value();
  const double ours = since(begin), ours_cpu = cpu_s() - cpu_before;
  say("verify on two threads: " + fixed(ours, 2) + " s (" + fixed(ours_cpu, 2) + " s of CPU), " +
      std::to_string(report.readings) + " readings; baseline, stock sha256sum over the file: " + fixed(baseline, 2) +
      " s (" + fixed(sum_cpu, 2) + " s of CPU); ratio " + fixed(ours / baseline, 2) + ", of half the CPU " +
      fixed(0.5 * ours_cpu / sum_cpu, 2));
  return verdict(report.ok() && ours <= 0.8 * baseline, "all agrees, at most 0.8 of sha256sum");
}

bool durable(const std::string& folder, int group, std::int64_t runs) {
  const std::string ours_path = folder + "/durable-" + std::to_string(group) + ".db",
                    bare_path = folder + "/bare-" + std::to_string(group) + ".db";
  const CountedClock clock;
  std::vector<std::int64_t> ends;
  double ours = 0.0, ours_cpu = 0.0;
  {
    auto store = db::Store::open(store_options(ours_path), clock).value();
    make_runs(*store, {50, 0, 50}, [](std::int64_t) {});  // statements prepared, file grown a little
    ends.push_back(store->seal().entry);
    const double cpu_before = cpu_s();
    auto begin = Clock::now();
    make_runs(*store, {runs, 0, group}, [&](std::int64_t) { ends.push_back(store->seal().entry); });
    ours = since(begin);
    ours_cpu = cpu_s() - cpu_before;
  }
  const BareTime bare = write_bare(ours_path, bare_path, ends);
  const double ours_rate = static_cast<double>(runs) / ours, bare_rate = static_cast<double>(runs + 50) / bare.wall_s;
  const double cpu_ratio = (bare.cpu_s / static_cast<double>(runs + 50)) / (ours_cpu / static_cast<double>(runs));
  say("durable runs, " + std::to_string(group) + " a commit: " + fixed(ours_rate, 0) +
      " a second; baseline, bare SQLite calls with the same rows, layout and grouping: " + fixed(bare_rate, 0) +
      "; ratio " + fixed(ours_rate / bare_rate, 2) + ", by CPU " + fixed(cpu_ratio, 2));
  return verdict(ours_rate >= 0.7 * bare_rate, "at least 0.7 of the bare calls");
}

bool all(const std::string& folder, std::int64_t runs) {
  fs::create_directories(folder);
  const std::string path = folder + "/ledger-" + std::to_string(runs) + ".db";
  if (!fs::exists(path)) make(path, runs);
  bool good = opening(path);
  good &= life_of_serials(path, runs);
  good &= verifying(path);
  for (const int group : {1, 4, 16}) good &= durable(folder, group, 160 * group);
  say("CPU in all: " + fixed(cpu_s(), 0) + " s");
  return good;
}

}  // namespace
}  // namespace probewright::speed

int main(int argc, char** argv) {
  const auto runs = argc > 2 ? probewright::parse_integer(argv[2]) : std::optional<long long>{100000};
  if (argc < 2 || !runs || *runs < 1) return std::fprintf(stderr, "ledger_speed FOLDER [RUNS]\n"), 2;
  try {
    return probewright::speed::all(argv[1], *runs) ? 0 : 1;
  } catch (const std::exception& error) {
    return std::fprintf(stderr, "%s\n", error.what()), 3;
  }
}
