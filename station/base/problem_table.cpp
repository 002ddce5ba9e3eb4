#include "station/base/problem_table.h"

#include <algorithm>
#include <array>

namespace probewright {
namespace {

using enum ProblemKind;

// The one place for the English words of every problem. {names} are filled from the problem's arguments.
constexpr std::array rows = std::to_array<ProblemRow>({
    // --- base
    {"file_unreadable", refused_input, "cannot read the file: {reason}", "check the path and its permissions"},
    {"file_too_large", refused_input, "the file has {size} bytes; at most {bound} are read",
     "check that this is the right file"},
    // --- measure
    // --- limits
    // --- wire
    // --- phantom
    // --- adapter
    // --- emulated
    // --- db
    // --- sequence
    // --- trace
    // --- text
});

}  // namespace

std::span<const ProblemRow> problem_table() { return rows; }

const ProblemRow* find_problem(std::string_view id) {
  const auto row = std::find_if(rows.begin(), rows.end(), [id](const ProblemRow& r) { return r.id == id; });
  return row == rows.end() ? nullptr : &*row;
}

}  // namespace probewright
