#include "station/sequence/configuration.h"

#include <algorithm>
#include <cstdlib>
#include <regex>
#include <system_error>

#include "db/sha256.h"
#include "station/base/files.h"
#include "station/base/strict_yaml.h"

namespace probewright::sequence {
namespace {

namespace fs = std::filesystem;

constexpr std::size_t longest_table_bytes = 1 << 20;

/// The .yaml files of a folder by name, so that faults come in the same order everywhere.
std::vector<fs::path> yaml_files(const fs::path& folder) {
  std::vector<fs::path> files;
  std::error_code ignored;  // a folder that is not there holds no files
  for (const auto& item : fs::directory_iterator(folder, ignored))
    if (item.path().extension() == ".yaml") files.push_back(item.path());
  std::sort(files.begin(), files.end());
  return files;
}

class Reading {
 public:
  explicit Reading(fs::path folder) { configuration_.folder = std::move(folder); }

  ResultOrFaults<Configuration> read(std::string_view station) {
    read_station(station);
    read_models();
    read_sheets();
    read_certificates();
    read_people();
    read_diagnosis();
    if (faults_.empty()) cross_check();
    if (!faults_.empty()) return std::move(faults_);
    return std::move(configuration_);
  }

  ResultOrFaults<Documented<StationFile>> read_station_alone(std::string_view station) {
    read_station(station);
    if (!faults_.empty()) return std::move(faults_);
    return std::move(configuration_.station);
  }

 private:
  /// Text and parsed value of one file, or nothing after its faults were noted.
  template <class Reader>
  auto parse(const fs::path& file, std::string_view kind, Reader reader) {
    using Value = typename decltype(reader(std::string_view{}, std::string_view{}))::value_type;
    std::optional<Documented<Value>> documented;
    auto text = read_file(file, yaml::Document::max_bytes);
    if (!text) {
      faults_.push_back(text.error());
      return documented;
    }
    auto value = reader(std::string_view{*text}, std::string_view{file.string()});
    if (!value) {
      add(value.error());
      return documented;
    }
    documented = Documented<Value>{std::move(*value), {}, {}};
    documented->document.kind = kind;
    documented->document.file = file.string();
    documented->document.digest = db::sha256(*text);
    documented->document.text = std::move(*text);
    return documented;
  }

  /// Keeps a document under its name; a second one of that name is a fault.
  template <class Value>
  void keep(std::map<std::string, Documented<Value>, std::less<>>& map, Documented<Value> documented) {
    const std::string name = documented.document.name;
    const auto [place, fresh] = map.try_emplace(name, std::move(documented));
    if (!fresh)
      faults_.push_back(
          {"document_twice",
           documented.document.file,
           {{"kind", place->second.document.kind}, {"name", name}, {"other", place->second.document.file}}});
  }

  void read_station(std::string_view wanted) {
    const auto files = yaml_files(configuration_.folder / "stations");
    std::vector<Documented<StationFile>> found;
    for (const auto& file : files) {
      if (auto station = parse(file, "station", read_station_file)) {
        station->document.name = station->value.station;
        if (wanted.empty() || station->value.station == wanted) found.push_back(std::move(*station));
      }
    }
    const std::string where = (configuration_.folder / "stations").string();
    if (!faults_.empty()) return;
    if (found.empty())
      faults_.push_back({"station_not_found", where, {{"station", wanted.empty() ? "any" : std::string{wanted}}}});
    else if (found.size() > 1)
      faults_.push_back({"station_not_chosen", where, {{"count", std::to_string(found.size())}}});
    else
      configuration_.station = std::move(found.front());
  }

  void read_models() {
    for (const auto& file : yaml_files(configuration_.folder / "models"))
      if (auto model = parse(file, "model", measure::read_model)) {
        model->document.name = model->value.name;
        model->document.revision = model->value.revision;
        attach_table(*model);
        keep(configuration_.models, std::move(*model));
      }
  }

  /// The haemoglobin table that a model names, if it is the very one.
  void attach_table(Documented<measure::Model>& model) {
    if (!model.value.saturation) return;
    const auto& named = *model.value.saturation;
    const fs::path file = configuration_.folder / "tables" / (named.table + ".csv");
    auto text = read_file(file, longest_table_bytes);
    if (!text) {
      faults_.push_back(text.error());
      return;
    }
    const Digest digest = db::sha256(*text);
    if (to_hex(digest) != named.table_sha256) {
      faults_.push_back({"table_not_named",
                         file.string(),
                         {{"model", model.document.file}, {"named", named.table_sha256}, {"found", to_hex(digest)}}});
      return;
    }
    add(measure::attach_haemoglobin(model.value, *text, file.string()));
    model.parts.push_back({"haemoglobin table", named.table, 0, file.string(), std::move(*text), digest});
  }

  /// Revisions of one sheet stand side by side in the folder; the highest is the one to use.
  void read_sheets() {
    for (const auto& file : yaml_files(configuration_.folder / "sheets"))
      if (auto sheet = parse(file, "sheet", limits::read_sheet)) {
        sheet->document.name = sheet->value.name;
        sheet->document.revision = sheet->value.revision;
        auto& map = configuration_.sheets;
        const auto older = map.find(sheet->value.name);
        if (older != map.end() && older->second.value.revision < sheet->value.revision) map.erase(older);
        if (older == map.end() || older->second.value.revision <= sheet->value.revision) keep(map, std::move(*sheet));
      }
  }

