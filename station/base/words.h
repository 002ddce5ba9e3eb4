#pragma once
#include <cstddef>
#include <string_view>

namespace probewright {

/// How many single-byte insertions, deletions, replacements and swaps of neighbours turn `a` into `b`
/// (F. Damerau, 1964; no byte is touched twice): a swap is the commonest slip of a typist, so it counts one.
std::size_t edit_distance(std::string_view a, std::string_view b);

}  // namespace probewright
