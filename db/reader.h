#pragma once
#include <memory>
#include <string>

#include "db/connection.h"
#include "db/statement.h"

namespace probewright::db {

enum class ReadFrom {
  live,    ///< mode=ro beside a writer
  archive  ///< immutable=1, for a file that nobody writes: refused where a -wal lies beside it
};

/// A read-only connection that questions (db/queries) are put to. One thread at a time.
class Reader {
 public:
  /// Opens a ledger and checks that it is one that this program knows.
  /// Errors: ledger_cannot_open, ledger_not_a_ledger, ledger_newer, ledger_has_wal (archive).
  static Result<Reader> open(const std::string& path, ReadFrom from = ReadFrom::live, const std::string& vfs = {});
  /// Reads over a connection that someone else owns, which must outlive the reader.
  explicit Reader(Connection& connection) : connection_(&connection) {}

  /// For db/queries. `sql` must be a literal. Throws db::Error.
  Row begin(const char* sql) { return connection_->begin(sql); }
  Connection& connection() { return *connection_; }

 private:
  explicit Reader(std::unique_ptr<Connection> own) : own_(std::move(own)), connection_(own_.get()) {}
  std::unique_ptr<Connection> own_;
  Connection* connection_;
};

/// Whether a file is a copy or an archive: a ledger that some line has used has a lease beside it, and a log while
/// anybody has it open; a file with neither is not in use.
bool is_copy(const std::string& path);

/// A connection for looking only. A copy (neither a log nor a lease lies beside it) and a closed ledger in a folder
/// that may not be written are opened as archives: WAL would need to make files there, and would leave them. Throws
/// db::Error, ProblemError ledger_has_wal.
std::unique_ptr<Connection> open_readable(const std::string& path, ReadFrom from, const std::string& vfs = {});

/// Throws ProblemError unless the file is a ledger with a layout that this program knows: ledger_not_a_ledger,
/// ledger_newer.
void refuse_foreign_file(Connection& connection);

}  // namespace probewright::db
