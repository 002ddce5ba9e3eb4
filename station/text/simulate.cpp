#include "station/text/simulate.h"

#include <pthread.h>
#include <signal.h>

#include <future>

#include "db/sha256.h"
#include "station/base/files.h"
#include "station/base/numbers.h"
#include "station/base/strict_yaml.h"
#include "station/text/simulation_words.h"
#include "station/text/station_choice.h"

namespace probewright::text {
namespace {

using namespace sequence;
using namespace sequence::production;

/// Takes SIGINT and SIGTERM away from this thread and those that it starts, and tells when one has come.
class EndSignals {
 public:
  EndSignals() {
    sigemptyset(&signals_);
    sigaddset(&signals_, SIGINT);
    sigaddset(&signals_, SIGTERM);
    pthread_sigmask(SIG_BLOCK, &signals_, &before_);
  }
  ~EndSignals() { pthread_sigmask(SIG_SETMASK, &before_, nullptr); }
  EndSignals(const EndSignals&) = delete;
  EndSignals& operator=(const EndSignals&) = delete;

  /// Waits up to a fifth of a second.
  bool came() const {
    const timespec patience{0, 200'000'000};
    return sigtimedwait(&signals_, nullptr, &patience) > 0;
  }

 private:
  sigset_t signals_{}, before_{};
};

ResultOrFaults<Documented<limits::Sheet>> read_sheet_file(const std::string& file) {
  auto text = read_file(file, yaml::Document::max_bytes);
  if (!text) return Problems{text.error()};
  auto sheet = limits::read_sheet(*text, file);
  if (!sheet) return sheet.error();
  Documented<limits::Sheet> documented{std::move(*sheet), {}, {}};
  documented.document.file = file;
  documented.document.digest = db::sha256(*text);
  return documented;
}

std::string names_of(const Configuration& configuration) {
  std::string names;
  for (const auto& [name, model] : configuration.models) names += (names.empty() ? "" : ", ") + name;
  return names.empty() ? "none" : names;
}

/// The model and the sheet that are meant.
struct Meant {
  const Documented<measure::Model>* model = nullptr;
  Documented<limits::Sheet> sheet;
};

ResultOrFaults<Meant> meant_by(const SimulateOptions& options, const Configuration& configuration) {
  Meant meant;
  if (!options.sheet.empty()) {
    auto sheet = read_sheet_file(options.sheet);
    if (!sheet) return sheet.error();
    meant.sheet = std::move(*sheet);
  }
  std::string name = options.model.empty() ? meant.sheet.value.name : options.model;
  if (name.empty() && configuration.models.size() == 1) name = configuration.models.begin()->first;
  if (name.empty()) return Problems{{"simulation_model", "", {{"names", names_of(configuration)}}}};
  const auto found = configuration.models.find(name);
  if (found == configuration.models.end())
    return Problems{{"simulation_model_unknown", "", {{"model", name}, {"names", names_of(configuration)}}}};
  meant.model = &found->second;
  if (options.sheet.empty()) meant.sheet = configuration.sheets.at(name);
  if (auto faults = faults_against_model(meant.sheet, *meant.model); !faults.empty()) return faults;
  return meant;
}

Result<FaultMix> mix_of(const std::string& faults) {
  if (faults == "none") return FaultMix{FaultMix::Kind::none, 0.0};
  if (faults == "lot") return FaultMix{FaultMix::Kind::lot, 0.0};
  const auto rate = parse_double(faults);
  if (!rate) return Problem{"simulation_faults", "", {{"text", faults}}};
  return FaultMix{FaultMix::Kind::rate, *rate};
}

/// Runs it beside this thread, which shows how far it is and hears when it shall end.
Result<Simulation> watched(const SimulatedDocuments& documents, const SimulationOptions& options, Console& console) {
  SimulationWatch watch;
  const EndSignals end;
  Progress progress{console, "probes tested"};
  auto answer = std::async(std::launch::async, [&] { return production::simulate(documents, options, watch); });
  while (answer.wait_for(std::chrono::seconds{0}) != std::future_status::ready) {
    if (end.came()) watch.stop = true;
    progress.at(watch.tested, options.probes);
  }
  return answer.get();
}

}  // namespace

int simulate(const SimulateOptions& options, Console& console) {
  const auto mix = mix_of(options.faults);
  if (!mix) return console.refuse(mix.error());
  const auto configuration = chosen_configuration(options.choice);
  if (!configuration) return console.refuse(configuration.error());
  const auto meant = meant_by(options, *configuration);
  if (!meant) return console.refuse(meant.error());
  const auto certificates = simulated_certificates(*configuration);
  if (!certificates) return console.refuse(certificates.error());
  SimulationOptions asked = options.simulation;
  asked.faults = *mix;
  const SimulatedDocuments documents{meant->model->value, meant->sheet.value, *certificates};
  const auto simulation = watched(documents, asked, console);
  if (!simulation) return console.refuse(simulation.error());
  if (console.json())
    console.print_json(json_of(documents, *simulation));
  else
    console.print_text(to_text(documents, *simulation));
  return done;
}

}  // namespace probewright::text
