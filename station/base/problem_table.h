#pragma once
#include <span>

#include "station/base/problem.h"

namespace probewright {

/// Every problem the program can tell, sorted by no rule but grouped by the folder that tells it.
/// A test checks that ids are unique and that no row lacks a remedy.
std::span<const ProblemRow> problem_table();

/// The row with this id, or nullptr.
const ProblemRow* find_problem(std::string_view id);

}  // namespace probewright
