#include <filesystem>
#include <fstream>
#include <ostream>
#include <set>

#include "db/bundle.h"
#include "db/file_work.h"
#include "db/queries/capture_bytes.h"
#include "db/queries/document.h"
#include "db/queries/run_numbers.h"
#include "db/queries/seal.h"
#include "station/text/history_words.h"
#include "station/text/interruption.h"
#include "station/text/ledger.h"
#include "station/text/ledger_file.h"
#include "station/text/ledger_note.h"
#include "station/text/run_tables.h"

namespace probewright::text {
namespace {

/// Letters, digits and - _ . of a name, so that it can be a file's.
std::string plain(std::string name) {
  for (char& c : name)
    if (!((c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z') || (c >= '0' && c <= '9') || c == '-' || c == '_')) c = '_';
  return name.substr(0, 40);
}

/// The runs that are asked for, and everything that is written about them.
class Export {
 public:
  Export(const LedgerExportOptions& options, std::string ledger, db::Reader& reader, Console& console)
      : options_(options), ledger_(std::move(ledger)), reader_(reader), console_(console) {
    runs_ = !options.serial.empty() ? db::closed_runs_of_serial(reader, options.serial)
            : !options.lot.empty()  ? db::closed_runs_of_lot(reader, options.lot)
                                    : db::closed_runs(reader);
    seal_ = db::newest_seal(reader);
    copy_ = db::is_copy(ledger_);
  }

  std::size_t runs() const { return runs_.size(); }
  const db::Seal& seal() const { return seal_; }
  std::string what() const {
    if (!options_.serial.empty()) return "runs of serial " + options_.serial;
    if (!options_.lot.empty()) return "runs of lot " + options_.lot;
    return "all closed runs";
  }

  void write_runs(std::ostream& out) {
    write_runs_head(out);
    each("runs written", [&](const db::RunRecord& run) { write_run_line(out, run); });
  }
  void write_readings(std::ostream& out) {
    write_readings_head(out);
    each("runs written", [&](const db::RunRecord& run) { write_reading_lines(out, run); });
  }
  void write_json(std::ostream& out) {
    out << "{\n\"format\": 1,\n\"what\": " << trimmed(Json{what()}) << ",\n\"seal\": \"" << to_hex(seal_.hash)
        << "\",\n\"seal_entry\": " << seal_.entry << ",\n\"runs\": [";
    const char* before = "\n";
    each("runs written", [&](const db::RunRecord& run) {
      Json json = json_of(run);
      json.set("serial", run.opened.serial);
      out << before << trimmed(json);
      before = ",\n";
    });
    out << "\n]\n}\n";
  }

  std::vector<db::BundlePart> parts(bool is_signed) {
    std::vector<db::BundlePart> all;
    all.push_back({"README.txt", [this, is_signed](std::ostream& out) { write_words(out, is_signed); }});
    all.push_back({"runs.csv", [this](std::ostream& out) { write_runs(out); }});
    all.push_back({"readings.csv", [this](std::ostream& out) { write_readings(out); }});
    all.push_back({"runs.json", [this](std::ostream& out) { write_json(out); }});
    add_documents(all);
    if (options_.with_captures) add_captures(all);
    return all;
  }

 private:
  static std::string trimmed(const Json& json) {
    std::string text = json.text();
    while (!text.empty() && text.back() == '\n') text.pop_back();
    return text;
  }

  void each(std::string_view doing, const std::function<void(const db::RunRecord&)>& take) {
    Progress progress(console_, doing);
    long long done = 0;
    for (const db::RunId id : runs_) {
      if (stop_.stop_requested()) throw ProblemError({"copy_stopped", options_.to});
      if (const auto run = db::run_record(reader_, id)) take(*run);
      progress.at(++done, static_cast<long long>(runs_.size()));
    }
  }

  void add_documents(std::vector<db::BundlePart>& all) {
    std::set<Digest> digests;
    each("documents gathered", [&](const db::RunRecord& run) {
      for (const db::NamedDocument& document : run.documents) digests.insert(document.digest);
      for (const db::RunDevice& device : run.opened.devices)
        if (device.certificate) digests.insert(*device.certificate);
    });
    for (const Digest& digest : digests) {
      auto document = db::document_by_digest(reader_, digest);
      if (!document) continue;
      const std::string name = "documents/" + plain(document->kind) + "-" + plain(document->name) + "-" +
                               to_hex(digest).substr(0, 16) + ".txt";
      all.push_back({name, [text = std::move(document->text)](std::ostream& out) { out << text; }});
    }
  }

  void add_captures(std::vector<db::BundlePart>& all) {
    each("captures gathered", [&](const db::RunRecord& run) {
      for (const db::CaptureRecord& capture : run.captures)
        if (!capture.pruned)
          all.push_back({"captures/run-" + std::to_string(run.run.value) + "-" + plain(capture.kind) + ".bin",
                         [this, number = capture.number](std::ostream& out) {
                           const Bytes bytes = db::capture_bytes(reader_, number).value();
                           out.write(reinterpret_cast<const char*>(bytes.data()),
                                     static_cast<std::streamsize>(bytes.size()));
                         }});
    });
  }

  void write_words(std::ostream& out, bool is_signed) const {
    const db::CheckCommands commands = db::check_commands(is_signed);
    out << "Probewright, export of " << what() << " (" << runs_.size() << " runs)\n\n"
        << "Read from the ledger as of entry " << seal_.entry << ", seal\n  " << to_hex(seal_.hash) << "\n\n"
        << "To check that every file is as it was written, in this folder:\n  " << commands.sums << "\n";
    if (is_signed)
      out << "To check who wrote the list of files:\n  " << commands.signature
          << "\nThe public key in this folder says nothing by itself: compare it with the one that the station's\n"
             "steward gave you by another way.\n";
    else
      out << "The list of files is not signed.\n";
    out << "\nruns.csv, readings.csv: RFC 4180, UTF-8, times in UTC, empty cells where there is no value.\n"
           "runs.json: the same and more, as 'probewright trace --json' prints it.\n"
           "documents/: the documents that the runs stood on; the name ends with the first digits of the SHA-256.\n";
    if (options_.with_captures) out << "captures/: raw data of the runs as the devices sent it, unpacked.\n";
    out << (copy_ ? "\nMade from a copy of the ledger: this export is not recorded in it.\n"
                  : "\nThis export is recorded as an entry of the ledger after the entry above.\n");
  }

  const LedgerExportOptions& options_;
  std::string ledger_;
  db::Reader& reader_;
  Console& console_;
  std::vector<db::RunId> runs_;
  db::Seal seal_;
  bool copy_ = false;

 public:
  std::stop_token stop_;
};

/// One table or JSON file, made whole before it has its name.
Result<db::FileDigest> write_table(Export& data, const LedgerExportOptions& options) {
  if (db::file_exists(options.to)) return Problem{"file_exists", options.to};
  db::Unfinished part(options.to + ".part");
  {
    std::ofstream file(part.path(), std::ios::binary);
    if (options.as == "runs")
      data.write_runs(file);
    else if (options.as == "readings")
      data.write_readings(file);
    else
      data.write_json(file);
    file.close();
    if (!file) return Problem{"export_not_written", options.to};
  }
  const auto digest = db::digest_of_file(part.path());
  if (!digest) return digest.error();
  if (auto named = db::name_file(part.path(), options.to); !named) return named.error();
  part.keep();
  return *digest;
}

Result<std::optional<db::SigningKey>> signing_key(const std::string& file) {
  if (file.empty()) return std::optional<db::SigningKey>{};
  auto key = db::SigningKey::read(file);
  if (!key) return key.error();
  return std::optional{std::move(*key)};
}

Body export_body(const Export& data, const LedgerExportOptions& options, const Digest& digest, std::int64_t size) {
  return Body::Object{{"as", options.as},
                      {"entry", data.seal().entry},
                      {"file", options.to},
                      {"runs", static_cast<std::int64_t>(data.runs())},
                      {"seal", to_hex(data.seal().hash)},
                      {"sha256", to_hex(digest)},
                      {"size", size},
                      {"what", data.what()}};
}

}  // namespace

int ledger_export(const LedgerExportOptions& options, Console& console) {
  const auto ledger = ledger_file(options.ledger, options.choice);
  if (!ledger) return console.refuse(ledger.error());
  auto reader = db::Reader::open(*ledger);
  if (!reader) return console.refuse(reader.error());
  const auto key = signing_key(options.key);
  if (!key) return console.refuse(key.error());
  const Interruption interruption;
  Export data(options, *ledger, *reader, console);
  data.stop_ = interruption.token();
  if (data.runs() == 0)
    return console.refuse(Problem{"export_nothing", *ledger, {{"what", data.what()}}}, answer_is_no);

  Json json = Json::object();
  json.set("format", 1).set("file", options.to).set("as", options.as).set("runs", data.runs());
  json.set("seal", to_hex(data.seal().hash)).set("seal_entry", data.seal().entry);
  Digest digest{};
  std::int64_t size = 0;
  const bool bundle = options.as == "bundle";
  const db::CheckCommands commands = db::check_commands(key->has_value());
  if (bundle) {
    const auto made = db::write_bundle(options.to, data.parts(key->has_value()), *key);
    if (!made) return console.refuse(made.error());
    digest = made->manifest, size = made->size;
    json.set("manifest_sha256", to_hex(digest)).set("files", made->files);
    json.set("public_key", key->has_value() ? Json{made->public_key} : Json{nullptr});
    Json list = Json::array();
    list.add(commands.sums);
    if (key->has_value()) list.add(commands.signature);
    json.set("check", std::move(list));
  } else {
    const auto made = write_table(data, options);
    if (!made) return console.refuse(made.error());
    digest = made->digest, size = made->size;
    json.set("sha256", to_hex(digest));
  }
  const bool recorded =
      note_in_ledger(*ledger, options.build, "export", options.who, export_body(data, options, digest, size), console);
  if (console.json()) {
    console.print_json(json.set("bytes", size).set("recorded", recorded));
    return done;
  }
  console.print(options.to + ": " + data.what() + " (" + std::to_string(data.runs()) + " runs)");
  if (!bundle) {
    console.print("sha256  " + to_hex(digest));
    return done;
  }
  console.print("To check it, in its folder:");
  console.print("  " + commands.sums);
  console.print(key->has_value() ? "  " + commands.signature : "  (not signed: no --key was given)");
  return done;
}

}  // namespace probewright::text
