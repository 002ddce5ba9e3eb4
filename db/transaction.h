#pragma once
#include "db/connection.h"

namespace probewright::db {

/// A change in BEGIN IMMEDIATE: rolled back on every way out but `commit`.
class Transaction {
 public:
  /// Throws Error.
  explicit Transaction(Connection& connection);
  ~Transaction();
  Transaction(Transaction&&) = delete;
  /// Throws Error; then nothing is kept, as far as SQLite can know.
  void commit();

 private:
  Connection& connection_;
};

/// A part of a transaction that can be taken back alone: taken back on every way out but `keep`.
class Savepoint {
 public:
  explicit Savepoint(Connection& connection);
  ~Savepoint();
  Savepoint(Savepoint&&) = delete;
  void keep();
  /// Takes it back now. Throws Error where that fails: then the whole transaction is lost.
  void take_back();

 private:
  Connection& connection_;
  bool open_ = true;
};

/// Holds one snapshot for reading; ends when it goes.
class Snapshot {
 public:
  explicit Snapshot(Connection& connection);
  ~Snapshot();
  Snapshot(Snapshot&&) = delete;

 private:
  Connection& connection_;
};

}  // namespace probewright::db
