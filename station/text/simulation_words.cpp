#include "station/text/simulation_words.h"

#include <algorithm>

#include "station/base/numbers.h"
#include "station/text/table.h"

namespace probewright::text {
namespace {

using namespace sequence::production;
using limits::statistics::exact_interval;
using limits::statistics::Interval;
using limits::statistics::SharesOfGroups;

/// A share as people read it: per cent, or parts per million where it is small.
std::string share_words(double share) {
  if (share == 0.0) return "0 %";
  return share < 0.002 ? fixed(1e6 * share, 0) + " ppm" : fixed(100.0 * share, share < 0.1 ? 2 : 1) + " %";
}

std::string share_words(long long count, long long of) {
  return of > 0 ? share_words(static_cast<double>(count) / static_cast<double>(of)) : "";
}

std::string words(const Interval& interval) { return share_words(interval.low) + " to " + share_words(interval.high); }

std::string interval_words(long long count, long long of) {
  return of > 0 ? words(exact_interval(count, of, simulation_confidence)) : "";
}

std::string title(const SimulatedDocuments& documents, const Simulation& simulation) {
  const SimulationOptions& options = simulation.options;
  return "Simulated production of " + documents.model.name + " by sheet " + documents.sheet.name + ", revision " +
         std::to_string(documents.sheet.revision) + ": " + std::to_string(simulation.all.probes) + " probes, " +
         std::to_string(options.stations) + " stations, seed " + std::to_string(options.seed) +
         "\nAn estimate by simulation with the assumptions below. It is no measurement of any product.\n";
}

std::string stopped_words(const Simulation& simulation) {
  if (!simulation.stopped_early) return {};
  return "\nStopped early: " + std::to_string(simulation.all.probes) + " of " +
         std::to_string(simulation.options.probes) + " probes.\n";
}

std::string void_words(const Simulation& simulation) {
  if (simulation.all.voids == 0) return {};
  std::string text = "\n" + std::to_string(simulation.all.voids) + " probes have no verdict: a device ended their run.";
  if (simulation.first_void) text += " The first: " + simulation.first_void->text();
  return text + "\n";
}

std::string all_probes(const Simulation& simulation) {
  Table table{{"", "probes", "share", "95 % interval", "95 % over stations"},
              {Side::left, Side::right, Side::right, Side::left, Side::left}};
  const long long of = simulation.all.probes;
  for (const SimulatedShare& share : simulated_shares(simulation.options)) {
    const long long count = share.count(simulation.all);
    const SharesOfGroups stations = over_stations(simulation, share);
    const bool told = stations.groups > 1 && count > 0;
    table.add({std::string{share.words}, std::to_string(count), share_words(count, of), interval_words(count, of),
               told ? words(stations.mean) : ""});
  }
  return table.text();
}

std::string between_stations(const Simulation& simulation) {
  Table table{{"", "least", "median", "most", "sd, without chance"},
              {Side::left, Side::right, Side::right, Side::right, Side::right}};
  for (const SimulatedShare& share : simulated_shares(simulation.options)) {
    const SharesOfGroups stations = over_stations(simulation, share);
    table.add({std::string{share.words}, share_words(stations.least), share_words(stations.median),
               share_words(stations.most), share_words(stations.between_sd)});
  }
  return table.text();
}

std::string by_check(const Simulation& simulation) {
  Table table{{"check", "nonconforming", "false accepts", "95 % interval", "false rejects", "95 % interval"},
              {Side::left, Side::right, Side::right, Side::left, Side::right, Side::left}};
  for (const CheckTally& check : simulation.checks)
    table.add({check.check, std::to_string(check.nonconforming), std::to_string(check.false_accepts),
               interval_words(check.false_accepts, check.compared), std::to_string(check.false_rejects),
               interval_words(check.false_rejects, check.compared)});
  return table.text();
}

std::string by_fault(const Simulation& simulation) {
  Table table{
      {"fault", "probes", "nonconforming", "passed", "false accepts", "of the nonconforming, 95 %", "false rejects"},
      {Side::left, Side::right, Side::right, Side::right, Side::right, Side::left, Side::right}};
  for (const FaultTally& fault : simulation.faults) {
    const ProbeTally& of = fault.probes;
    table.add({fault.fault, std::to_string(of.probes), std::to_string(of.nonconforming),
               std::to_string(of.final.passed), std::to_string(of.final.false_accepts),
               interval_words(of.final.false_accepts, of.nonconforming), std::to_string(of.final.false_rejects)});
  }
  return table.text();
}

}  // namespace

std::vector<SimulatedShare> simulated_shares(const SimulationOptions& options) {
  std::vector<SimulatedShare> shares{
      {"nonconforming", "nonconforming", [](const ProbeTally& t) { return t.nonconforming; }},
      {"first_pass", "pass at the first run", [](const ProbeTally& t) { return t.first.passed; }},
      {"first_false_accepts", "false accepts, first run", [](const ProbeTally& t) { return t.first.false_accepts; }},
      {"first_false_rejects", "false rejects, first run", [](const ProbeTally& t) { return t.first.false_rejects; }}};
  if (!options.retest) return shares;
  shares.push_back({"retested", "tested again", [](const ProbeTally& t) { return t.retested; }});
  shares.push_back({"final_pass", "pass, with retest", [](const ProbeTally& t) { return t.final.passed; }});
  shares.push_back(
      {"final_false_accepts", "false accepts, with retest", [](const ProbeTally& t) { return t.final.false_accepts; }});
  shares.push_back(
      {"final_false_rejects", "false rejects, with retest", [](const ProbeTally& t) { return t.final.false_rejects; }});
  return shares;
}

SharesOfGroups over_stations(const Simulation& simulation, const SimulatedShare& share) {
  std::vector<limits::statistics::GroupShare> groups;
  for (const StationTally& station : simulation.stations)
    groups.push_back({share.count(station.probes), station.probes.probes});
  return limits::statistics::shares_of_groups(groups, simulation_confidence);
}

std::string to_text(const SimulatedDocuments& documents, const Simulation& simulation) {
  std::string text = title(documents, simulation) + stopped_words(simulation) + void_words(simulation);
  text += "\n" + all_probes(simulation) + "\n";
  text += "\nOver the stations, each by its own probes\n\n" + between_stations(simulation) + "\n";
  text += "\nBy check, first runs\n\n" + by_check(simulation) + "\n";
  if (!simulation.faults.empty()) text += "\nBy planted fault\n\n" + by_fault(simulation) + "\n";
  text += "\nAssumptions\n";
  for (const std::string& assumption : simulation_assumptions(documents, simulation))
    text += "  - " + assumption + "\n";
  return text;
}

}  // namespace probewright::text
