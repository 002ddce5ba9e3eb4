#pragma once
#include <cstdint>
#include <optional>
#include <span>
#include <string>
#include <string_view>

#include "db/connection.h"
#include "station/base/digest.h"

struct sqlite3_stmt;

namespace probewright::db {

class Statement;

/// A statement in use: bindings on the way in, columns on the way out. Resets the statement and clears its bindings
/// when it goes, on every way out. Values are copied when bound.
class Row {
 public:
  ~Row();
  Row(Row&&) = delete;

  /// Binds one parameter, by its place from 1.
  void bind(int place, std::nullptr_t);
  void bind(int place, std::int64_t value);
  void bind(int place, int value) { bind(place, std::int64_t{value}); }
  void bind(int place, bool value) { bind(place, std::int64_t{value}); }
  void bind(int place, double value);
  void bind(int place, std::string_view value);
  void bind(int place, const std::string& value) { bind(place, std::string_view{value}); }
  void bind(int place, const char* value) { bind(place, std::string_view{value}); }
  void bind(int place, std::span<const std::byte> value);
  void bind(int place, const Digest& value) { bind(place, std::span<const std::byte>{value}); }
  template <class T>
  void bind(int place, const std::optional<T>& value) {
    if (value) {
      bind(place, *value);
    } else {
      bind(place, nullptr);
    }
  }
  /// Binds all parameters, in order from the first.
  template <class... Values>
  Row& values(const Values&... all) {
    int place = 0;
    (bind(++place, all), ...);
    return *this;
  }

  /// Goes to the next row; false where there is none. Throws Error.
  bool step();
  /// For a statement that returns no row. Throws Error.
  void run() { step(); }

  /// Columns of the row reached, by place from 0. Views live until the next step.
  bool is_null(int column) const;
  bool is_integer(int column) const;
  bool is_real(int column) const;
  bool is_text(int column) const;
  bool is_blob(int column) const;
  std::int64_t integer(int column) const;
  double real(int column) const;
  std::string_view text_view(int column) const;
  std::string text(int column) const { return std::string{text_view(column)}; }
  std::span<const std::byte> blob(int column) const;
  Bytes bytes(int column) const;
  std::optional<double> maybe_real(int column) const;
  std::optional<std::string> maybe_text(int column) const;
  /// A BLOB of 32 bytes; of any other size: cut or filled with zero bytes.
  Digest digest(int column) const;
  int columns() const;
  /// One column looked at once, for walks over millions of rows. Views live until the next step.
  struct Peek {
    enum class Type : std::uint8_t { null, integer, real, text, blob } type = Type::null;
    std::int64_t integer = 0;
    double real = 0.0;
    std::string_view bytes;  ///< of text or blob
  };
  Peek peek(int column) const;

 private:
  friend class Statement;
  explicit Row(Statement& statement);
  void check(int code);
  Statement& statement_;
};

/// One SQL statement, prepared once for the life of its connection, which must outlive it.
class Statement {
 public:
  /// Throws Error.
  Statement(Connection& connection, std::string_view sql);
  ~Statement();
  Statement(Statement&&) = delete;
  /// Only one row of a statement can be in use; throws std::logic_error for a second.
  Row begin();

 private:
  friend class Row;
  Connection& connection_;
  sqlite3_stmt* handle_ = nullptr;
  bool in_use_ = false;
};

}  // namespace probewright::db
