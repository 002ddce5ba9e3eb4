#pragma once
#include <cstdint>
#include <string>
#include <vector>

// The baseline of durable runs: the same rows with nothing but SQLite's own calls.
namespace probewright::speed {

/// Copies every row of the ledger `from`, table by table within each group of entries, into the new database `to`: same
/// layout with its triggers and indexes, same journal and sync modes, one transaction for each group. `ends` are the
/// last entries of the groups. Rows are read and bound values kept in memory before the clocks start.
struct BareTime {
  double wall_s = 0.0, cpu_s = 0.0;
};
BareTime write_bare(const std::string& from, const std::string& to, const std::vector<std::int64_t>& ends);

}  // namespace probewright::speed
