#pragma once
#include <unistd.h>

#include <algorithm>
#include <filesystem>
#include <map>
#include <memory>
#include <string>
#include <utility>
#include <vector>

#include "db/store.h"

/// A ledger that a test writes entry by entry, at times that it chooses.
namespace probewright::made {

/// Stands where it is put, and goes on by a millisecond each time it is asked.
class HandClock final : public Clock {
 public:
  UtcTime utc_now() const override { return now_.microseconds += 1000, now_; }
  SteadyTime steady_now() const override { return {std::chrono::microseconds{now_.microseconds}}; }
  void put(std::string_view utc) { now_ = parse_utc(utc).value(); }

 private:
  mutable UtcTime now_ = parse_utc("2026-12-01T05:00:00Z").value();
};

/// A judged reading from 655 to 665 with acceptance limits 656 and 664, in nm: margin 1 at 660.
inline db::ReadingRow centroid(double value, const std::string& check = "red_centroid") {
  db::ReadingRow row;
  row.check = check;
  row.value = value;
  row.unit = "nm";
  row.expanded_uncertainty = 0.3;
  row.lower = 655.0, row.upper = 665.0;
  row.acceptance_lower = 656.0, row.acceptance_upper = 664.0;
  row.margin = 1.0 - std::max(value - 660.0, 660.0 - value) / 4.0;
  row.ok = *row.margin >= 0.0 ? "ok" : "not_ok";
  row.definition = "centroid;v1";
  return row;
}

/// A judged reading up to 5 nA, accepted up to 4.8: margin 1 at 0.8.
inline db::ReadingRow dark_current(double value) {
  db::ReadingRow row;
  row.check = "dark_current";
  row.value = value;
  row.unit = "nA";
  row.expanded_uncertainty = 0.1;
  row.upper = 5.0, row.acceptance_upper = 4.8;
  row.margin = (4.8 - value) / 4.0;
  row.ok = *row.margin >= 0.0 ? "ok" : "not_ok";
  row.definition = "dark;v1";
  return row;
}

struct Run {
  std::string serial = "AQ20-048-00001";
  std::string verdict = "pass";  ///< empty: left open
  std::string purpose = "production";
  std::string lot = "AQ20-W48-07";
  int nest = 1;
  std::string operator_name = "Imre Vasko";
  std::string likely_cause, likely_cause_words, rework;
  double cycle_s = 0.0;  ///< 0: not told
  std::vector<db::ReadingRow> readings = {centroid(660.0)};
  std::vector<std::pair<std::string, Bytes>> captures = {};  ///< kind and decoded bytes
};

class Ledger {
 public:
  explicit Ledger(std::string path, bool emulated = true) : path_(std::move(path)), emulated_(emulated) {
    documents_ = {{"station", "Quay-1", "", "station: Quay-1\n", "station"},
                  {"model", "AQ-20", "1", "model: AQ-20\n", "station"},
                  {"sheet", "AQ-20", "4", "sheet: AQ-20\n", "station"}};
    db::StoreOptions options;
    options.path = path_;
    options.station = "Quay-1";
    options.emulated = emulated;
    store_ = db::Store::open(options, clock_).value();
  }

  HandClock& clock() { return clock_; }
  db::Store& store() { return *store_; }
  const std::string& path() const { return path_; }
  db::Reader reader() const { return db::Reader::open(path_).value(); }
  /// Stands in for the text of a document of this kind and name from now on.
  void use(const db::DocumentRow& document) {
    for (db::DocumentRow& known : documents_)
      if (known.kind == document.kind && known.name == document.name) return void(known = document);
    documents_.push_back(document);
  }

  /// Fails name the checks of the readings that are not ok. Throws ProblemError.
  db::RunId run(const Run& wanted) {
    db::RunId id;
    change([&](db::Change& change) {
      id = change.open_run(opened(change, wanted));
      change.add_readings(id, wanted.readings);
      for (const auto& [kind, bytes] : wanted.captures) change.add_capture(id, kind, "", bytes);
      if (!wanted.verdict.empty()) change.close_run(closed(id, wanted));
    });
    return id;
  }
  void close(db::RunId id, const Run& wanted) {
    change([&](db::Change& change) { change.close_run(closed(id, wanted)); });
  }
  std::int64_t entry(const std::string& kind, const std::string& who, const Body& data) {
    std::int64_t number = 0;
    change([&](db::Change& change) { number = change.add_entry(kind, who, data); });
    return number;
  }
  void change(const std::function<void(db::Change&)>& job) {
    if (const auto outcome = store_->commit(job); !outcome) throw ProblemError(outcome.error());
  }

 private:
  db::RunOpened opened(db::Change& change, const Run& wanted) const {
    db::RunOpened opened;
    opened.serial = wanted.serial;
    opened.purpose = wanted.purpose;
    opened.emulated = emulated_;
    opened.lot = wanted.lot;
    opened.model = "AQ-20";
    opened.nest = wanted.nest;
    opened.station = "Quay-1";
    opened.operator_name = wanted.operator_name;
    for (const db::DocumentRow& document : documents_)
      opened.documents.push_back(
          {document.kind == "certificate" ? "phantom certificate" : document.kind, change.add_document(document)});
    opened.devices = {{"phantom", "PH-01", "1.0.0", "PHC-2026-0101", std::nullopt},
                      {"adapter", "AD-01", "1.0.0", "ADC-2026-0101", std::nullopt}};
    opened.software_version = "0.1.0";
    opened.software_commit = "0000000";
    opened.compiler = "clang";
    opened.ambient_temperature_C = 24.5;
    return opened;
  }
  static db::RunClosed closed(db::RunId id, const Run& wanted) {
    db::RunClosed closed;
    closed.run = id;
    closed.verdict = wanted.verdict;
    if (wanted.verdict == "fail") {
      closed.cause = "limits";
      for (const db::ReadingRow& reading : wanted.readings)
        if (reading.ok == "not_ok") closed.failing.push_back(reading.check);
    }
    if (wanted.verdict == "void") closed.cause = "device_lost", closed.cause_words = "the adapter was lost";
    Body::Object bench;
    if (!wanted.likely_cause.empty()) bench["likely_cause"] = wanted.likely_cause;
    if (!wanted.likely_cause_words.empty()) bench["likely_cause_words"] = wanted.likely_cause_words;
    if (!wanted.rework.empty()) bench["rework"] = wanted.rework;
    if (wanted.cycle_s > 0.0) bench["cycle_us"] = static_cast<std::int64_t>(wanted.cycle_s * 1e6);
    closed.bench = std::move(bench);
    return closed;
  }

  std::string path_;
  bool emulated_;
  HandClock clock_;
  std::vector<db::DocumentRow> documents_;
  std::unique_ptr<db::Store> store_;
};

/// A folder that goes away with the test.
class Folder {
 public:
  Folder() {
    std::string name = (std::filesystem::temp_directory_path() / "probewright-made-XXXXXX").string();
    path_ = mkdtemp(name.data());
  }
  ~Folder() {
    std::error_code ignored;
    std::filesystem::remove_all(path_, ignored);
  }
  Folder(const Folder&) = delete;
  Folder& operator=(const Folder&) = delete;
  std::string file(const std::string& name) const { return (path_ / name).string(); }

 private:
  std::filesystem::path path_;
};

}  // namespace probewright::made
