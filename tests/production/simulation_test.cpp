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
      : certificates(simulated_certificates(trial::demonstration()).value()),
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
  SimulationOptions options = few(52, 1);  // a whole block and a part of one
  options.retest = true;
  options.faults = {FaultMix::Kind::lot, 0.0};
  const Simulation one = simulated(demo, options);
  options.threads = 2;
  expect_same(one, simulated(demo, options));
  EXPECT_EQ(one.all.probes, 52);
  EXPECT_EQ(one.all.voids, 0) << (one.first_void ? one.first_void->text() : "");
  EXPECT_TRUE(one.untold.empty()) << ::testing::PrintToString(one.untold);
  EXPECT_EQ(one.options.stations, 2);
  EXPECT_FALSE(one.stopped_early);
  EXPECT_GT(one.all.retested, 15);  // among 48 there are 21 faults
}

TEST(Simulation, IsAnotherWithAnotherSeed) {
  const Demo demo;
  SimulationOptions options = few(8, 1);
  const Simulation one = simulated(demo, options);
  options.seed = 8;
  EXPECT_NE(simulated(demo, options).stations.front().room_degC, one.stations.front().room_degC);
}

/// The demonstration's sheet with every window opened or closed, whatever the check.
limits::Sheet with_windows(limits::Sheet sheet, double half_width_of_U) {
  for (limits::CheckRule& rule : sheet.checks) {
    if (rule.use != limits::Use::judged || rule.must_be_yes) continue;
    rule.limits = rule.acceptance = {-half_width_of_U, half_width_of_U};
    rule.expanded_uncertainty = 1e9;
  }
  return sheet;
}

// Limits so wide that nothing lies outside, so narrow that all does, and a window without an inside.
TEST(Simulation, PassesAllOrNoneWhereTheSheetLeavesNoDoubt) {
  Demo demo;
  demo.sheet = with_windows(demo.sheet, 1e9);
  const Simulation all = simulated(demo, few(20, 2));
  EXPECT_EQ(all.all.nonconforming, 0);
  EXPECT_EQ(all.all.first, (Decisions{20, 0, 0}));
  demo.sheet = with_windows(demo.sheet, 0.0);
  const Simulation none = simulated(demo, few(20, 2));
  EXPECT_EQ(none.all.nonconforming, 20);
  EXPECT_EQ(none.all.first, Decisions{});
}

// Without measurement there is no telling apart: when what is judged is far wider than what conforms, all that is
// nonconforming is accepted, and the other way round all is rejected.
TEST(Simulation, CountsFalseAcceptsAndFalseRejects) {
  Demo demo;
  demo.sheet = with_windows(demo.sheet, 0.0);
  for (limits::CheckRule& rule : demo.sheet.checks) rule.acceptance = {-1e9, 1e9};
  const Simulation accepts = simulated(demo, few(10, 2));
  EXPECT_EQ(accepts.all.first, (Decisions{10, 10, 0}));
  for (const CheckTally& check : accepts.checks)
    if (check.check != "probe_present") EXPECT_EQ(check.false_accepts, check.nonconforming) << check.check;
  demo.sheet = with_windows(demo.sheet, 1e9);
  for (limits::CheckRule& rule : demo.sheet.checks) rule.acceptance = {-1e-9, 1e-9};
  const Simulation rejects = simulated(demo, few(10, 2));
  EXPECT_EQ(rejects.all.first, (Decisions{0, 0, 10}));
}

TEST(Simulation, RejectsWhatIsPlainlyFaulty) {
  const Demo demo;
  SimulationOptions options = few(48, 2);
  options.faults = {FaultMix::Kind::lot, 0.0};
  const Simulation simulation = simulated(demo, options);
  EXPECT_EQ(simulation.all.voids, 0) << (simulation.first_void ? simulation.first_void->text() : "");
  long long planted = 0;
  for (const FaultTally& fault : simulation.faults) {
    planted += fault.probes.probes;
    EXPECT_EQ(fault.probes.final.false_accepts, 0) << fault.fault;
  }
  EXPECT_EQ(planted, 21);  // one of each cause
}

TEST(Simulation, EndsEarlyWithWhatThereIs) {
  const Demo demo;
  SimulationWatch watch;
  std::jthread person([&] {
    while (watch.tested < 3) std::this_thread::yield();
    watch.stop = true;
  });
  const auto simulation = simulate(demo.documents(), few(100'000, 2), watch);
  ASSERT_TRUE(simulation) << simulation.error().text();
  EXPECT_TRUE(simulation->stopped_early);
  EXPECT_GE(simulation->all.probes, 3);
  EXPECT_LT(simulation->all.probes, 1000);
  EXPECT_EQ(simulation->all.probes, watch.tested);
}

TEST(Simulation, RefusesWhatMakesNoSense) {
  const Demo demo;
  const auto refused = [&](SimulationOptions options) {
    SimulationWatch watch;
    return simulate(demo.documents(), options, watch).error().id;
  };
  EXPECT_EQ(refused(few(0, 1)), "simulation_probes");
  SimulationOptions options = few(100, 1);
  options.stations = 4;
  EXPECT_EQ(refused(options), "simulation_stations");
  options = few(100, 1);
  options.faults = {FaultMix::Kind::rate, 1.5};
  EXPECT_EQ(refused(options), "simulation_rate");
  options = few(100, 1);
  options.coolest_degC = 31.0;
  EXPECT_EQ(refused(options), "simulation_rooms");
}

TEST(Simulation, TellsWhenTheBenchIsAStranger) {
  Demo demo;
  demo.certificates.phantom.head.number = "PHC-2020-0001";
  SimulationWatch watch;
  const auto simulation = simulate(demo.documents(), few(2, 1), watch);
  ASSERT_FALSE(simulation);
  EXPECT_NE(simulation.error().text().find("PHC-2020-0001"), std::string::npos) << simulation.error().text();
}

}  // namespace
}  // namespace probewright::sequence::production
