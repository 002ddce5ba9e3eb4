#include "db/transaction.h"

#include <sqlite3.h>

namespace probewright::db {
namespace {

/// For destructors: a rollback that fails leaves SQLite to roll back at close, and the failure that led here is
/// already on its way to the caller.
void try_to(Connection& connection, const char* sql) {
  if (connection.in_transaction()) sqlite3_exec(connection.handle(), sql, nullptr, nullptr, nullptr);
}

}  // namespace

Transaction::Transaction(Connection& connection) : connection_(connection) { connection.run("BEGIN IMMEDIATE"); }

Transaction::~Transaction() { try_to(connection_, "ROLLBACK"); }

void Transaction::commit() { connection_.run("COMMIT"); }

Savepoint::Savepoint(Connection& connection) : connection_(connection) { connection.run("SAVEPOINT job"); }

Savepoint::~Savepoint() {
  if (open_) try_to(connection_, "ROLLBACK TO job; RELEASE job");
}

void Savepoint::keep() {
  connection_.run("RELEASE job");
  open_ = false;
}

void Savepoint::take_back() {
  open_ = false;
  connection_.run("ROLLBACK TO job; RELEASE job");
}

Snapshot::Snapshot(Connection& connection) : connection_(connection) {
  connection.run("BEGIN");
  connection.ask("SELECT count(*) FROM sqlite_schema");  // the snapshot begins with the first read
}

Snapshot::~Snapshot() { try_to(connection_, "COMMIT"); }

}  // namespace probewright::db
