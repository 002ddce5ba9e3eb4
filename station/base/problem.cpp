#include "station/base/problem.h"

#include "station/base/problem_table.h"

namespace probewright {
namespace {

std::string fill(std::string_view sentence, const Problem& problem) {
  std::string filled{sentence};
  for (const auto& [name, value] : problem.arguments) {
    const std::string mark = "{" + name + "}";
    for (auto at = filled.find(mark); at != std::string::npos; at = filled.find(mark, at + value.size()))
      filled.replace(at, mark.size(), value);
  }
  return filled;
}

}  // namespace

std::string Problem::what() const {
  const ProblemRow* row = find_problem(id);
  return row ? fill(row->what, *this) : id;
}

std::string Problem::remedy() const {
  const ProblemRow* row = find_problem(id);
  return row ? fill(row->remedy, *this) : "report this as a mistake in the program";
}

ProblemKind Problem::kind() const {
  const ProblemRow* row = find_problem(id);
  return row ? row->kind : ProblemKind::our_bug;
}

std::string Problem::text() const {
  std::string line = where.empty() ? what() : where + ": " + what();
  return line + " (" + remedy() + ")";
}

int exit_status(ProblemKind kind) { return kind == ProblemKind::refused_input ? 2 : 3; }

}  // namespace probewright
