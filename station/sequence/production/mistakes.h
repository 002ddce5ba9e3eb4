#pragma once
#include <cstddef>
#include <cstdint>
#include <map>
#include <optional>
#include <span>
#include <string_view>

namespace probewright::sequence::production {

/// What people do wrong at a line. Each is made with one piece of the work.
enum class Mistake {
  wrong_nest,             ///< puts the probe into another empty nest than the one that was armed
  wrong_pattern,          ///< the scanner gives a serial with its last character missing
  other_lot,              ///< scans a serial of the next lot
  left_in_place,          ///< leaves the tested probe where it is and scans the next one for that nest
  lid_opened,             ///< opens the lid in mid-run
  scanned_in_test,        ///< scans the serial again while its probe is being tested
  scanned_after_verdict,  ///< scans the serial again after its verdict
  never_put_in,           ///< scans and forgets to put the probe in
  unknown_badge           ///< scans a badge that nobody here has
};

std::span<const Mistake> all_mistakes();
std::string_view slug(Mistake mistake);  ///< "wrong_nest" ...

/// Which mistake is made with which piece of the work: forced ones, and others at a rate.
struct MistakePlan {
  double rate = 0.0;  ///< probability that a piece has one, 0 to 1; each kind alike
  std::uint64_t seed = 1;
  std::map<std::size_t, Mistake> forced;  ///< by the piece's place in the list, from 0

  /// Drawn from (seed, piece) alone, so one plan always says the same.
  std::optional<Mistake> at(std::size_t piece) const;
};

}  // namespace probewright::sequence::production
