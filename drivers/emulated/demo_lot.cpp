#include "drivers/emulated/demo_lot.h"

#include <algorithm>
#include <stdexcept>

#include "drivers/emulated/deviates.h"
#include "drivers/emulated/probe.h"

namespace probewright::emulated {
namespace {

constexpr std::size_t block = 48;

std::size_t below(std::size_t end, Deviates& deviates) {
  return std::min(static_cast<std::size_t>(deviates.uniform() * static_cast<double>(end)), end - 1);
}

/// Fisher and Yates.
template <class T>
void shuffle(std::vector<T>& items, Deviates& deviates) {
  for (std::size_t i = items.size(); i > 1; --i) std::swap(items[i - 1], items[below(i, deviates)]);
}

/// One fault of each cause.
std::vector<ProbeFault> one_of_each(Deviates& deviates) {
  std::vector<ProbeFault> chosen;
  const auto faults = all_faults();
  for (std::size_t i = 0; i < faults.size();) {
    std::size_t end = i;
    while (end < faults.size() && cause_of(faults[end]) == cause_of(faults[i])) ++end;
    chosen.push_back(faults[i + (end - i > 1 ? below(end - i, deviates) : 0)]);
    i = end;
  }
  return chosen;
}

std::string padded(std::size_t number, std::size_t digits) {
  const std::string text = std::to_string(number);
  return std::string(digits - std::min(digits, text.size()), '0') + text;
}

std::string serial_of(std::string_view model, int lot, std::size_t number) {
  std::string prefix(model);
  std::erase(prefix, '-');
  return prefix + "-" + padded(static_cast<std::size_t>(lot), 3) + "-" + padded(number, 5);
}

void plant(std::vector<LotPiece>& pieces, std::size_t first, std::size_t count, Deviates& deviates) {
  std::vector<ProbeFault> faults = one_of_each(deviates);
  shuffle(faults, deviates);
  faults.resize(faults.size() * count / block);
  std::vector<std::size_t> places(count);
  for (std::size_t i = 0; i < count; ++i) places[i] = first + i;
  shuffle(places, deviates);
  for (std::size_t i = 0; i < faults.size(); ++i) pieces[places[i]].fault = PlantedFault{faults[i], 1.0};
}

}  // namespace

std::vector<LotPiece> demo_lot(std::string_view model, int lot, int count, std::uint64_t seed) {
  if (!knows_model(model) || lot < 0 || lot > 999 || count < 0 || count > 99999) {
    throw std::invalid_argument("no such lot");
  }
  std::vector<LotPiece> pieces;
  for (std::size_t i = 1; i <= static_cast<std::size_t>(count); ++i) {
    pieces.push_back({serial_of(model, lot, i), std::string(model), std::nullopt});
  }
  Deviates deviates(named_seed(seed, "lot " + std::string(model) + " " + std::to_string(lot)));
  for (std::size_t first = 0; first < pieces.size(); first += block) {
    plant(pieces, first, std::min(block, pieces.size() - first), deviates);
  }
  return pieces;
}

std::map<std::string, Truth> truths_of(std::span<const LotPiece> pieces, std::uint64_t seed) {
  std::map<std::string, Truth> truths;
  for (const LotPiece& piece : pieces) {
    Probe probe = draw_probe(seed, piece.serial, piece.model);
    if (piece.fault) probe = with_fault(std::move(probe), *piece.fault, seed);
    truths.emplace(piece.serial, truth_of(probe));
  }
  return truths;
}

}  // namespace probewright::emulated
