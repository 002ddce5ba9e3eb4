#include "station/sequence/production/simulation.h"

#include <algorithm>
#include <exception>
#include <mutex>
#include <thread>

#include "drivers/emulated/probe_fault.h"
#include "station/base/numbers.h"
#include "station/sequence/production/simulated_block.h"

namespace probewright::sequence::production {
namespace {

constexpr int usual_stations = 40;

std::optional<Problem> senseless(const SimulatedDocuments& documents, const SimulationOptions& options) {
  const std::string& model = documents.model.name;
  if (!emulated::knows_model(model))
    return Problem{"bench_unknown_model", "", {{"model", model}, {"models", emulated::known_models()}}};
  if (options.probes < 1) return Problem{"simulation_probes", ""};
  const double rate = options.faults.rate;
  if (options.faults.kind == FaultMix::Kind::rate && !(rate >= 0.0 && rate <= 1.0))
    return Problem{"simulation_rate", "", {{"rate", shortest(rate)}}};
  if (!(options.coolest_degC <= options.warmest_degC))
    return Problem{
        "simulation_rooms", "", {{"from", shortest(options.coolest_degC)}, {"to", shortest(options.warmest_degC)}}};
  const long long blocks = (options.probes + simulated_block - 1) / simulated_block;
  if (options.stations < 0 || options.stations > blocks)
    return Problem{"simulation_stations",
                   "",
                   {{"stations", std::to_string(options.stations)},
                    {"probes", std::to_string(options.probes)},
                    {"most", std::to_string(blocks)},
                    {"block", std::to_string(simulated_block)}}};
  return std::nullopt;
}

SimulationOptions filled_in(SimulationOptions options) {
  const long long blocks = (options.probes + simulated_block - 1) / simulated_block;
  if (options.stations == 0) options.stations = static_cast<int>(std::min<long long>(usual_stations, blocks));
  return options;
}

int threads_of(const BlockPlan& plan) {
  const int wanted = plan.options.threads > 0 ? plan.options.threads
                                              : std::max(1, static_cast<int>(std::thread::hardware_concurrency()));
  return static_cast<int>(std::min<long long>(wanted, plan.blocks()));
}

/// Blocks done by several threads, each at its place.
class BlockWork {
 public:
  BlockWork(const BlockPlan& plan, SimulationWatch& watch)
      : plan_(plan), watch_(watch), done_(static_cast<std::size_t>(plan.blocks())) {}

  std::vector<std::optional<BlockTally>> run() {
    {
      std::vector<std::jthread> threads;
      for (int i = 0; i < threads_of(plan_); ++i) threads.emplace_back([this] { work(); });
    }
    if (failure_) std::rethrow_exception(failure_);
    return std::move(done_);
  }

 private:
  void work() {
    try {
      while (!watch_.stop) {
        const long long block = next_++;
        if (block >= plan_.blocks()) return;
        done_[static_cast<std::size_t>(block)] = run_block(plan_, block, watch_);
      }
    } catch (...) {
      const std::scoped_lock lock{failing_};
      if (!failure_) failure_ = std::current_exception();
      watch_.stop = true;
    }
  }

  const BlockPlan& plan_;
  SimulationWatch& watch_;
  std::vector<std::optional<BlockTally>> done_;  ///< each element is written by one thread
  std::atomic<long long> next_{0};
  std::mutex failing_;
  std::exception_ptr failure_;
};

void add_checks(Simulation& to, const BlockTally& block) {
  for (std::size_t i = 0; i < block.checks.size(); ++i) to.checks[i] += block.checks[i];
}

void add_faults(Simulation& to, const BlockTally& block) {
  for (const auto& [fault, probes] : block.faults) to.faults[static_cast<std::size_t>(fault)].probes += probes;
}

Simulation empty_simulation(const BlockPlan& plan) {
  Simulation simulation;
  simulation.options = plan.options;
  for (const std::string& check : plan.judged) simulation.checks.push_back({check});
  for (const emulated::ProbeFault fault : emulated::all_faults())
    simulation.faults.push_back({std::string{emulated::slug_of(fault)}, {}});
  for (int station = 0; station < plan.options.stations; ++station)
    simulation.stations.push_back({plan.room_degC(station), {}});
  return simulation;
}

/// Checks that could not be compared with a truth are named apart; faults that were not planted are left out.
void tidy(Simulation& simulation) {
  for (const CheckTally& check : simulation.checks)
    if (check.compared == 0) simulation.untold.push_back(check.check);
  std::erase_if(simulation.checks, [](const CheckTally& check) { return check.compared == 0; });
  std::erase_if(simulation.faults,
                [](const FaultTally& fault) { return fault.probes.probes + fault.probes.voids == 0; });
}

}  // namespace

Result<measure::Certificates> simulated_certificates(const Configuration& configuration) {
  const std::string phantom = "PHC-2026-0101", adapter = "ADC-2026-0101";  // drivers/emulated/README.md
  const auto of_phantom = configuration.phantom_certificates.find(phantom);
  const auto of_adapter = configuration.adapter_certificates.find(adapter);
  const std::string where = configuration.folder.string();
  if (of_phantom == configuration.phantom_certificates.end())
    return Problem{"simulation_certificate", where, {{"number", phantom}}};
  if (of_adapter == configuration.adapter_certificates.end())
    return Problem{"simulation_certificate", where, {{"number", adapter}}};
  return measure::Certificates{of_phantom->second.value, of_adapter->second.value};
}

Decisions& Decisions::operator+=(const Decisions& other) {
  passed += other.passed, false_accepts += other.false_accepts, false_rejects += other.false_rejects;
  return *this;
}

ProbeTally& ProbeTally::operator+=(const ProbeTally& other) {
  probes += other.probes, nonconforming += other.nonconforming;
  first += other.first, final += other.final;
  retested += other.retested, voids += other.voids;
  return *this;
}

CheckTally& CheckTally::operator+=(const CheckTally& other) {
  compared += other.compared, nonconforming += other.nonconforming;
  false_accepts += other.false_accepts, false_rejects += other.false_rejects;
  no_reading += other.no_reading;
  return *this;
}

Result<Simulation> simulate(const SimulatedDocuments& documents, const SimulationOptions& options,
                            SimulationWatch& watch) {
  if (auto problem = senseless(documents, options)) return *problem;
  const BlockPlan plan{documents, filled_in(options)};
  const auto blocks = BlockWork{plan, watch}.run();
  Simulation simulation = empty_simulation(plan);
  for (std::size_t i = 0; i < blocks.size(); ++i) {
    if (!blocks[i]) continue;
    simulation.all += blocks[i]->all;
    simulation.stations[static_cast<std::size_t>(plan.station_of(static_cast<long long>(i)))].probes += blocks[i]->all;
    add_checks(simulation, *blocks[i]);
    add_faults(simulation, *blocks[i]);
    if (!simulation.first_void) simulation.first_void = blocks[i]->first_void;
  }
  if (simulation.all.probes == 0 && simulation.first_void) return *simulation.first_void;
  simulation.stopped_early = simulation.all.probes + simulation.all.voids < options.probes;
  tidy(simulation);
  return simulation;
}

}  // namespace probewright::sequence::production
