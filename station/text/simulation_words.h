#pragma once
#include <string>
#include <vector>

#include "limits/statistics/group_shares.h"
#include "station/sequence/production/simulation.h"
#include "station/text/json_out.h"

namespace probewright::text {

/// Everything that a simulation rests on, a sentence each, for its documents and options.
std::vector<std::string> simulation_assumptions(const sequence::production::SimulatedDocuments& documents,
                                                const sequence::production::Simulation& simulation);

/// The answer of `simulate`.
std::string to_text(const sequence::production::SimulatedDocuments& documents,
                    const sequence::production::Simulation& simulation);
/// The same as JSON (FORMATS.md, "simulate").
Json json_of(const sequence::production::SimulatedDocuments& documents,
             const sequence::production::Simulation& simulation);

/// Confidence of every interval that it tells.
inline constexpr double simulation_confidence = 0.95;

/// One way to count probes, by what stands in text and JSON.
struct SimulatedShare {
  std::string_view slug, words;
  long long (*count)(const sequence::production::ProbeTally&);
};
/// What is told of all probes: yield, false accepts and rejects, by the first run and, with retest, by the last.
std::vector<SimulatedShare> simulated_shares(const sequence::production::SimulationOptions& options);
/// Over the stations.
limits::statistics::SharesOfGroups over_stations(const sequence::production::Simulation& simulation,
                                                 const SimulatedShare& share);

}  // namespace probewright::text
