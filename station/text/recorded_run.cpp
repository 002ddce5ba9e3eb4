#include "station/text/recorded_run.h"

#include <algorithm>

#include "station/base/entropy.h"
#include "station/base/numbers.h"

namespace probewright::text {

using namespace sequence;

Body header_of(const RecordedRun& run) {
  Body::Array documents;
  for (const std::string& digest : run.documents) documents.emplace_back(digest);
  return Body::Object{{"recording", 1},
                      {"station", run.station},
                      {"started", to_text(run.started)},
                      {"speed", shortest(run.speed)},
                      {"seed", std::to_string(run.seed)},
                      {"first_sequence", static_cast<std::int64_t>(run.first_sequence)},
                      {"version", run.version},
                      {"commit", run.commit},
                      {"documents", documents},
                      {"serial", run.order.serial},
                      {"nest", run.order.nest},
                      {"purpose", slug(run.order.purpose)},
                      {"operator", run.order.operator_name}};
}

namespace {

std::optional<std::uint64_t> seed_in(const std::string& text) {
  std::uint64_t seed = 0;
  if (text.empty() || text.size() > 20) return std::nullopt;
  for (const char c : text) {
    if (c < '0' || c > '9') return std::nullopt;
    seed = 10 * seed + static_cast<std::uint64_t>(c - '0');
  }
  return seed;
}

}  // namespace

Result<RecordedRun> run_in(const Body& header, std::string_view where) {
  const auto none = [where](const std::string& reason) {
    return Problem{"recording_no_run", std::string(where), {{"reason", reason}}};
  };
  RecordedRun run;
  run.order.serial = header.text("serial");
  if (run.order.serial.empty()) return none("its header names no serial");
  run.order.nest = static_cast<int>(header.number("nest"));
  if (const auto purpose = find_purpose(header.text("purpose"))) run.order.purpose = *purpose;
  run.order.operator_name = header.text("operator");
  run.station = header.text("station");
  const auto started = parse_utc(header.text("started"));
  const auto speed = parse_double(header.text("speed"));
  const auto seed = seed_in(header.text("seed"));
  if (!started || !speed || !(*speed > 0.0) || !seed) return none("its header lacks start, speed or seed");
  run.started = *started;
  run.speed = *speed;
  run.seed = *seed;
  run.first_sequence = static_cast<std::uint16_t>(header.number("first_sequence"));
  run.version = header.text("version");
  run.commit = header.text("commit");
  const Body* documents = header.find("documents");
  if (documents && documents->array()) {
    for (const Body& digest : *documents->array()) run.documents.push_back(digest.string() ? *digest.string() : "");
  }
  return run;
}

std::vector<std::pair<std::string, const DocumentText*>> documents_of(const Configuration& configuration) {
  std::vector<std::pair<std::string, const DocumentText*>> all;
  const auto add = [&](const DocumentText& document) {
    const auto path = std::filesystem::path{document.file}.lexically_relative(configuration.folder).generic_string();
    const bool there = std::any_of(all.begin(), all.end(), [&](const auto& item) { return item.first == path; });
    if (!there) all.emplace_back(path, &document);  // two models may name one table
  };
  add(configuration.station.document);
  for (const auto& [name, model] : configuration.models) {
    add(model.document);
    for (const DocumentText& part : model.parts) add(part);
  }
  if (configuration.diagnosis) add(configuration.diagnosis->document);
  if (configuration.people) add(configuration.people->document);
  for (const auto& [name, sheet] : configuration.sheets) add(sheet.document);
  for (const auto& [name, certificate] : configuration.phantom_certificates) add(certificate.document);
  for (const auto& [name, certificate] : configuration.adapter_certificates) add(certificate.document);
  return all;
}

std::vector<std::string> digests_of(const Configuration& configuration) {
  std::vector<std::string> digests;
  for (const auto& [path, document] : documents_of(configuration)) digests.push_back(to_hex(document->digest));
  std::sort(digests.begin(), digests.end());
  return digests;
}

std::uint16_t first_sequence_of(std::uint64_t seed) {
  SeededEntropy entropy{seed};
  return static_cast<std::uint16_t>(entropy.next() + 1);
}

namespace {

/// The lines of an outcome that do not hang on the ledger.
std::vector<std::string> lines_of(std::string_view json) {
  std::vector<std::string> lines;
  while (!json.empty()) {
    const auto end = std::min(json.find('\n'), json.size());
    const std::string_view line = json.substr(0, end);
    json.remove_prefix(std::min(end + 1, json.size()));
    const auto first = line.find_first_not_of(' ');
    const std::string_view text = first == std::string_view::npos ? std::string_view{} : line.substr(first);
    const bool of_ledger =
        text.starts_with("\"run\":") || text.starts_with("\"entry\":") || text.starts_with("\"seal\":");
    if (!of_ledger && !text.empty()) lines.emplace_back(text);
  }
  return lines;
}

}  // namespace

std::vector<std::string> differences(const std::string& recorded_json, const std::string& replayed_json) {
  const auto recorded = lines_of(recorded_json), replayed = lines_of(replayed_json);
  std::vector<std::string> differing;
  for (std::size_t i = 0; i < std::max(recorded.size(), replayed.size()); ++i) {
    const std::string then = i < recorded.size() ? recorded[i] : "nothing";
    const std::string now = i < replayed.size() ? replayed[i] : "nothing";
    if (then != now) differing.push_back("recorded " + then + " now " + now);
  }
  return differing;
}

}  // namespace probewright::text
