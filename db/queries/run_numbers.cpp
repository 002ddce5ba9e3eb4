#include "db/queries/run_numbers.h"

namespace probewright::db {
namespace {

std::vector<RunId> numbers(Row& row) {
  std::vector<RunId> runs;
  while (row.step()) runs.push_back({row.integer(0)});
  return runs;
}

}  // namespace

std::vector<RunId> closed_runs(Reader& reader) {
  Row row = reader.begin("SELECT run FROM run_closed ORDER BY run");
  return numbers(row);
}

std::vector<RunId> closed_runs_of_serial(Reader& reader, std::string_view serial) {
  Row row = reader.begin(
      "SELECT c.run FROM run_opened AS o JOIN run_closed AS c ON c.run = o.run WHERE o.serial = ? ORDER BY c.run");
  return numbers(row.values(serial));
}

std::vector<RunId> closed_runs_of_lot(Reader& reader, std::string_view lot) {
  Row row = reader.begin(
      "SELECT c.run FROM run_opened AS o JOIN run_closed AS c ON c.run = o.run WHERE o.lot = ? ORDER BY c.run");
  return numbers(row.values(lot));
}

std::vector<RunId> passed_runs_with_device(Reader& reader, std::string_view device, UtcTime since,
                                           std::optional<UtcTime> until) {
  Row row = reader.begin(
      "SELECT DISTINCT d.run FROM run_device AS d JOIN run_closed AS c ON c.run = d.run JOIN entry AS e ON e.number ="
      " d.run WHERE c.verdict = 'pass' AND (d.certificate_number = ?1 OR d.identity = ?1 OR"
      " (length(d.identity) > length(?1) AND substr(d.identity, -length(?1) - 1) = ' ' || ?1))"
      " AND e.time >= ?2 AND (?3 IS NULL OR e.time < ?3) ORDER BY d.run");
  return numbers(row.values(device, to_text(since), until ? std::optional{to_text(*until)} : std::nullopt));
}

std::vector<RunId> newest_runs_with_captures(Reader& reader, std::string_view model, int most) {
  Row row = reader.begin(
      "SELECT o.run FROM run_opened AS o JOIN run_closed AS c ON c.run = o.run WHERE o.model = ?1 AND c.captures > 0"
      " AND (SELECT count(*) FROM capture AS a JOIN capture_bytes AS b ON b.capture = a.number WHERE a.run = o.run)"
      " = c.captures ORDER BY o.run DESC LIMIT ?2");
  return numbers(row.values(model, most));
}

}  // namespace probewright::db
