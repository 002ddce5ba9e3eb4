#include "station/sequence/production/simulated_block.h"

#include <algorithm>

#include "drivers/emulated/demo_lot.h"
#include "drivers/emulated/deviates.h"
#include "station/sequence/production/simulated_nest.h"
#include "station/sequence/production/simulated_probe.h"

namespace probewright::sequence::production {
namespace {

using emulated::named_seed;
using emulated::PlantedFault;

std::uint64_t seed_of(const BlockPlan& plan, const char* what, long long number) {
  return derived_seed(named_seed(plan.options.seed, what), static_cast<std::uint64_t>(number));
}

SimulatedPlace place_of(const BlockPlan& plan, long long block) {
  const int station = plan.station_of(block);
  return {plan.documents.model, plan.documents.certificates, seed_of(plan, "noise", block),
          emulated::draw_station_errors(seed_of(plan, "stations", station), 1), plan.room_degC(station)};
}

std::optional<PlantedFault> drawn_fault(double rate, emulated::Deviates& deviates) {
  const bool faulty = deviates.uniform() < rate;
  const auto faults = emulated::all_faults();
  const auto which = static_cast<std::size_t>(deviates.uniform() * static_cast<double>(faults.size()));
  const double severity = deviates.uniform();
  if (!faulty) return std::nullopt;
  return PlantedFault{faults[std::min(which, faults.size() - 1)], severity};
}

/// The fault of each probe of a block, if it has one.
std::vector<std::optional<PlantedFault>> faults_of(const BlockPlan& plan, long long block, long long count) {
  std::vector<std::optional<PlantedFault>> faults(static_cast<std::size_t>(count));
  const FaultMix& mix = plan.options.faults;
  const std::uint64_t seed = seed_of(plan, "faults", block);
  if (mix.kind == FaultMix::Kind::lot) {
    const auto pieces = emulated::demo_lot(plan.documents.model.name, 0, static_cast<int>(count), seed);
    for (std::size_t i = 0; i < faults.size(); ++i) faults[i] = pieces[i].fault;
  } else if (mix.kind == FaultMix::Kind::rate) {
    emulated::Deviates deviates(seed);
    for (auto& fault : faults) fault = drawn_fault(mix.rate, deviates);
  }
  return faults;
}

emulated::Probe probe_of(const BlockPlan& plan, long long number, const std::optional<PlantedFault>& fault) {
  const std::uint64_t seed = named_seed(plan.options.seed, "probes");
  emulated::Probe probe = emulated::draw_probe(seed, "simulated-" + std::to_string(number), plan.documents.model.name);
  return fault ? emulated::with_fault(std::move(probe), *fault, seed) : probe;
}

void count(Decisions& decisions, bool conforms, bool pass) {
  decisions.passed += pass ? 1 : 0;
  decisions.false_accepts += pass && !conforms ? 1 : 0;
  decisions.false_rejects += !pass && conforms ? 1 : 0;
}

void count(CheckTally& tally, const TrueStanding& standing, const limits::Judgement* judgement) {
  const bool read = judgement != nullptr && judgement->outcome != limits::Outcome::no_reading;
  const bool blocked = !read && judgement != nullptr && judgement->reason.starts_with("blocked_by:");
  tally.no_reading += read ? 0 : 1;
  if (!standing.known) return;
  const bool ok = read && judgement->lets_pass();
  ++tally.compared;
  tally.nonconforming += standing.conforms ? 0 : 1;
  tally.false_accepts += ok && !standing.conforms ? 1 : 0;
  tally.false_rejects += !ok && standing.conforms && !blocked ? 1 : 0;
}

/// Tests probes one after the other in one nest and counts what becomes of them.
class Block {
 public:
  Block(const BlockPlan& plan, long long block) : plan_(plan), nest_(place_of(plan, block)) {
    for (const std::string& check : plan.judged) tally_.checks.push_back({check});
  }

  void test(const emulated::Probe& probe) {
    const emulated::Truth truth = emulated::truth_of(probe);
    const auto standings = true_standings(truth, plan_.values, plan_.documents.sheet, plan_.judged);
    const bool conforms =
        std::all_of(standings.begin(), standings.end(), [](const auto& s) { return s.conforms || !s.known; });
    ProbeTally one;
    if (const auto first = run(probe)) {
      one.probes = 1;
      one.nonconforming = conforms ? 0 : 1;
      count(one.first, conforms, first->pass);
      count(one.final, conforms, first->pass || tested_again(probe, one));
      for (std::size_t i = 0; i < standings.size(); ++i)
        count(tally_.checks[i], standings[i], first->find(standings[i].check));
    } else {
      one.voids = 1;
    }
    tally_.all += one;
    for (const PlantedFault& planted : probe.faults) tally_.faults[static_cast<int>(planted.fault)] += one;
  }

  BlockTally take() { return std::move(tally_); }

 private:
  std::optional<JudgedRun> run(const emulated::Probe& probe) {
    auto readings = nest_.test(probe);
    if (readings) return judge_run(*readings, plan_.documents.sheet, plan_.judged);
    if (!tally_.first_void) tally_.first_void = readings.error();
    return std::nullopt;
  }

  /// Whether it passes at a later try.
  bool tested_again(const emulated::Probe& probe, ProbeTally& one) {
    const limits::Retest& retest = plan_.documents.sheet.retest;
    if (!plan_.options.retest) return false;
    for (int i = 0; i < retest.tries; ++i) {
      one.retested = 1;
      nest_.rest(retest.after_s);
      const auto again = run(probe);
      if (again && again->pass) return true;
    }
    return false;
  }

  const BlockPlan& plan_;
  SimulatedNest nest_;
  BlockTally tally_;
};

}  // namespace

BlockPlan::BlockPlan(const SimulatedDocuments& documents_, const SimulationOptions& options_)
    : documents(documents_),
      options(options_),
      values(documents_.model),
      judged(limits::judged_checks(documents_.sheet, documents_.model.routine)) {}

double BlockPlan::room_degC(int station) const {
  emulated::Deviates deviates(seed_of(*this, "rooms", station));
  return options.coolest_degC + (options.warmest_degC - options.coolest_degC) * deviates.uniform();
}

BlockTally run_block(const BlockPlan& plan, long long block, SimulationWatch& watch) {
  const long long first = block * simulated_block;
  const auto faults = faults_of(plan, block, std::min(simulated_block, plan.options.probes - first));
  Block tests{plan, block};
  for (std::size_t i = 0; i < faults.size() && !watch.stop; ++i) {
    tests.test(probe_of(plan, first + static_cast<long long>(i), faults[i]));
    ++watch.tested;
  }
  return tests.take();
}

}  // namespace probewright::sequence::production
