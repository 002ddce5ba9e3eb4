#include "station/text/test.h"

#include <boost/asio/signal_set.hpp>
#include <csignal>

#include "drivers/wire/asio_clock.h"
#include "drivers/wire/inline_workers.h"
#include "drivers/wire/serial_port.h"
#include "drivers/wire/serial_source.h"
#include "drivers/wire/stepped_line.h"
#include "drivers/wire/thread_workers.h"
#include "station/base/numbers.h"
#include "station/text/recorded_run.h"
#include "station/text/run_text.h"
#include "station/text/single_run.h"
#include "station/text/station_choice.h"

namespace probewright::text {
namespace {

namespace asio = boost::asio;
using namespace sequence;

struct Asked {
  const TestOptions& options;
  const BenchHands* hands;
  const Configuration& configuration;
  RunOrder order;
  Console& console;

  const StationFile& station() const { return configuration.station.value; }
  std::string path(const DevicePlace& place) const { return port_path(station(), place, options.ports); }
  Software software() const { return {options.build.version, options.build.commit, options.build.compiler}; }
  db::StoreOptions ledger() const {
    return ledger_options(station(), options.ledger.empty() ? ledger_path(station()) : options.ledger, software());
  }
};

int told(const SingleRun& run, Console& console) {
  if (!run.outcome()) return console.refuse(run.problem());
  if (console.json())
    console.print_json(run_json(*run.outcome()));
  else
    console.print_text(run_text(*run.outcome()));
  return run.outcome()->verdict == RunVerdict::pass ? done : answer_is_no;
}

/// Ctrl-C and the like, on whichever context hears of signals.
void on_signal(asio::signal_set& signals, std::function<void()> then) {
  signals.async_wait([then = std::move(then)](const boost::system::error_code& error, int) {
    if (!error) then();
  });
}

int test_live(const Asked& asked) {
  asio::io_context io{1};
  wire::AsioClock clock{io.get_executor(), asked.station().speed};
  SystemEntropy entropy;
  wire::ThreadWorkers ledger_thread;
  const PortOpener ports = [&](const DevicePlace& place, int, DeviceKind) {
    return wire::serial_source(io.get_executor(), clock, asked.path(place), asked.station().baud);
  };
  SingleRun run{asked.configuration,
                asked.order,
                asked.hands,
                asked.console,
                {io, clock, entropy, ledger_thread, ports, [&io](const std::function<bool()>& holds) {
                   while (!holds()) io.run_one();
                 }}};
  asio::signal_set signals{io, SIGINT, SIGTERM};
  on_signal(signals, [&run] { run.interrupt(); });
  run.make(asked.ledger(), asked.software());
  return told(run, asked.console);
}

RecordedRun described(const Asked& asked, UtcTime started, std::uint64_t seed) {
  RecordedRun run;
  run.order = asked.order;
  run.station = asked.station().station;
  run.started = started;
  run.speed = asked.station().speed;
  run.seed = seed;
  run.first_sequence = first_sequence_of(seed);
  run.version = asked.options.build.version;
  run.commit = asked.options.build.commit;
  run.documents = digests_of(asked.configuration);
  return run;
}

/// On a line whose time stands still while it works, so that the recording can be replayed exactly.
int test_recorded(const Asked& asked) {
  const std::uint64_t seed = SystemEntropy{}.next();
  const UtcTime started = SystemClock{}.utc_now();
  auto recorder = wire::Recorder::begin(asked.options.record, header_of(described(asked, started, seed)));
  if (!recorder) return asked.console.refuse(recorder.error());
  for (const auto& [path, document] : documents_of(asked.configuration))
    (*recorder)->add_file("configuration/" + path, document->text);

  SeededEntropy entropy{seed};
  wire::InlineWorkers workers;
  wire::SteppedLine line{asked.station().speed, started, **recorder};
  const PortOpener ports = [&](const DevicePlace& place, int nest, DeviceKind kind) {
    return line.source(device_name(nest, kind), [&line, &asked, path = asked.path(place)] {
      return wire::open_serial(line.outside().get_executor(), line.outside_clock(), path,
                               static_cast<int>(asked.station().baud));
    });
  };
  SingleRun run{asked.configuration,
                asked.order,
                asked.hands,
                asked.console,
                {line.io(), line.clock(), entropy, workers, ports,
                 [&line](const std::function<bool()>& holds) { line.run(holds); }}};
  asio::signal_set signals{line.outside(), SIGINT, SIGTERM};
  on_signal(signals, [&] {
    const SteadyTime at = line.put_in([&run] { run.interrupt(); });
    (*recorder)->add_file("interrupted", wire::seconds_text(at.since_start) + "\n");
  });
  run.make(asked.ledger(), asked.software());
  if (run.outcome()) (*recorder)->add_file("outcome.json", run_json(*run.outcome()).text());
  if (!run.outcome()) (*recorder)->add_file("problem.txt", run.problem().text() + "\n");
  if ((*recorder)->trouble()) asked.console.warn(*(*recorder)->trouble());
  return told(run, asked.console);
}

}  // namespace

int test(const TestOptions& options, const BenchHands* hands, Console& console) {
  const auto purpose = find_purpose(options.purpose);
  if (!purpose) return console.refuse(Problem{"purpose_unknown", "--purpose", {{"purpose", options.purpose}}});
  auto configuration = chosen_configuration(options.choice, options.speed);
  if (!configuration) return console.refuse(configuration.error());
  auto& nests = configuration->station.value.nests;
  std::erase_if(nests, [&](const NestPlace& place) { return place.nest != options.nest; });
  if (nests.empty())
    return console.refuse(
        Problem{"nest_not_there", configuration->station.document.file, {{"nest", std::to_string(options.nest)}}});
  // A real probe is put in by a person, whatever bench may also be running on this machine.
  if (!configuration->station.value.emulated) hands = nullptr;
  const Asked asked{
      options, hands, *configuration, {options.serial, options.nest, *purpose, options.operator_name}, console};
  return options.record.empty() ? test_live(asked) : test_recorded(asked);
}

}  // namespace probewright::text