  void read_certificates() {
    for (const auto& file : yaml_files(configuration_.folder / "certificates" / "phantoms"))
      if (auto certificate = parse(file, "certificate", measure::read_phantom_certificate)) {
        certificate->document.name = certificate->value.head.number;
        keep(configuration_.phantom_certificates, std::move(*certificate));
      }
    for (const auto& file : yaml_files(configuration_.folder / "certificates" / "adapters"))
      if (auto certificate = parse(file, "certificate", measure::read_adapter_certificate)) {
        certificate->document.name = certificate->value.head.number;
        keep(configuration_.adapter_certificates, std::move(*certificate));
      }
  }

  /// The rules of diagnosis; there is one document of them.
  void read_diagnosis() {
    for (const auto& file : yaml_files(configuration_.folder / "diagnosis")) {
      auto rules = parse(file, "diagnosis", limits::diagnosis::read_rules);
      if (!rules) continue;
      rules->document.name = rules->value.name;
      rules->document.revision = rules->value.revision;
      if (configuration_.diagnosis)
        faults_.push_back(
            {"document_twice",
             rules->document.file,
             {{"kind", "diagnosis"}, {"name", rules->value.name}, {"other", configuration_.diagnosis->document.file}}});
      configuration_.diagnosis = std::move(*rules);
    }
  }

  /// The people document that carries the station's name, if there is one.
  void read_people() {
    for (const auto& file : yaml_files(configuration_.folder / "people")) {
      auto people = parse(file, "people", read_people_file);
      if (!people || people->value.name != configuration_.station.value.station) continue;
      people->document.name = people->value.name;
      people->document.revision = people->value.revision;
      if (configuration_.people)
        faults_.push_back(
            {"document_twice",
             people->document.file,
             {{"kind", "people"}, {"name", people->value.name}, {"other", configuration_.people->document.file}}});
      configuration_.people = std::move(*people);
    }
  }

  void add(const Problems& problems) { faults_.insert(faults_.end(), problems.begin(), problems.end()); }

  void cross_check() {
    for (const auto& [name, model] : configuration_.models) check_sheet_of(model);
    for (const auto& nest : configuration_.station.value.nests) {
      need_certificate(configuration_.phantom_certificates, nest.phantom.certificate, nest.nest);
      need_certificate(configuration_.adapter_certificates, nest.adapter.certificate, nest.nest);
    }
  }

  void check_sheet_of(const Documented<measure::Model>& model) {
    const auto sheet = configuration_.sheets.find(model.value.name);
    if (sheet == configuration_.sheets.end()) {
      faults_.push_back({"model_without_sheet", model.document.file, {{"model", model.value.name}}});
      return;
    }
    add(faults_against_model(sheet->second, model));
  }

  template <class Map>
  void need_certificate(const Map& map, const std::string& number, int nest) {
    if (map.find(number) == map.end())
      faults_.push_back({"certificate_not_found",
                         configuration_.station.document.file,
                         {{"number", number}, {"nest", std::to_string(nest)}}});
  }

  Configuration configuration_;
  Problems faults_;
};

std::string from_environment(const char* variable) {
  const char* value = std::getenv(variable);
  return value ? value : "";
}

}  // namespace

const Documented<measure::Model>* Configuration::model_of(std::string_view serial) const {
  const Documented<measure::Model>* found = nullptr;
  for (const auto& [name, model] : models) {
    const std::regex pattern{model.value.serial_pattern};
    if (!std::regex_match(serial.begin(), serial.end(), pattern)) continue;
    if (found) return nullptr;
    found = &model;
  }
  return found;
}

Result<fs::path> find_configuration(std::string_view chosen, const fs::path& installed) {
  std::vector<fs::path> places;
  if (!chosen.empty()) {
    places = {fs::path{chosen}};
  } else {
    if (const auto own = from_environment("PROBEWRIGHT_CONFIG"); !own.empty()) places.emplace_back(own);
    auto home = from_environment("XDG_CONFIG_HOME");
    if (home.empty()) home = from_environment("HOME") + "/.config";
    places.emplace_back(fs::path{home} / "probewright");
    places.emplace_back("/etc/probewright");
    places.push_back(installed);
  }
  std::string tried;
  std::error_code ignored;
  for (const auto& place : places) {
    if (fs::is_directory(place, ignored)) return place;
    tried += (tried.empty() ? "" : ", ") + place.string();
  }
  return Problem{"configuration_missing", "", {{"places", tried}}};
}

ResultOrFaults<Configuration> read_configuration(const fs::path& folder, std::string_view station) {
  return Reading{folder}.read(station);
}

ResultOrFaults<Documented<StationFile>> read_station(const fs::path& folder, std::string_view station) {
  return Reading{folder}.read_station_alone(station);
}

Problems faults_against_model(const Documented<limits::Sheet>& sheet, const Documented<measure::Model>& model) {
  Problems faults = limits::faults_against_routine(sheet.value, model.value.routine);
  std::vector<limits::ModelBin> bins;
  for (const auto& bin : model.value.bins) bins.push_back({bin.name, bin.nominal_nm.red, bin.coded_ohm});
  const Problems of_bins = limits::faults_against_bins(sheet.value, bins);
  faults.insert(faults.end(), of_bins.begin(), of_bins.end());
  if (sheet.value.for_model && *sheet.value.for_model != model.document.digest)
    faults.push_back({"sheet_for_other_model",
                      sheet.document.file,
                      {{"model", model.document.file}, {"digest", to_hex(model.document.digest)}}});
  return faults;
}

}  // namespace probewright::sequence
