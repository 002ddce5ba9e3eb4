#include "db/queries/labels.h"

#include "db/queries/entries.h"

namespace probewright::db {
namespace {

LabelRecord record_of(const EntryRecord& entry) {
  const Body& data = entry.data;
  return {entry.number,
          entry.time,
          entry.who,
          {data.number("run")},
          data.text("serial"),
          data.text("kind"),
          static_cast<int>(data.number("copy", 1)),
          data.text("reason"),
          data.text("code")};
}

}  // namespace

std::vector<LabelRecord> labels_of_serial(Reader& reader, std::string_view serial) {
  std::vector<std::int64_t> numbers;
  {
    Row row = reader.begin(
        "SELECT number FROM entry WHERE kind = 'label_made' AND json_extract(body, '$.data.serial') = ?"
        " ORDER BY number");
    for (row.values(serial); row.step();) numbers.push_back(row.integer(0));
  }
  std::vector<LabelRecord> labels;
  for (const std::int64_t number : numbers)
    for (const EntryRecord& entry : entries(reader, number, number)) labels.push_back(record_of(entry));
  return labels;
}

}  // namespace probewright::db
