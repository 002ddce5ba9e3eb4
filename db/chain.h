#pragma once
#include <array>
#include <cstdint>
#include <memory>
#include <span>
#include <string>
#include <string_view>
#include <vector>

#include "db/rows.h"
#include "db/sha256.h"
#include "db/statement.h"

// How entries are chained and how readings and captures are digested. CHAIN.md says the same in words; a script written
// from CHAIN.md alone (tests/db/verify_ledger.py) holds the two together.
namespace probewright::db {

/// The recipe that new entries follow. An old entry keeps the recipe that it names.
inline constexpr std::int64_t recipe = 1;

/// The columns of an entry that its body repeats.
struct EntryHead {
  std::int64_t number = 0;
  std::string time, kind, who;
};

/// Bytes of a body: canonical JSON of data, kind, number, recipe, time and who.
std::string entry_body(const EntryHead& head, const Body& data);
/// SHA-256 over the hash of the entry before (32 zero bytes for the first) and the body.
Digest entry_hash(const Digest& previous, std::string_view body);

/// How one column goes into a row's bytes.
enum class Field { integer, text, maybe_text, maybe_real, flag, digest };
struct DigestedColumn {
  const char* name;
  Field field;
};
/// Columns of `reading` and `capture` in the order of the digest. The run is not among them: it leads the proof.
std::span<const DigestedColumn> reading_columns();
std::span<const DigestedColumn> capture_columns();
/// "SELECT place, check_slug ... FROM reading WHERE run = ? ORDER BY place", and the same for captures.
const std::string& select_readings();
const std::string& select_captures();

/// First four bytes of a SHA-256, to name a place after a mismatch.
using Tag = std::array<std::byte, 4>;

/// Bytes of rows, gathered for the proof and, where wanted, for the tags (which cost more than the proof).
class RowsDigest {
 public:
  enum class Tags { none, wanted };
  explicit RowsDigest(std::span<const DigestedColumn> columns, Tags tags = Tags::wanted)
      : columns_(columns), with_tags_(tags == Tags::wanted), column_bytes_(with_tags_ ? columns.size() : 0) {
    if (with_tags_) hash_ = std::make_unique<Sha256>();
  }
  /// Forgets all rows and keeps the memory.
  void clear();
  /// Takes the row that stands in `row`, whose columns are those of the select. Returns the place of a column that
  /// holds a type or value which cannot be there, or -1.
  int add(const Row& row);
  std::size_t rows() const { return rows_; }
  const std::string& bytes() const { return bytes_; }
  std::vector<Tag> row_tags() const { return row_tags_; }
  std::vector<Tag> column_tags() const;

 private:
  std::span<const DigestedColumn> columns_;
  bool with_tags_;
  std::size_t rows_ = 0;
  std::string bytes_;
  std::vector<std::string> column_bytes_;
  std::vector<Tag> row_tags_;
  std::unique_ptr<Sha256> hash_;  ///< one for all tags: to make one costs more than a short digest
};

/// SHA-256 over recipe, run, number of readings, readings, number of captures, captures.
Digest run_proof(RunId run, const RowsDigest& readings, const RowsDigest& captures);
/// The same with a hash that is used again and again.
Digest run_proof(RunId run, const RowsDigest& readings, const RowsDigest& captures, Sha256& hash);

/// Tags as hexadecimal, one after another.
std::string tags_text(std::span<const Tag> tags);

}  // namespace probewright::db
