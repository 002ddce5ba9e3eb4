#pragma once
#include <string>
#include <string_view>

#include "station/base/result.h"

struct sqlite3;

namespace probewright::db {

/// SQLite would not do what was asked: the file, the SQL, the extended result code, and a Problem with the remedy.
class Error : public ProblemError {
 public:
  Error(Problem problem, int code, std::string sql);
  /// SQLite's extended result code.
  int code() const { return code_; }
  const std::string& sql() const { return sql_; }
  /// True where the database is well and only this change was refused: a constraint, a trigger.
  bool refused() const;
  /// True where the work was ended from outside (Interrupting).
  bool interrupted() const;

 private:
  int code_;
  std::string sql_;
};

/// The Problem for one extended result code: full, locked, damaged ... each with its own remedy.
Problem problem_of(int code, std::string_view reason, std::string_view file);
/// Throws Error with the message that `handle` holds (nullptr: the general words for `code`).
[[noreturn]] void raise(sqlite3* handle, int code, std::string_view file, std::string_view sql);

}  // namespace probewright::db
