#include "tests/speed/made_ledger.h"

#include <cmath>

#include "station/base/catalogue.h"
#include "station/base/numbers.h"

namespace probewright::speed {
namespace {

constexpr std::size_t readings_a_run = 40;

double unit_draw(Entropy& entropy) { return static_cast<double>(entropy.next() >> 11) * 0x1p-53; }

std::vector<db::DocumentRow> documents() {
  std::vector<db::DocumentRow> all;
  for (const char* kind :
       {"station", "model", "sheet", "phantom certificate", "adapter certificate", "haemoglobin table"})
    all.push_back({kind, "AQ-20", "3", std::string{kind} + ": AQ-20\n" + std::string(4000, '#') + "\n", "station"});
  return all;
}

Bytes wave(Entropy& entropy, std::size_t samples) {
  Bytes bytes;
  for (std::size_t i = 0; i < samples; ++i) {
    const auto counts = static_cast<std::uint16_t>(20000.0 + 200.0 * std::sin(static_cast<double>(i) * 0.02) +
                                                   8.0 * unit_draw(entropy));
    bytes.push_back(static_cast<std::byte>(counts & 0xff));
    bytes.push_back(static_cast<std::byte>(counts >> 8));
  }
  return bytes;
}

std::vector<db::ReadingRow> readings(Entropy& entropy) {
  std::vector<db::ReadingRow> rows;
  for (const Check& check : catalogue()) {
    if (rows.size() == readings_a_run) break;
    db::ReadingRow row;
    row.check = check.slug;
    row.value = 660.0 + 4.0 * unit_draw(entropy);
    row.unit = check.unit;
    row.expanded_uncertainty = 0.33 + 0.01 * unit_draw(entropy);
    row.lower = 655.0, row.upper = 665.0, row.acceptance_lower = 655.5, row.acceptance_upper = 664.5;
    row.margin = 1.0 - std::abs(*row.value - 660.0) / 4.5;
    row.conformance_probability = 0.999 + 0.001 * unit_draw(entropy);
    row.ok = "ok";
    row.definition = "centroid;threshold=0.01;window=605-785;ref=25C;v1";
    rows.push_back(std::move(row));
  }
  return rows;
}

db::RunOpened opening(std::int64_t i, const std::vector<std::pair<std::string, Digest>>& stands_on) {
  db::RunOpened opened;
  opened.serial = serial_of(i);
  opened.lot = "AQ20-W" + std::to_string(1 + i / 5000);
  opened.model = "AQ-20";
  opened.nest = 1 + static_cast<int>(i % 4);
  opened.station = "Quay-1";
  opened.operator_name = "Imre Vasko";
  for (const auto& [role, digest] : stands_on) opened.documents.push_back({role, digest});
  opened.devices = {{"phantom", "Alder Quay Sensors PHANTOM PH-0" + std::to_string(opened.nest), "1.4.0",
                     "PHC-2026-010" + std::to_string(opened.nest), stands_on[3].second},
                    {"adapter", "Alder Quay Sensors ADAPTER AD-0" + std::to_string(opened.nest), "2.0.1",
                     "ADC-2026-010" + std::to_string(opened.nest), stands_on[4].second}};
  opened.software_version = "0.1.0";
  opened.software_commit = "0123456789abcdef0123456789abcdef01234567";
  opened.compiler = "Clang-16.0.6";
  opened.ambient_temperature_C = 24.5;
  return opened;
}

db::RunClosed closing(db::RunId run) {
  db::RunClosed closed;
  closed.run = run;
  closed.verdict = "pass";
  closed.cause = "completed";
  closed.bench = Body::Object{{"asked_again", 0}, {"drive_off_confirmed", true}, {"fences", 3}, {"stopped_by", ""}};
  return closed;
}

}  // namespace

std::string serial_of(std::int64_t i) {
  if (i % 20 == 19) --i;
  return "AQ20-" + std::to_string(100 + i / 100000) + "-" + std::to_string(100000 + i % 100000).substr(1);
}

db::StoreOptions store_options(const std::string& path) {
  db::StoreOptions options;
  options.path = path;
  options.station = "Quay-1";
  options.program_version = "0.1.0";
  options.program_commit = "0000000";
  return options;
}

void make_runs(db::Store& store, const MadeOptions& options, const std::function<void(std::int64_t)>& after_commit) {
  SeededEntropy entropy(42);
  std::vector<std::pair<std::string, Digest>> stands_on;
  const auto added = store.commit([&](db::Change& change) {
    for (const db::DocumentRow& document : documents())
      stands_on.emplace_back(document.kind, change.add_document(document));
  });
  if (!added) throw ProblemError(added.error());
  const auto one = [&](db::Change& change, std::int64_t i) {
    const db::RunId run = change.open_run(opening(i, stands_on));
    if (options.captures_in_one_of > 0 && i % options.captures_in_one_of == 0)
      for (int k = 0; k < 13; ++k) change.add_capture(run, "capture_" + std::to_string(k), "", wave(entropy, 1700));
    change.add_readings(run, readings(entropy));
    change.close_run(closing(run));
  };
  for (std::int64_t at = 0; at < options.runs; at += options.runs_a_commit) {
    const std::int64_t end = std::min<std::int64_t>(at + options.runs_a_commit, options.runs);
    const auto outcome = store.commit([&](db::Change& change) {
      for (std::int64_t i = at; i < end; ++i) one(change, i);
    });
    if (!outcome) throw ProblemError(outcome.error());
    after_commit(end - at);
  }
}

}  // namespace probewright::speed
