#include "station/sequence/production/mistakes.h"

#include <array>

#include "station/base/entropy.h"

namespace probewright::sequence::production {
namespace {

constexpr std::array mistakes{
    Mistake::wrong_nest,
    Mistake::wrong_pattern,
    Mistake::other_lot,
    Mistake::left_in_place,
    Mistake::lid_opened,
    Mistake::scanned_in_test,
    Mistake::scanned_after_verdict,
    Mistake::never_put_in,
    Mistake::unknown_badge,
};

/// 0 to below 1, from the upper 53 bits.
double share(std::uint64_t bits) { return static_cast<double>(bits >> 11) * 0x1.0p-53; }

}  // namespace

std::span<const Mistake> all_mistakes() { return mistakes; }

std::string_view slug(Mistake mistake) {
  switch (mistake) {
    case Mistake::wrong_nest:
      return "wrong_nest";
    case Mistake::wrong_pattern:
      return "wrong_pattern";
    case Mistake::other_lot:
      return "other_lot";
    case Mistake::left_in_place:
      return "left_in_place";
    case Mistake::lid_opened:
      return "lid_opened";
    case Mistake::scanned_in_test:
      return "scanned_in_test";
    case Mistake::scanned_after_verdict:
      return "scanned_after_verdict";
    case Mistake::never_put_in:
      return "never_put_in";
    case Mistake::unknown_badge:
      return "unknown_badge";
  }
  return "";
}

std::optional<Mistake> MistakePlan::at(std::size_t piece) const {
  if (const auto wanted = forced.find(piece); wanted != forced.end()) return wanted->second;
  SeededEntropy entropy{derived_seed(seed, piece)};
  if (!(share(entropy.next()) < rate)) return std::nullopt;
  return mistakes[static_cast<std::size_t>(share(entropy.next()) * static_cast<double>(mistakes.size()))];
}

}  // namespace probewright::sequence::production
