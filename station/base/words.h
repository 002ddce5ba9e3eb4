#pragma once
#include <cstddef>
#include <string_view>

namespace probewright {

/// How many single-byte insertions, deletions and replacements turn `a` into `b` (V. Levenshtein, 1966).
std::size_t edit_distance(std::string_view a, std::string_view b);

}  // namespace probewright
