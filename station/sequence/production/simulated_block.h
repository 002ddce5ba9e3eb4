#pragma once
#include <map>
#include <optional>
#include <string>
#include <vector>

#include "station/sequence/production/simulation.h"
#include "station/sequence/production/true_values.h"

namespace probewright::sequence::production {

/// What all blocks of a simulation share. Read by any number of threads.
struct BlockPlan {
  SimulatedDocuments documents;
  SimulationOptions options;
  TrueValues values;
  std::vector<std::string> judged;  ///< checks, in the order of the routine

  BlockPlan(const SimulatedDocuments& documents_, const SimulationOptions& options_);
  long long blocks() const { return (options.probes + simulated_block - 1) / simulated_block; }
  int station_of(long long block) const { return static_cast<int>(block % options.stations); }
  double room_degC(int station) const;
};

struct BlockTally {
  ProbeTally all;
  std::vector<CheckTally> checks;    ///< one for each judged check
  std::map<int, ProbeTally> faults;  ///< by the fault's place in the table
  std::optional<Problem> first_void;
};

/// Draws the block's probes, and its station, and tests them. Everything in it hangs on the seed and the block's number
/// alone. Ends early, between two probes, when it is told to stop.
BlockTally run_block(const BlockPlan& plan, long long block, SimulationWatch& watch);

}  // namespace probewright::sequence::production
