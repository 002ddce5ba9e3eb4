#include "sample.h"

#include <unistd.h>

#include <atomic>
#include <cmath>

#include "db/sha256.h"
#include "db/volumes.h"

namespace probewright::db::sample {

namespace fs = std::filesystem;

Folder::Folder() {
  std::string name = (fs::temp_directory_path() / "probewright-db-XXXXXX").string();
  if (!mkdtemp(name.data())) throw std::runtime_error("no folder for tests");
  path = name;
}

Folder::~Folder() {
  std::error_code ignored;
  fs::remove_all(path, ignored);
}

StoreOptions options(const std::string& path) {
  StoreOptions options;
  options.path = path;
  options.station = "Quay-1";
  options.program_version = "0.1.0";
  options.program_commit = "0000000";
  return options;
}

std::unique_ptr<Store> open(const StoreOptions& options, const Clock& clock) {
  return Store::open(options, clock).value();
}

void demand(const Result<void>& outcome) {
  if (!outcome) throw ProblemError(outcome.error());
}

DocumentRow model() { return {"model", "AQ-20", "3", "model: AQ-20\nrevision: 3\n", "station"}; }
DocumentRow sheet() { return {"sheet", "AQ-20", "7", "sheet: AQ-20\nrevision: 7\n# Prüfgrenzen in µA\n", "station"}; }
DocumentRow certificate() { return {"certificate", "PH-07", "2", "phantom: PH-07\n", "station"}; }

void add_documents(Change& change) {
  change.add_document(model());
  change.add_document(sheet());
  change.add_document(certificate());
}

RunOpened opening(const std::string& serial, bool emulated) {
  RunOpened opened;
  opened.serial = serial;
  opened.emulated = emulated;
  opened.lot = "AQ20-W48-07";
  opened.model = "AQ-20";
  opened.nest = 1;
  opened.station = "Quay-1";
  opened.operator_name = "Imre Vasko";
  opened.documents = {{"model", sha256(model().text)}, {"sheet", sha256(sheet().text)}};
  opened.devices = {{"phantom", "PH-07", "1.4", "C-2231", sha256(certificate().text)},
                    {"adapter", "AD-03", "2.0", "", std::nullopt}};
  opened.software_version = "0.1.0";
  opened.software_commit = "0000000";
  opened.compiler = "clang 16";
  opened.ambient_temperature_C = 23.25;
  return opened;
}

namespace {

/// Between -1 and 1.
double draw(Entropy& entropy) { return static_cast<double>(entropy.next() >> 11) * 0x1p-52 - 1.0; }

ReadingRow judged(std::string check, double value, std::string unit, double half_width) {
  ReadingRow row;
  row.check = std::move(check);
  row.value = value;
  row.expanded_uncertainty = 0.1 * half_width;
  row.unit = std::move(unit);
  row.lower = -half_width;
  row.upper = half_width;
  row.acceptance_lower = -0.9 * half_width;
  row.acceptance_upper = 0.9 * half_width;
  row.margin = 1.0 - std::abs(value) / (0.9 * half_width);
  row.conformance_probability = 0.999;
  row.ok = "ok";
  row.definition = "sample/1";
  return row;
}

}  // namespace

std::vector<ReadingRow> readings(Entropy& entropy, bool not_ok) {
  std::vector<ReadingRow> rows;
  // Not in catalogue order, as the line makes them.
  rows.push_back(judged("red_centroid", not_ok ? 3.5 : draw(entropy), "nm", 2.0));
  if (not_ok) rows.back().ok = "not_ok";
  rows.push_back(judged("infrared_centroid", draw(entropy), "nm", 2.0));
  rows.push_back(judged("red_forward_voltage", draw(entropy), "V", 2.0));
  rows.push_back(judged("infrared_forward_voltage", draw(entropy), "V", 2.0));
  rows.push_back(judged("dark_current", -0.0, "nA", 2.0));
  ReadingRow recorded;
  recorded.check = "id_resistance";
  recorded.value = 10200.0 + draw(entropy);
  recorded.unit = "ohm";
  recorded.definition = "sample/1";
  rows.push_back(recorded);
  ReadingRow watched;
  watched.check = "bin_mismatch";
  watched.none_reason = "no_peak";
  watched.unit = "nm";
  watched.ok = "watch";
  watched.definition = "sample/1";
  watched.cut_short = true;
  rows.push_back(watched);
  return rows;
}

Bytes wave(Entropy& entropy, std::size_t samples) {
  Bytes bytes;
  for (std::size_t i = 0; i < samples; ++i) {
    const double level = 20000.0 + 200.0 * std::sin(static_cast<double>(i) * 0.02) + 4.0 * draw(entropy);
    const auto counts = static_cast<std::uint16_t>(level);
    bytes.push_back(static_cast<std::byte>(counts & 0xff));
    bytes.push_back(static_cast<std::byte>(counts >> 8));
  }
  return bytes;
}

RunClosed closing(RunId run, const std::string& verdict) {
  RunClosed closed;
  closed.run = run;
  closed.verdict = verdict;
  if (verdict == "fail") closed.failing = {"red_centroid"};
  if (verdict == "void") closed.cause = "device_lost", closed.cause_words = "the phantom no longer answers";
  closed.provisional = verdict == "pass";
  closed.bench = Body::Object{{"lid", "closed"}, {"retries", 0}};
  return closed;
}

RunId whole_run(Store& store, const std::string& serial, Entropy& entropy, const std::string& verdict) {
  RunId run;
  demand(store.commit([&](Change& change) {
    add_documents(change);
    run = change.open_run(opening(serial, store.emulated()));
  }));
  demand(store.commit([&](Change& change) {
    change.add_capture(run, "spectrum_red", "", wave(entropy, 400));
    change.add_capture(run, "pulses", "1p0", wave(entropy, 1500));
    change.add_readings(run, readings(entropy, verdict == "fail"));
  }));
  demand(store.commit([&](Change& change) { change.close_run(closing(run, verdict)); }));
  return run;
}

void begin_second_volume(const std::string& path, const Clock& clock) {
  SeededEntropy entropy(20);
  {
    auto store = open(options(path), clock);
    whole_run(*store, "AQ20-047-00099", entropy, "fail");
  }
  close_volume({path, "Piet Hallgrim", "end of the year", "0.1.0", "0000000"}, clock).value();
}

}  // namespace probewright::db::sample
