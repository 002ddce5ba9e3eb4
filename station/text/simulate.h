#pragma once
#include <cstdint>
#include <string>

#include "station/sequence/production/simulation.h"
#include "station/text/choices.h"
#include "station/text/console.h"

namespace probewright::text {

struct SimulateOptions {
  StationChoice choice;
  std::string sheet;                                   ///< file; empty: the configuration's sheet of the model
  std::string model;                                   ///< name; empty: the sheet's, or the only one
  std::string faults = "none";                         ///< "none", "lot", or a number from 0 to 1
  sequence::production::SimulationOptions simulation;  ///< but for the faults
};
/// `simulate`: what a sheet does to probes and stations drawn from assumed spreads: yield, false accepts and rejects.
/// Shows how far it is; SIGINT and SIGTERM end it early, with what there is until then.
/// Exit status: 0 (also when it was stopped), 2 refused input, 3 no run came to its end.
int simulate(const SimulateOptions& options, Console& console);

}  // namespace probewright::text
