#include <cmath>

#include "db/projection.h"
#include "station/base/canonical_json.h"
#include "station/base/csv.h"
#include "station/base/times.h"
#include "station/base/units.h"
#include "station/measure/capture_format.h"
#include "station/sequence/configuration.h"
#include "station/sequence/scan_text.h"
#include "tests/fuzz/targets.h"

namespace probewright::fuzz {

void csv(std::span<const std::byte> bytes) {
  CsvRules rules;
  rules.needed = {"wavelength_nm"};
  rules.optional = {"signal"};
  for (const bool any : {false, true}) {
    rules.any_column = any;
    const auto table = read_csv(text_of(bytes), rules, "lab.csv");
    if (!table) {
      require(!table.error().empty(), "a refusal has a reason");
      continue;
    }
    require(table->header.size() == table->columns.size(), "each column has its name");
    for (const auto& column : table->columns)
      require(column.size() == table->columns.front().size(), "columns are of one length");
    for (const double value : table->columns[static_cast<std::size_t>(table->column("wavelength_nm"))])
      require(std::isfinite(value), "needed numbers are finite");
  }
}

void bodies(std::span<const std::byte> bytes) {
  const auto body = parse_body(text_of(bytes), "body");
  if (!body) return;
  require(canonical(*body) == text_of(bytes), "only canonical bytes are read");
  for (const db::ProjectedTable& table : db::projected_tables())
    static_cast<void>(db::project(table, 1, *body, "a text"));
}

void captures(std::span<const std::byte> bytes) {
  const auto capture = measure::decode(bytes, "capture");
  if (!capture) return;
  const Bytes again = measure::encode(*capture);
  require(std::equal(again.begin(), again.end(), bytes.begin(), bytes.end()), "a capture is written as it was read");
}

void quantities(std::span<const std::byte> bytes) {
  const auto quantity = parse_quantity(text_of(bytes));
  if (!quantity) return;
  require(std::isfinite(quantity->value), "a number is finite");
  for (const char* unit : {"nm", "mA", "V", "s", "K", "degC", "%", "ohm", "nA/mA"})
    static_cast<void>(in_unit(*quantity, unit));
}

void times(std::span<const std::byte> bytes) {
  const auto time = parse_utc(text_of(bytes));
  if (!time) return;
  const auto again = parse_utc(to_text(*time));
  require(again && *again == *time, "a time is read as it was written");
}

void scans(std::span<const std::byte> bytes) {
  static const sequence::Configuration configuration =
      sequence::read_configuration(PW_SOURCE_DIR "/configs", "Quay-1").value();
  const auto meaning = sequence::meaning_of_scan(text_of(bytes), configuration);
  if (!meaning) {
    require(!meaning.error().text().empty(), "a refusal has words");
    return;
  }
  const auto* card = std::get_if<sequence::LotCard>(&*meaning);
  if (card) require(card->holds(card->first_serial) && card->holds(card->last_serial), "a lot holds its own serials");
}

}  // namespace probewright::fuzz
