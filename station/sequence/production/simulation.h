#pragma once
#include <atomic>
#include <cstdint>
#include <optional>
#include <string>
#include <vector>

#include "limits/sheet.h"
#include "station/measure/certificate.h"
#include "station/measure/model.h"
#include "station/sequence/configuration.h"

// Simulated production: probes and stations drawn from the emulated bench's spreads, tested by this station's own
// drivers, routine, evaluation and judging, in software and in no time. It estimates what a sheet does; it is no
// measurement of any product.
namespace probewright::sequence::production {

/// Which probes have something wrong with them.
struct FaultMix {
  enum class Kind {
    none,  ///< only the spread between parts
    lot,   ///< as in the demonstration's lot: among every 48 each cause once, in full severity
    rate   ///< each probe with one fault by chance, any of all, its severity even between 0 and 1
  };
  Kind kind = Kind::none;
  double rate = 0.0;  ///< probability, 0 to 1; for Kind::rate
  bool operator==(const FaultMix&) const = default;
};

struct SimulationOptions {
  long long probes = 2000;
  int stations = 0;  ///< 0: 40, or fewer where there are fewer than 48 probes for each
  std::uint64_t seed = 1;
  bool retest = false;  ///< test a probe that failed again, as the sheet allows
  FaultMix faults;
  int threads = 0;                                  ///< 0: as many as there are cores; the answer is the same
  double coolest_degC = 20.0, warmest_degC = 30.0;  ///< of the rooms, each station has its own
};

/// Probes are drawn in blocks of so many, each block on one station.
inline constexpr long long simulated_block = 48;

/// What it is about; all outlive the simulation.
struct SimulatedDocuments {
  const measure::Model& model;
  const limits::Sheet& sheet;
  const measure::Certificates& certificates;  ///< of the emulated bench's nest 1
};

/// What the configuration says of the bench's nest 1. Errors: simulation_certificate.
Result<measure::Certificates> simulated_certificates(const Configuration& configuration);

/// What was decided about probes. False: against their true values and the sheet's limits.
struct Decisions {
  long long passed = 0, false_accepts = 0, false_rejects = 0;
  Decisions& operator+=(const Decisions& other);
  bool operator==(const Decisions&) const = default;
};

struct ProbeTally {
  long long probes = 0;         ///< with a verdict
  long long nonconforming = 0;  ///< a judged check's true value lies outside the sheet's limits, or is none any more
  Decisions first;              ///< by the first run
  Decisions final;              ///< by the last one; the same without retest
  long long retested = 0;
  long long voids = 0;  ///< probes without a verdict: a device ended the run
  ProbeTally& operator+=(const ProbeTally& other);
  bool operator==(const ProbeTally&) const = default;
};

/// First runs, by one judged check.
struct CheckTally {
  std::string check;
  long long compared = 0;  ///< probes whose true value is known
  long long nonconforming = 0;
  long long false_accepts = 0;  ///< of them with a reading that is ok
  long long false_rejects = 0;  ///< conforming, with a reading that is not, or none though nothing blocked it
  long long no_reading = 0;     ///< blocked by another check's hard fault, or not to be had
  CheckTally& operator+=(const CheckTally& other);
  bool operator==(const CheckTally&) const = default;
};

/// Probes with one planted fault. One that is too weak leaves a probe conforming.
struct FaultTally {
  std::string fault;
  ProbeTally probes;
  bool operator==(const FaultTally&) const = default;
};

struct StationTally {
  double room_degC = 25.0;
  ProbeTally probes;
  bool operator==(const StationTally&) const = default;
};

struct Simulation {
  SimulationOptions options;  ///< as asked for, stations filled in
  ProbeTally all;
  std::vector<CheckTally> checks;      ///< judged checks with a known truth, in the order of the routine
  std::vector<std::string> untold;     ///< judged checks that the bench knows no truth of
  std::vector<FaultTally> faults;      ///< planted ones, in the order of their names' table
  std::vector<StationTally> stations;  ///< by number
  bool stopped_early = false;
  std::optional<Problem> first_void;
};

/// How a simulation is watched and stopped from another thread.
struct SimulationWatch {
  std::atomic<bool> stop{false};     ///< set: ends soon, with what there is
  std::atomic<long long> tested{0};  ///< probes so far
};

/// Runs it on its own threads and waits for them. The same documents and seed give the same answer, whatever the number
/// of threads, unless it is stopped.
/// Errors: bench_unknown_model; simulation_probes, simulation_stations, simulation_rate, simulation_rooms (what was
/// asked for makes no sense); what a device had to tell when no run came to its end.
Result<Simulation> simulate(const SimulatedDocuments& documents, const SimulationOptions& options,
                            SimulationWatch& watch);

}  // namespace probewright::sequence::production
