#include "db/error.h"

#include <sqlite3.h>

namespace probewright::db {
namespace {

std::string_view problem_id(int code) {
  switch (code & 0xff) {
    case SQLITE_FULL:
      return "ledger_full";
    case SQLITE_BUSY:
    case SQLITE_LOCKED:
      return "ledger_locked";
    case SQLITE_CORRUPT:
      return "ledger_damaged";
    case SQLITE_NOTADB:
      return "ledger_not_a_ledger";
    case SQLITE_CANTOPEN:
    case SQLITE_PERM:
    case SQLITE_AUTH:
      return "ledger_cannot_open";
    case SQLITE_READONLY:
      return "ledger_read_only";
    case SQLITE_IOERR:
      return "ledger_io";
    case SQLITE_CONSTRAINT:
      return "ledger_refused";
    default:
      return "ledger_sql";
  }
}

}  // namespace

Error::Error(Problem problem, int code, std::string sql)
    : ProblemError(std::move(problem)), code_(code), sql_(std::move(sql)) {}

bool Error::interrupted() const { return (code_ & 0xff) == SQLITE_INTERRUPT; }

bool Error::refused() const { return (code_ & 0xff) == SQLITE_CONSTRAINT; }

Problem problem_of(int code, std::string_view reason, std::string_view file) {
  return {problem_id(code), file, {{"reason", std::string{reason}}, {"code", std::to_string(code)}}};
}

void raise(sqlite3* handle, int code, std::string_view file, std::string_view sql) {
  const std::string reason = handle ? sqlite3_errmsg(handle) : sqlite3_errstr(code);
  Problem problem = problem_of(code, reason, file);
  problem.arguments.emplace_back("sql", std::string{sql});
  throw Error(std::move(problem), code, std::string{sql});
}

}  // namespace probewright::db
