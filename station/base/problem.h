#pragma once
#include <initializer_list>
#include <string>
#include <string_view>
#include <utility>
#include <vector>

namespace probewright {

/// What a problem means for the caller: the exit status of a command, and void or not ready for a nest.
enum class ProblemKind { refused_input, device_lost, not_ready, ledger_trouble, our_bug };

/// An expected outcome that is not the wanted one: what, where, and how to mend it.
/// Its identity is `id`, for ever; the English words stand in one table (problem_table.cpp).
struct Problem {
  std::string id;                                              ///< slug of the table, e.g. "yaml_duplicate_key"
  std::string where;                                           ///< file:line:column, device, table ...; may be empty
  std::vector<std::pair<std::string, std::string>> arguments;  ///< fill the {names} of the sentence

  Problem() = default;
  Problem(std::string_view id_, std::string_view where_,
          std::initializer_list<std::pair<std::string, std::string>> arguments_ = {})
      : id(id_), where(where_), arguments(arguments_) {}

  /// The sentence with its arguments filled in. An id that the table lacks is shown as it is (our own bug).
  std::string what() const;
  /// What the reader can do about it.
  std::string remedy() const;
  ProblemKind kind() const;
  /// "where: what (remedy)", the form that commands print.
  std::string text() const;

  bool operator==(const Problem&) const = default;
};

using Problems = std::vector<Problem>;

/// One row of the table of problems.
struct ProblemRow {
  std::string_view id;
  ProblemKind kind;
  std::string_view what;    ///< English, with {names}
  std::string_view remedy;  ///< English, with {names}
};

/// Exit status of a command that ends with this kind: 2 wrong use or refused input, 3 could not do it.
int exit_status(ProblemKind kind);

}  // namespace probewright
