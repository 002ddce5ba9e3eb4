#pragma once
#include <cstdint>
#include <optional>
#include <vector>

#include "db/memory_vfs.h"
#include "drivers/emulated/scenario.h"
#include "station/sequence/production/emulated_operator.h"

// What goes wrong in a shift, drawn from a seed.
namespace probewright::faults {

/// From one start of the station to its end.
struct Life {
  db::DiskFaults disk;
  bool power_lost = false;            ///< how it ends: what was not synced may be gone; else the process is killed
  std::optional<double> killed_at_s;  ///< device seconds; empty: it lives as long as it can
  std::optional<double> step_at_s;    ///< the machine's clock is set then ...
  double step_by_s = 0.0;             ///< ... by so much
};

/// A shift: two nests, a lot of probes, one person. The last life has nothing in it that ends it.
struct ShiftPlan {
  std::uint64_t seed = 1;
  int nests = 2;
  std::vector<sequence::production::Piece> pieces;
  sequence::production::MistakePlan mistakes;
  emulated::Scenario scenario;
  std::vector<Life> lives;
};

/// The shift of a seed; `scenario` instead of the one that would be drawn.
ShiftPlan drawn_shift(std::uint64_t seed, const std::optional<emulated::Scenario>& scenario = {}, int probes = 6);

/// "byte_lost in nest 1 at 3.2 s; disk: the 40th write fails; ...": what the plan holds, for a report.
std::string words_of(const ShiftPlan& plan);

}  // namespace probewright::faults
