#pragma once
#include <filesystem>
#include <map>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "limits/diagnosis/rules.h"
#include "limits/sheet.h"
#include "station/base/digest.h"
#include "station/measure/certificate.h"
#include "station/measure/model.h"
#include "station/sequence/people_file.h"
#include "station/sequence/station_file.h"

namespace probewright::sequence {

/// A file that can change a verdict, as it was read: the ledger keeps its text by digest when it is first used.
struct DocumentText {
  std::string kind;  ///< "station", "model", "sheet", "certificate", "haemoglobin table"
  std::string name;  ///< "AQ-20", "PHC-2026-0101"
  int revision = 0;  ///< 0 where the kind has none
  std::string file;
  std::string text;
  Digest digest{};
};

template <class T>
struct Documented {
  T value;
  DocumentText document;
  std::vector<DocumentText> parts;  ///< documents that this one names by their digest: a model's haemoglobin table
};

/// Everything that the line is told from files, read once before it starts. Plain values; any thread may read it.
struct Configuration {
  std::filesystem::path folder;
  Documented<StationFile> station;
  std::map<std::string, Documented<measure::Model>, std::less<>> models;  ///< by name
  std::map<std::string, Documented<limits::Sheet>, std::less<>> sheets;   ///< by model name, the highest revision
  std::map<std::string, Documented<measure::PhantomCertificate>, std::less<>> phantom_certificates;  ///< by number
  std::map<std::string, Documented<measure::AdapterCertificate>, std::less<>> adapter_certificates;
  std::optional<Documented<limits::diagnosis::Rules>> diagnosis;  ///< without it no likely cause is named
  std::optional<Documented<PeopleFile>> people;                   ///< of the station; without it nobody can sign in

  /// The model whose serial pattern this serial matches as a whole, or nullptr; two matches give nullptr as well.
  const Documented<measure::Model>* model_of(std::string_view serial) const;
};

/// Where the configuration is: `chosen` (of --config), $PROBEWRIGHT_CONFIG, $XDG_CONFIG_HOME/probewright,
/// /etc/probewright, `installed`. The first that is a folder is taken whole.
/// Errors: configuration_missing (names all places).
Result<std::filesystem::path> find_configuration(std::string_view chosen, const std::filesystem::path& installed);

/// Reads stations/NAME.yaml (`station` empty: the only one there), models, sheets and certificates of `folder`.
/// All faults of all files at once; also: two documents of one name, a model without sheet, a check of a routine
/// that its sheet does not name, a haemoglobin table (tables/NAME.csv) that is not there or not the one that the model
/// names by its digest, bins that differ, a sheet written for another model file, a nest's certificate that
/// is not there.
ResultOrFaults<Configuration> read_configuration(const std::filesystem::path& folder, std::string_view station);

/// What a sheet and the model that it is used for tell differently: checks of the routine that the sheet does not name,
/// bins, the digest of another model file.
Problems faults_against_model(const Documented<limits::Sheet>& sheet, const Documented<measure::Model>& model);

/// The station file alone, chosen in the same way, for questions that need no model: a fault in a sheet does not keep
/// an auditor from the ledger.
ResultOrFaults<Documented<StationFile>> read_station(const std::filesystem::path& folder, std::string_view station);

}  // namespace probewright::sequence
