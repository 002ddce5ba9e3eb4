#include "db/reader.h"

#include <sys/stat.h>
#include <unistd.h>

#include "db/schema/schema.h"

namespace probewright::db {
namespace {

bool wal_lies_beside(const std::string& path) {
  struct stat file {};
  return stat((path + "-wal").c_str(), &file) == 0 && file.st_size > 0;
}

}  // namespace

bool is_copy(const std::string& path) {
  struct stat file {};
  const auto lies_beside = [&](const char* suffix) { return stat((path + suffix).c_str(), &file) == 0; };
  return !lies_beside("-wal") && !lies_beside("-journal") && !lies_beside(".lease");
}

void refuse_foreign_file(Connection& connection) {
  const std::int64_t application = connection.ask_number("PRAGMA application_id");
  const std::int64_t step = connection.ask_number("PRAGMA user_version");
  if (application != application_id)
    throw ProblemError(
        {"ledger_not_a_ledger", connection.path(), {{"reason", "another kind of database"}, {"code", "26"}}});
  if (step > newest_step)
    throw ProblemError(
        {"ledger_newer", connection.path(), {{"found", std::to_string(step)}, {"known", std::to_string(newest_step)}}});
}

std::unique_ptr<Connection> open_readable(const std::string& path, ReadFrom from, const std::string& vfs) {
  if (from == ReadFrom::archive && wal_lies_beside(path)) throw ProblemError({"ledger_has_wal", path});
  if (from == ReadFrom::archive) return std::make_unique<Connection>(path, Access::immutable, vfs);
  // Opened as a live one, SQLite would put files beside a copy that a reader cannot take away.
  if (vfs.empty() && ::access(path.c_str(), R_OK) == 0 && is_copy(path))
    return std::make_unique<Connection>(path, Access::immutable, vfs);
  try {
    auto connection = std::make_unique<Connection>(path, Access::read_only, vfs);
    connection->wait_for_locks(5000);
    connection->ask("SELECT count(*) FROM sqlite_schema");  // the first read is what needs the files beside it
    return connection;
  } catch (const Error& error) {
    const bool no_files_beside = error.problem().id == "ledger_cannot_open" || error.problem().id == "ledger_read_only";
    if (!no_files_beside || !vfs.empty() || ::access(path.c_str(), R_OK) != 0 || wal_lies_beside(path)) throw;
    return std::make_unique<Connection>(path, Access::immutable, vfs);
  }
}

Result<Reader> Reader::open(const std::string& path, ReadFrom from, const std::string& vfs) {
  try {
    auto connection = open_readable(path, from, vfs);
    refuse_foreign_file(*connection);
    return Reader(std::move(connection));
  } catch (const ProblemError& error) {
    return error.problem();
  }
}

}  // namespace probewright::db
