#pragma once
#include <cstdint>
#include <map>
#include <memory>
#include <string>
#include <string_view>

#include "db/error.h"

struct sqlite3;

namespace probewright::db {

class Row;
class Statement;

enum class Access {
  read_write,         ///< an existing file
  create_read_write,  ///< makes the file where there is none
  read_only,          ///< mode=ro and query_only
  immutable           ///< a closed archive: no locks, no -wal looked for
};

/// One connection to one SQLite file. One thread at a time.
class Connection {
 public:
  /// `vfs` empty: the default one. Throws Error.
  Connection(std::string path, Access access, const std::string& vfs = {});
  ~Connection();
  Connection(Connection&&) = delete;

  /// Runs SQL that returns nothing of interest; may be several statements. Throws Error.
  void run(const std::string& sql);
  /// The first column of the first row as text, empty where there is no row. Throws Error.
  std::string ask(const std::string& sql);
  /// As ask, for a number; 0 where there is no row.
  std::int64_t ask_number(const std::string& sql);
  /// Sets a pragma and throws Error (id ledger_mode) unless SQLite answers `wanted`.
  void demand(const std::string& pragma, std::string_view value, std::string_view wanted);

  /// A statement that is prepared at its first use and kept for as long as the connection. `sql` must be a literal or
  /// outlive the connection.
  Row begin(const char* sql);

  bool in_transaction() const;
  /// How long a statement waits for another connection's lock, in milliseconds.
  void wait_for_locks(int milliseconds);
  const std::string& path() const { return path_; }
  sqlite3* handle() const { return handle_; }

 private:
  std::string path_;
  sqlite3* handle_ = nullptr;
  std::map<const char*, std::unique_ptr<Statement>> kept_;
};

/// While it lives, every statement of a connection ends with an interrupt after so many steps of SQLite's machine.
class Interrupting {
 public:
  Interrupting(Connection& connection, int steps);
  ~Interrupting();
  Interrupting(const Interrupting&) = delete;

 private:
  Connection& connection_;
};

}  // namespace probewright::db
