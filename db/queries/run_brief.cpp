#include "db/queries/run_brief.h"

namespace probewright::db {
namespace {

std::optional<BriefClosing> closing_of(Reader& reader, RunId run) {
  Row row = reader.begin(
      "SELECT c.entry, e.time, c.verdict, c.cause, c.cause_words, c.provisional, e.body FROM run_closed AS c"
      " JOIN entry AS e ON e.number = c.entry WHERE c.run = ?");
  if (!row.values(run.value).step()) return std::nullopt;
  BriefClosing closing{row.integer(0),      parse_utc(row.text_view(1)).value(),
                       row.text(2),         row.text(3),
                       row.text(4),         {},
                       row.integer(5) != 0, {}};
  const Body body = parse_body(row.text_view(6), "entry " + row.text(0)).value();
  const Body* data = body.find("data");
  if (const Body* failing = data ? data->find("failing") : nullptr; failing && failing->array())
    for (const Body& check : *failing->array())
      if (check.string()) closing.failing.push_back(*check.string());
  if (const Body* bench = data ? data->find("bench") : nullptr) closing.bench = *bench;
  return closing;
}

std::string sheet_revision_of(Reader& reader, RunId run) {
  Row row = reader.begin(
      "SELECT d.revision FROM run_document AS r JOIN document AS d ON d.digest = r.document"
      " WHERE r.run = ? AND r.role = 'sheet' ORDER BY r.place LIMIT 1");
  return row.values(run.value).step() ? row.text(0) : std::string{};
}

}  // namespace

std::optional<RunBrief> run_brief(Reader& reader, RunId run) {
  RunBrief brief;
  {
    Row row = reader.begin(
        "SELECT e.time, o.serial, o.purpose, o.emulated, o.lot, o.model, o.nest, o.station, o.operator, o.try_number"
        " FROM run_opened AS o JOIN entry AS e ON e.number = o.run WHERE o.run = ?");
    if (!row.values(run.value).step()) return std::nullopt;
    brief.run = run;
    brief.opened_at = parse_utc(row.text_view(0)).value();
    brief.serial = row.text(1);
    brief.purpose = row.text(2);
    brief.emulated = row.integer(3) != 0;
    brief.lot = row.text(4);
    brief.model = row.text(5);
    brief.nest = static_cast<int>(row.integer(6));
    brief.station = row.text(7);
    brief.operator_name = row.text(8);
    brief.try_number = static_cast<int>(row.integer(9));
  }
  brief.sheet_revision = sheet_revision_of(reader, run);
  brief.closing = closing_of(reader, run);
  return brief;
}

std::vector<RunBrief> run_briefs(Reader& reader, const std::vector<RunId>& runs) {
  std::vector<RunBrief> briefs;
  for (const RunId run : runs)
    if (auto brief = run_brief(reader, run)) briefs.push_back(*std::move(brief));
  return briefs;
}

}  // namespace probewright::db
