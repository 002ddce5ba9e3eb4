#include "db/log_file.h"

#include <sqlite3.h>

#include <algorithm>
#include <vector>

#include "db/transaction.h"

namespace probewright::db {
namespace {

/// The log as SQLite's own VFS has it open. Source: SQLITE_FCNTL_JOURNAL_POINTER,
/// sqlite.org/c3ref/c_fcntl_begin_atomic_write.html
sqlite3_file* log_of(Connection& connection) {
  sqlite3_file* file = nullptr;
  const int code = sqlite3_file_control(connection.handle(), "main", SQLITE_FCNTL_JOURNAL_POINTER, &file);
  if (code != SQLITE_OK) raise(nullptr, code, connection.path(), "find the log");
  return file;
}

/// SQLite's own VFS for Unix cuts the length of a write to 17 bits, since it never writes more than a page: a larger
/// write ends as "disk full".
constexpr std::size_t largest_piece = 1u << 16;

void write_over(sqlite3_file& file, const std::string& path) {
  const auto demand = [&](int code) {
    if (code != SQLITE_OK) raise(nullptr, code, path + "-wal", "write the log again");
  };
  sqlite3_int64 size = 0;
  demand(file.pMethods->xFileSize(&file, &size));
  if (size == 0) return;
  std::vector<char> piece(largest_piece);
  for (sqlite3_int64 at = 0; at < size; at += static_cast<sqlite3_int64>(piece.size())) {
    const int count = static_cast<int>(std::min<sqlite3_int64>(static_cast<sqlite3_int64>(piece.size()), size - at));
    demand(file.pMethods->xRead(&file, piece.data(), count, at));
    demand(file.pMethods->xWrite(&file, piece.data(), count, at));
  }
  demand(file.pMethods->xSync(&file, SQLITE_SYNC_NORMAL));
}

}  // namespace

void save_log_again(Connection& connection) {
  const Transaction alone(connection);  // nobody else writes to the log meanwhile; ends without a commit
  sqlite3_file* file = log_of(connection);
  if (file && file->pMethods) write_over(*file, connection.path());
}

}  // namespace probewright::db
