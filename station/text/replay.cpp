#include "station/text/replay.h"

#include <boost/asio/co_spawn.hpp>

#include "db/memory_vfs.h"
#include "drivers/wire/inline_workers.h"
#include "drivers/wire/recording_folder.h"
#include "drivers/wire/replay_line.h"
#include "drivers/wire/virtual_clock.h"
#include "station/base/numbers.h"
#include "station/text/recorded_run.h"
#include "station/text/run_text.h"
#include "station/text/single_run.h"

namespace probewright::text {
namespace {

namespace asio = boost::asio;
using namespace sequence;

/// The documents of the recording, held against the digests in its header.
ResultOrFaults<Configuration> recorded_configuration(const std::string& folder, const RecordedRun& run) {
  auto configuration = read_configuration(folder + "/configuration", run.station);
  if (!configuration) return configuration;
  if (digests_of(*configuration) != run.documents)
    return Problems{{"recording_no_run", folder, {{"reason", "its documents are not those of its header"}}}};
  std::erase_if(configuration->station.value.nests,
                [&](const NestPlace& place) { return place.nest != run.order.nest; });
  if (configuration->station.value.nests.empty())
    return Problems{{"nest_not_there", folder, {{"nest", std::to_string(run.order.nest)}}}};
  configuration->station.value.speed = run.speed;
  return configuration;
}

/// A replayed run and what it stands on. The order of the members is the order in which they may go.
struct Replayed {
  Replayed(const RecordedRun& recorded, const Configuration& configuration, std::vector<wire::LineRecording> lines,
           Console& console)
      : clock(recorded.started, recorded.speed),
        entropy(recorded.seed),
        line(io, clock, std::move(lines)),
        run(configuration, recorded.order, nullptr, console,
            {io, clock, entropy, workers,
             [this](const DevicePlace&, int nest, DeviceKind kind) { return line.source(device_name(nest, kind)); },
             [this](const std::function<bool()>& holds) { clock.run_until(io, holds); }}) {}

  /// A person interrupted the recorded run at this moment.
  void interrupt_at(Duration at) {
    asio::co_spawn(io, clock.wait_until(SteadyTime{at}), [this](const std::exception_ptr&) { run.interrupt(); });
  }

  asio::io_context io{1};
  wire::VirtualClock clock;
  SeededEntropy entropy;
  wire::InlineWorkers workers;
  wire::ReplayLine line;
  SingleRun run;
};

db::StoreOptions ledger_in_memory(const Configuration& configuration, const Software& software,
                                  const db::MemoryVfs& vfs) {
  db::StoreOptions options = ledger_options(configuration.station.value, "ledger.db", software);
  options.vfs = vfs.name();
  options.exclusive = true;
  options.lease = false;
  return options;
}

std::optional<Duration> interruption(const wire::Recording& recording) {
  const auto file = recording.files.find("interrupted");
  if (file == recording.files.end()) return std::nullopt;
  const auto at = parse_double(std::string_view(file->second).substr(0, file->second.find('\n')));
  return at ? std::optional{from_seconds(*at)} : std::nullopt;
}

std::string replay_words(const std::vector<std::string>& differing, bool had_outcome) {
  if (!had_outcome) return "\nthe recorded run gave no outcome to compare with\n";
  if (differing.empty()) return "\nthe same verdict and readings as recorded, to the last digit\n";
  std::string words = "\nnot the same as recorded:\n";
  for (const std::string& line : differing) words += "  " + line + "\n";
  return words;
}

int answer(const Replayed& replayed, const wire::Recording& recording, Console& console) {
  if (replayed.line.difference()) console.warn(*replayed.line.difference());
  if (!replayed.run.outcome()) return console.refuse(replayed.run.problem());
  const auto recorded = recording.files.find("outcome.json");
  const Json json = run_json(*replayed.run.outcome());
  const bool had_outcome = recorded != recording.files.end();
  const auto differing = had_outcome ? differences(recorded->second, json.text()) : std::vector<std::string>{};
  const bool same = had_outcome && differing.empty() && !replayed.line.difference();
  if (console.json()) {
    Json list = Json::array();
    for (const std::string& line : differing) list.add(line);
    Json out = Json::object();
    out.set("format", 1).set("same", same).set("differences", std::move(list)).set("outcome", json);
    console.print_json(out);
  } else {
    console.print_text(run_text(*replayed.run.outcome()) + replay_words(differing, had_outcome));
  }
  return same ? done : answer_is_no;
}

}  // namespace

int replay(const ReplayOptions& options, Console& console) {
  auto recording = wire::read_recording(options.folder);
  if (!recording) return console.refuse(recording.error());
  if (const Body* part = recording->header.find("cut"); part && part->text("from") != wire::seconds_text(Duration{0}))
    return console.refuse(Problem{"recording_cut", options.folder});
  auto run = run_in(recording->header, options.folder);
  if (!run) return console.refuse(run.error());
  auto configuration = recorded_configuration(options.folder, *run);
  if (!configuration) return console.refuse(configuration.error());
  if (run->commit != options.build.commit)
    console.warn({"replay_other_version",
                  options.folder,
                  {{"recorded", run->version + " " + run->commit},
                   {"now", options.build.version + " " + options.build.commit}}});
  db::MemoryDisk disk;
  const db::MemoryVfs vfs{disk, "replay"};
  const Software software{options.build.version, options.build.commit, options.build.compiler};
  Replayed replayed{*run, *configuration, recording->lines, console};
  if (const auto at = interruption(*recording)) replayed.interrupt_at(*at);
  replayed.run.make(ledger_in_memory(*configuration, software, vfs), software);
  return answer(replayed, *recording, console);
}

}  // namespace probewright::text
