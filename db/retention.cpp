#include "db/retention.h"

#include <algorithm>

#include "db/hex.h"
#include "db/queries/standing.h"
#include "db/sha256.h"

namespace probewright::db {
namespace {

/// Lots and holds as they stand, asked once for many runs.
class Standing {
 public:
  explicit Standing(Reader& reader) : reader_(reader), closed_(closed_lots(reader)), held_(held_subjects(reader)) {}

  /// A lot that no entry has closed is open, whatever became of it.
  bool lot_open(const std::string& lot) const { return !lot.empty() && !closed_.contains(lot); }
  bool held(std::int64_t run, const std::string& serial, const std::string& lot, std::int64_t nest) {
    if (held_.empty()) return false;
    if (held_.contains({"serial", serial}) || held_.contains({"lot", lot}) ||
        held_.contains({"nest", std::to_string(nest)}))
      return true;
    return document_held(run);
  }

 private:
  /// A hold names a document by its digest or by its name.
  bool document_held(std::int64_t run) {
    Row row = reader_.begin(
        "SELECT d.digest, d.name FROM run_document AS r JOIN document AS d ON d.digest = r.document WHERE r.run = ?1"
        " UNION SELECT d.digest, d.name FROM run_device AS r JOIN document AS d ON d.digest = r.certificate"
        " WHERE r.run = ?1");
    for (row.values(run); row.step();)
      if (held_.contains({"document", to_hex(row.digest(0))}) || held_.contains({"document", row.text(1)})) return true;
    return false;
  }

  Reader& reader_;
  std::set<std::string> closed_;
  std::set<HoldSubject> held_;
};

void add_captures(Reader& reader, std::int64_t run, PrunePlan& plan) {
  Row row = reader.begin(
      "SELECT c.number, c.stored_size FROM capture AS c JOIN capture_bytes AS b ON b.capture = c.number WHERE c.run = "
      "?");
  for (row.values(run); row.step();) {
    plan.captures.push_back(row.integer(0));
    plan.bytes += row.integer(1);
  }
}

}  // namespace

bool is_kept(std::string_view serial, int one_in) {
  if (one_in <= 0) return false;
  const Digest digest = sha256(serial);
  std::uint64_t number = 0;
  for (std::size_t i = 0; i < 8; ++i) number = number << 8 | static_cast<std::uint64_t>(digest[i]);
  return number % static_cast<std::uint64_t>(one_in) == 0;
}

PrunePlan plan_prune(Reader& reader, const RetentionRules& rules) {
  PrunePlan plan;
  Standing standing(reader);
  const std::string before = to_text(rules.closed_before);
  Row row = reader.begin(
      "SELECT o.run, o.serial, o.lot, o.nest, e.time FROM run_opened AS o LEFT JOIN run_closed AS c ON c.run = o.run"
      " LEFT JOIN entry AS e ON e.number = c.entry WHERE EXISTS (SELECT 1 FROM capture AS a JOIN capture_bytes AS b"
      " ON b.capture = a.number WHERE a.run = o.run) ORDER BY o.run");
  while (row.step()) {
    const std::int64_t run = row.integer(0);
    if (row.is_null(4) || row.text(4) >= before) {
      ++plan.in_period;
    } else if (is_kept(row.text_view(1), rules.keep_one_in)) {
      ++plan.chosen;
    } else if (standing.lot_open(row.text(2))) {
      ++plan.lot_open;
    } else if (standing.held(run, row.text(1), row.text(2), row.integer(3))) {
      ++plan.held;
    } else {
      ++plan.runs;
      add_captures(reader, run, plan);
    }
  }
  std::sort(plan.captures.begin(), plan.captures.end());
  return plan;
}

Result<std::int64_t> prune(Store& store, const PrunePlan& plan, std::string_view who, std::string_view reason,
                           const std::function<void(std::int64_t, std::int64_t)>& progress) {
  constexpr std::size_t most = 1000;
  const auto total = static_cast<std::int64_t>(plan.captures.size());
  for (std::size_t at = 0; at < plan.captures.size(); at += most) {
    const auto piece = std::span{plan.captures}.subspan(at, std::min(most, plan.captures.size() - at));
    const auto outcome = store.commit([&](Change& change) { change.prune(piece, who, reason); });
    if (!outcome) return outcome.error();
    if (progress) progress(static_cast<std::int64_t>(at + piece.size()), total);
  }
  if (total > 0) store.give_space_back();
  return total;
}

}  // namespace probewright::db
