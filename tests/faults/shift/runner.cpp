// Shifts by the thousand: one line for a seed that breaks a rule, with the command that makes it again, and a table of
// all faults in the end. Exit status: 0 no rule was broken, 1 one was, 2 wrong use.
#include <chrono>
#include <iostream>

#include "station/base/numbers.h"
#include "tests/faults/shift/shift.h"

namespace {

using namespace probewright;

struct Options {
  std::uint64_t from = 1, seeds = 100;
  int probes = 6;
  std::string scenario;
  bool verbose = false;
};

bool take_number(std::string_view text, std::uint64_t& into) {
  const auto number = parse_integer(text);
  if (!number || *number < 0) return false;
  into = static_cast<std::uint64_t>(*number);
  return true;
}

bool read(int argc, char** argv, Options& options) {
  for (int i = 1; i < argc; ++i) {
    const std::string_view word = argv[i];
    if (word == "--verbose") {
      options.verbose = true;
      continue;
    }
    if (i + 1 == argc) return false;
    const std::string value = argv[++i];
    std::uint64_t probes = 0;
    if (word == "--seeds" && take_number(value, options.seeds)) continue;
    if (word == "--from" && take_number(value, options.from)) continue;
    if (word == "--probes" && take_number(value, probes) && probes >= 1 && probes <= 500) {
      options.probes = static_cast<int>(probes);
      continue;
    }
    if (word != "--scenario") return false;
    options.scenario = value;
  }
  return true;
}

std::string command_for(const Options& options, std::uint64_t seed) {
  std::string command = "tests/faults/run --seeds 1 --from " + std::to_string(seed) + " --verbose";
  if (options.probes != 6) command += " --probes " + std::to_string(options.probes);
  if (!options.scenario.empty()) command += " --scenario " + options.scenario;
  return command;
}

}  // namespace

int main(int argc, char** argv) {
  Options options;
  if (!read(argc, argv, options)) {
    std::cerr << "usage: tests/faults/run [--seeds N] [--from SEED] [--probes N] [--scenario FILE] [--verbose]\n";
    return 2;
  }
  std::optional<emulated::Scenario> scenario;
  if (!options.scenario.empty()) {
    auto read = emulated::read_scenario_file(options.scenario);
    if (!read) {
      for (const Problem& problem : read.error()) std::cerr << problem.text() << "\n";
      return 2;
    }
    scenario = *std::move(read);
  }
  const auto begin = std::chrono::steady_clock::now();
  faults::ShiftReport all;
  std::uint64_t broken = 0;
  for (std::uint64_t seed = options.from; seed < options.from + options.seeds; ++seed) {
    const faults::ShiftPlan plan = faults::drawn_shift(seed, scenario, options.probes);
    if (options.verbose) std::cout << words_of(plan);
    faults::Diary diary;
    if (options.verbose) diary = [](const std::string& line) { std::cout << line << "\n"; };
    const faults::ShiftReport report = faults::make_shift(plan, {}, diary);
    if (!report.breaches.empty()) {
      ++broken;
      std::cout << "seed " << seed << ":\n";
      for (const auto& breach : report.breaches) std::cout << "  " << breach.rule << ": " << breach.words << "\n";
      std::cout << "  again: " << command_for(options, seed) << std::endl;
    }
    all.add(report);
  }
  const std::chrono::duration<double> took = std::chrono::steady_clock::now() - begin;
  std::cout << faults::table_of(all);
  std::cout << options.seeds << " shifts, " << all.lives << " starts of the station, " << all.runs << " runs in "
            << fixed(all.device_s / 3600.0, 2) << " h of device time; " << fixed(took.count(), 1) << " s, "
            << fixed(1e3 * took.count() / static_cast<double>(std::max<std::uint64_t>(options.seeds, 1)), 1)
            << " ms a shift; " << broken << " seeds broke a rule\n";
  return broken == 0 ? 0 : 1;
}
