#pragma once
#include <cstdint>
#include <map>
#include <optional>
#include <span>
#include <string>
#include <string_view>
#include <vector>

#include "drivers/emulated/probe_fault.h"
#include "drivers/emulated/truth.h"

namespace probewright::emulated {

/// One probe of a lot that is going to be seated.
struct LotPiece {
  std::string serial;
  std::string model;
  std::optional<PlantedFault> fault;
};

/// A lot with faults in it: serials "AQ20-048-00001" and on, `count` of them. Among every 48 there is each
/// cause of all_faults() once, in full severity, at a place and (where a cause has one for each) in an LED drawn from
/// `seed`; what is left over at the end has its share of the causes, rounded down. `lot` is 0 to 999, `count` 0 to
/// 99999, `model` one that the bench knows; else std::invalid_argument.
std::vector<LotPiece> demo_lot(std::string_view model, int lot, int count, std::uint64_t seed);

/// What these pieces really are on a bench with this seed, by serial: the same as a bench tells after seating them.
std::map<std::string, Truth> truths_of(std::span<const LotPiece> pieces, std::uint64_t seed);

}  // namespace probewright::emulated
