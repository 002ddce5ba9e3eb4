#include "station/sequence/production/simulation.h"

#include <gtest/gtest.h>

#include <thread>

#include "tests/trial/trial.h"

// Small simulations of production: the same whatever the threads, and right where the answer is plain.
namespace probewright::sequence::production {
namespace {

struct Demo {
  measure::Certificates certificates;
  const measure::Model& model;
  limits::Sheet sheet;

  Demo()
      : certificates{trial::demonstration().phantom_certificates.at("PHC-2026-0101").value,
                     trial::demonstration().adapter_certificates.at("ADC-2026-0101").value},
        model(trial::demonstration().models.at("AQ-20").value),
        sheet(trial::demonstration().sheets.at("AQ-20").value) {}
  SimulatedDocuments documents() const { return {model, sheet, certificates}; }
};

SimulationOptions few(long long probes, int threads) {
  SimulationOptions options;
  options.probes = probes;
  options.seed = 7;
  options.threads = threads;
  return options;
}

Simulation simulated(const Demo& demo, const SimulationOptions& options) {
  SimulationWatch watch;
  auto simulation = simulate(demo.documents(), options, watch);
  if (!simulation) throw ProblemError(simulation.error());
  EXPECT_EQ(watch.tested, options.probes);
  return *simulation;
}

void expect_same(const Simulation& one, const Simulation& other) {
  EXPECT_EQ(one.all, other.all);
  EXPECT_EQ(one.checks, other.checks);
  EXPECT_EQ(one.faults, other.faults);
  EXPECT_EQ(one.stations, other.stations);
}

TEST(Simulation, IsTheSameWithOneThreadAndTwo) {
  const Demo demo;
  SimulationOptions options = few(200, 1);
  options.retest = true;
  options.faults = {FaultMix::Kind::lot, 0.0};
  const Simulation one = simulated(demo, options);
  options.threads = 2;
  const Simulation two = simulated(demo, options);
  expect_same(one, two);
  EXPECT_EQ(one.all.probes, 200);
  EXPECT_EQ(one.all.voids, 0) << (one.first_void ? one.first_void->text() : "");
  EXPECT_TRUE(one.untold.empty()) << ::testing::PrintToString(one.untold);
  options.seed = 8;
  EXPECT_FALSE(simulated(demo, options).checks == one.checks);
}

}  // namespace
}  // namespace probewright::sequence::production
