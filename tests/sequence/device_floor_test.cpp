#include <gtest/gtest.h>

#include "drivers/emulated/action_log.h"
#include "station/sequence/run_step.h"
#include "tests/trial/memory_ledger.h"

// The device floor: how fast a run could be if nothing but its devices took time.
namespace probewright {
namespace {

using sequence::device_floor_s;
using sequence::RunStep;

constexpr bool adapter = true, phantom = false;

RunStep step(std::string name, bool on_adapter, std::vector<sequence::Precedence> after = {}) {
  return {std::move(name), on_adapter, std::move(after), {}, {}};
}

// By hand: two devices side by side take as long as the longer one; one device takes the sum.
TEST(DeviceFloor, OneDeviceWorksInTurnTwoSideBySide) {
  const std::vector<RunStep> steps{step("a", adapter), step("p", phantom), step("b", adapter)};
  EXPECT_DOUBLE_EQ(device_floor_s(steps, std::vector{1.0, 2.5, 1.0}), 2.5);
  EXPECT_DOUBLE_EQ(device_floor_s(steps, std::vector{1.0, 0.5, 1.0}), 2.0);
  EXPECT_DOUBLE_EQ(device_floor_s({}, {}), 0.0);
  EXPECT_THROW(device_floor_s(steps, std::vector{1.0}), std::invalid_argument);
}

// By hand: p ends at 2, b may begin at 2 + 0.5 and takes 1; c waits for b and for nothing that was not made.
TEST(DeviceFloor, PrecedencesAndPausesHold) {
  const std::vector<RunStep> steps{step("a", adapter), step("p", phantom), step("b", adapter, {{"p", 0.5}, {"a", 0.1}}),
                                   step("c", phantom, {{"b"}, {"left out", 9.0}})};
  EXPECT_DOUBLE_EQ(device_floor_s(steps, std::vector{1.0, 2.0, 1.0, 0.25}), 3.75);
}

/// The floor of a run as the demonstration finds it.
double floor_of(const sequence::RunOutcome& run, const emulated::ActionLog& log) {
  std::vector<double> busy_s;
  for (const RunStep& made : run.steps) {
    const auto kind = made.on_adapter ? emulated::DeviceKind::adapter : emulated::DeviceKind::phantom;
    busy_s.push_back(log.busy_s({run.nest, kind}, made.from, made.to));
  }
  return device_floor_s(run.steps, busy_s);
}

class RunFloor : public ::testing::TestWithParam<const char*> {};

// The routine loses at most 2 % against its devices. The clock is virtual: this is what the order of the work costs,
// not the machine.
TEST_P(RunFloor, TheRoutineIsHardlySlowerThanItsDevices) {
  trial::MemoryLedger ledger;
  emulated::ActionLog log;
  trial::Options options = ledger.options(2);
  options.observer = &log;
  trial::Trial station{options};
  for (int i = 1; i <= 12; ++i) {
    const std::string serial = std::string{GetParam()} + (i < 10 ? "0000" : "000") + std::to_string(i);
    const trial::Told told = station.test(serial);
    ASSERT_TRUE(told.outcome);
    ASSERT_NE(told.outcome->verdict, sequence::RunVerdict::void_run) << told.outcome->cause_words;
    const double floor_s = floor_of(*told.outcome, log), cycle_s = seconds(told.outcome->cycle);
    EXPECT_LE(cycle_s, 1.02 * floor_s) << serial;
    EXPECT_GE(cycle_s, floor_s) << serial;  // a floor above what was done would be no floor
    EXPECT_LE(cycle_s, 3.6) << serial;
  }
  EXPECT_TRUE(station.finish());
}

// The floor's longest path is the physics that the model asks for: what the adapter averages with the LEDs off (0.1 s
// of mains and twice 0.1 s of dark current), infrared's first voltage and both LEDs' slots alone, the warm-up before
// the first pulses or what is done in it (ID, a voltage, ambient light, the blade's way in and out with the optics
// settling each time, the closed path), three captures, and the optics' settling before two of them.
TEST(DeviceFloor, IsWhatThePhysicsOfTheRoutineTakes) {
  trial::MemoryLedger ledger;
  emulated::ActionLog log;
  trial::Options options = ledger.options(2);
  options.observer = &log;
  trial::Trial station{options};
  const trial::Told told = station.test("AQ35-048-00001");
  ASSERT_TRUE(told.outcome);
  const measure::Model& model = trial::demonstration().models.at("AQ-35").value;
  const double alone_s = model.cycles_for(model.alone_slots->capture_s) * model.cycle_s();
  const double pulses_s = model.pulse_cycles() * model.cycle_s();
  // Red alone is as long as the spectrum of four exposures takes, with its read-out and 2 kB on the line.
  const double red_s = std::max(alone_s, model.frames * model.exposure_start_s + 0.002 + 0.0225);
  const double around_s = 0.01 + 0.02 + 2.0 * model.cycles_for(model.ambient->capture_s) * model.cycle_s() +
                          2.0 * 0.150 + model.cycles_for(model.closed_path->capture_s) * model.cycle_s();
  const double warm_s = std::max(model.pulses_after_s, around_s);
  const double least_s = 0.3 + 0.02 + alone_s + red_s + warm_s + 3.0 * pulses_s + 2.0 * 0.150;
  const double floor_s = floor_of(*told.outcome, log);
  EXPECT_GE(floor_s, least_s);
  EXPECT_LE(floor_s, least_s + 0.045);  // bytes on the line, the modulator's and the stages' messages
}

INSTANTIATE_TEST_SUITE_P(Models, RunFloor, ::testing::Values("AQ20-048-", "AQ35-048-"));

}  // namespace
}  // namespace probewright
