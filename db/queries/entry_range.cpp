#include "db/queries/entry_range.h"

#include "db/queries/seal.h"

namespace probewright::db {
namespace {

UtcTime time_of(Reader& reader, std::int64_t number) {
  Row row = reader.begin("SELECT time FROM entry WHERE number = ?");
  if (!row.values(number).step()) throw ProblemError(Problem{"time_malformed", "entry " + std::to_string(number)});
  return parse_utc(row.text_view(0)).value();
}

/// The first entry that is not before `time`, as if times never fell; one past the last where there is none.
std::int64_t first_from(Reader& reader, UtcTime time, std::int64_t newest) {
  std::int64_t low = 1, high = newest + 1;
  while (low < high) {
    const std::int64_t middle = low + (high - low) / 2;
    if (time_of(reader, middle) < time)
      low = middle + 1;
    else
      high = middle;
  }
  return low;
}

UtcTime moved(UtcTime time, std::int64_t by_s) { return {time.microseconds + by_s * 1'000'000}; }

}  // namespace

EntryRange entries_between(Reader& reader, UtcTime from, UtcTime to) {
  const std::int64_t newest = newest_seal(reader).entry;
  EntryRange range{first_from(reader, moved(from, -clock_slack_s), newest),
                   first_from(reader, moved(to, clock_slack_s), newest) - 1};
  const auto within = [&](std::int64_t number) {
    const UtcTime time = time_of(reader, number);
    return time >= from && time < to;
  };
  while (!range.empty() && !within(range.first)) ++range.first;
  while (!range.empty() && !within(range.last)) --range.last;
  return range;
}

EntryRange all_entries(Reader& reader) { return {1, newest_seal(reader).entry}; }

}  // namespace probewright::db
