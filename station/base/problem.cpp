#include "station/base/problem.h"

#include "station/base/problem_table.h"

namespace probewright {
namespace {

/// The value of the argument `name`, or nullptr.
const std::string* argument(const Problem& problem, std::string_view name) {
  for (const auto& [key, value] : problem.arguments)
    if (key == name) return &value;
  return nullptr;
}

/// One pass over the sentence, so that braces inside a value stay as they are.
std::string fill(std::string_view sentence, const Problem& problem) {
  std::string filled;
  while (!sentence.empty()) {
    const auto open = sentence.find('{'), close = sentence.find('}', open);
    if (close == std::string_view::npos) break;
    const std::string* value = argument(problem, sentence.substr(open + 1, close - open - 1));
    filled += sentence.substr(0, open);
    filled += value != nullptr ? std::string_view{*value} : sentence.substr(open, close - open + 1);
    sentence.remove_prefix(close + 1);
  }
  return filled += sentence;
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
