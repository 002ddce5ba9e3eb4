#include "tests/faults/shift/plan.h"

#include <cmath>

#include "drivers/emulated/deviates.h"
#include "drivers/emulated/probe_fault.h"
#include "station/base/numbers.h"

namespace probewright::faults {
namespace {

using emulated::BenchFault;
using emulated::DeviceKind;
using emulated::ScenarioFault;
using emulated::Way;

constexpr double about_a_shift_s = 20.0;

/// Draws for one part of the plan, so that a change in one part leaves the others as they are.
class Draw {
 public:
  Draw(std::uint64_t seed, std::string_view part) : deviates_(emulated::named_seed(seed, part)) {}
  bool chance(double probability) { return deviates_.uniform() < probability; }
  double between(double low, double high) { return low + (high - low) * deviates_.uniform(); }
  /// Evenly on a logarithmic scale.
  double spread(double low, double high) { return low * std::pow(high / low, deviates_.uniform()); }
  std::int64_t whole(std::int64_t low, std::int64_t high) {
    return low + static_cast<std::int64_t>(deviates_.bits() % static_cast<std::uint64_t>(high - low + 1));
  }
  std::uint64_t bits() { return deviates_.bits(); }
  template <class Range>
  auto one_of(const Range& range) {
    return range[static_cast<std::size_t>(whole(0, static_cast<std::int64_t>(std::size(range)) - 1))];
  }

 private:
  emulated::Deviates deviates_;
};

std::string serial(int number) {
  const std::string digits = std::to_string(number);
  return "AQ20-048-" + std::string(5 - digits.size(), '0') + digits;
}

std::vector<sequence::production::Piece> drawn_pieces(std::uint64_t seed, int probes) {
  Draw draw(seed, "pieces");
  const int first = static_cast<int>(draw.whole(1, 90000));
  std::vector<sequence::production::Piece> pieces;
  for (int i = 0; i < probes; ++i) {
    sequence::production::Piece piece{serial(first + i), "AQ-20", "", 1.0};
    if (draw.chance(0.2)) piece.fault = slug_of(draw.one_of(emulated::all_faults()));
    pieces.push_back(std::move(piece));
  }
  return pieces;
}

/// Once, or at a rate that lets about `mean` of them happen.
void draw_when(Draw& draw, ScenarioFault& fault, double& rate, double per_shift) {
  if (draw.chance(0.5)) {
    fault.at_s = draw.between(0.0, about_a_shift_s);
    fault.count = static_cast<int>(draw.spread(1.0, 6.0));
  } else {
    rate = draw.spread(0.5, 20.0) / per_shift;
  }
}

void draw_size(Draw& draw, ScenarioFault& fault) {
  constexpr double bytes_in_a_shift = 40e3, messages_in_a_shift = 1200.0;  // of one line
  switch (fault.fault) {
    case BenchFault::byte_lost:
    case BenchFault::byte_changed:
    case BenchFault::byte_doubled:
      return draw_when(draw, fault, fault.per_byte, bytes_in_a_shift);
    case BenchFault::bytes_paused:
      fault.by_s = draw.spread(0.05, 2.0);
      return draw_when(draw, fault, fault.per_byte, bytes_in_a_shift);
    case BenchFault::bytes_split:
      fault.by_s = draw.spread(1e-4, 0.1);
      return draw_when(draw, fault, fault.per_reply, messages_in_a_shift);
    case BenchFault::noise_bytes:
      fault.bytes = static_cast<int>(draw.spread(1.0, 500.0));
      return draw_when(draw, fault, fault.per_reply, messages_in_a_shift);
    case BenchFault::reply_late:
      fault.by_s = draw.spread(0.2, 2.0);
      return draw_when(draw, fault, fault.per_reply, messages_in_a_shift);
    case BenchFault::reply_missing:
      return draw_when(draw, fault, fault.per_reply, messages_in_a_shift);
    case BenchFault::restart_in_capture:
      fault.by_s = draw.between(0.0, 0.7);
      return;
    case BenchFault::cable_pulled:
    case BenchFault::lid_opened:
      fault.for_s = draw.spread(0.05, 6.0);
      return;
    case BenchFault::wrong_certificate:
      fault.for_s = draw.spread(1.0, 15.0);
      return;
    case BenchFault::band_drift:
    case BenchFault::set_point_error:
      fault.red = draw.between(-0.05, 0.05);
      fault.infrared = draw.between(-0.05, 0.05);
      return;
    case BenchFault::gain_error:
      fault.gain = draw.between(-0.05, 0.05);
      return;
    case BenchFault::wrong_temperature:
      fault.shown_K = draw.between(-5.0, 5.0);
      return;
    case BenchFault::mains_flicker:
      fault.level = draw.between(0.0, 1.0);
      fault.harmonics = {draw.between(0.0, 1.0), draw.between(0.0, 0.5)};
      return;
    case BenchFault::warm_room:
      fault.room_degC = draw.between(15.0, 40.0);
      return;
    case BenchFault::restart:
      return;
  }
}

ScenarioFault drawn_fault(Draw& draw, int nests) {
  ScenarioFault fault;
  fault.fault = draw.one_of(emulated::all_bench_faults());
  fault.at_s = draw.between(0.0, about_a_shift_s);
  if (fault.fault != BenchFault::warm_room) fault.nest = static_cast<int>(draw.whole(1, nests));
  const bool of_device = fault.fault <= BenchFault::wrong_certificate;
  if (of_device) fault.device = draw.chance(0.5) ? DeviceKind::phantom : DeviceKind::adapter;
  const bool of_line = fault.fault <= BenchFault::noise_bytes;
  if (of_line && draw.chance(0.7)) fault.way = draw.chance(0.5) ? Way::to_device : Way::from_device;
  draw_size(draw, fault);
  return fault;
}

emulated::Scenario drawn_scenario(std::uint64_t seed, int nests) {
  Draw draw(seed, "scenario");
  emulated::Scenario scenario{"drawn", draw.bits(), {}};
  const auto faults = draw.whole(0, 4);
  for (int i = 0; i < faults; ++i) scenario.faults.push_back(drawn_fault(draw, nests));
  return scenario;
}

/// A ledger of a shift takes some 300 writes and 70 syncs.
db::DiskFaults drawn_disk_faults(Draw& draw) {
  db::DiskFaults disk;
  switch (draw.whole(0, 5)) {
    case 0:
    case 1:
      disk.die_at = draw.whole(1, 380);
      break;
    case 2:
      disk.fail_write = draw.whole(1, 300);
      break;
    case 3:
      disk.fail_sync = draw.whole(1, 70);
      break;
    case 4:
      disk.short_write = draw.whole(1, 300);
      break;
    default:
      disk.full_at = draw.whole(50'000, 700'000);
      break;
  }
  disk.from_then_on = draw.chance(0.5);
  return disk;
}

std::vector<Life> drawn_lives(std::uint64_t seed) {
  Draw draw(seed, "lives");
  std::vector<Life> lives;
  while (lives.size() < 3 && draw.chance(0.4)) {
    Life life;
    life.power_lost = draw.chance(0.5);
    if (draw.chance(0.7)) {
      life.disk = drawn_disk_faults(draw);
    } else {
      life.killed_at_s = draw.between(0.0, about_a_shift_s);
    }
    lives.push_back(life);
  }
  lives.emplace_back();
  for (Life& life : lives) {
    if (!draw.chance(0.15)) continue;
    life.step_at_s = draw.between(0.0, about_a_shift_s);
    life.step_by_s = draw.chance(0.5) ? draw.spread(0.5, 7200.0) : -draw.spread(0.5, 7200.0);
  }
  return lives;
}

std::string words_of(const ScenarioFault& fault) {
  std::string words(slug_of(fault.fault));
  if (fault.device) words += " " + std::string(to_text(*fault.device));
  if (fault.nest) words += " of nest " + std::to_string(*fault.nest);
  if (fault.way) words += fault.way == Way::to_device ? " to it" : " from it";
  const double rate = fault.per_byte + fault.per_reply;
  if (rate > 0.0) words += " at " + shortest(rate);
  return words + (rate > 0.0 ? " from " : " at ") + fixed(fault.at_s, 2) + " s";
}

std::string words_of(const Life& life) {
  const db::DiskFaults& disk = life.disk;
  std::string words;
  const auto add = [&words](const std::string& more) { words += (words.empty() ? "" : ", ") + more; };
  if (disk.die_at) add("dies at operation " + std::to_string(disk.die_at));
  if (disk.fail_write) add("write " + std::to_string(disk.fail_write) + " fails");
  if (disk.fail_sync) add("sync " + std::to_string(disk.fail_sync) + " fails");
  if (disk.short_write) add("write " + std::to_string(disk.short_write) + " is short");
  if (disk.full_at) add("full at " + std::to_string(disk.full_at) + " bytes");
  if (disk.lies_about_sync) add("lies about syncs");
  if (life.killed_at_s) add("killed at " + fixed(*life.killed_at_s, 2) + " s");
  if (life.step_at_s) add("clock set by " + fixed(life.step_by_s, 1) + " s at " + fixed(*life.step_at_s, 2) + " s");
  if (words.empty()) return "a quiet life";
  return words + (life.power_lost ? ", then the power is lost" : "");
}

}  // namespace

ShiftPlan drawn_shift(std::uint64_t seed, const std::optional<emulated::Scenario>& scenario, int probes) {
  ShiftPlan plan;
  plan.seed = seed;
  plan.pieces = drawn_pieces(seed, probes);
  Draw draw(seed, "mistakes");
  plan.mistakes.rate = draw.chance(0.5) ? 0.2 : 0.0;
  plan.mistakes.seed = draw.bits();
  plan.scenario = scenario.value_or(drawn_scenario(seed, plan.nests));
  plan.lives = drawn_lives(seed);
  return plan;
}

std::string words_of(const ShiftPlan& plan) {
  std::string words = "seed " + std::to_string(plan.seed) + ", " + std::to_string(plan.pieces.size()) + " probes\n";
  for (const ScenarioFault& fault : plan.scenario.faults) words += "  bench: " + words_of(fault) + "\n";
  for (const Life& life : plan.lives) words += "  station: " + words_of(life) + "\n";
  for (const auto& piece : plan.pieces)
    if (!piece.fault.empty()) words += "  probe: " + piece.serial + " " + piece.fault + "\n";
  if (plan.mistakes.rate > 0.0) words += "  people: mistakes at " + shortest(plan.mistakes.rate) + "\n";
  return words;
}

}  // namespace probewright::faults
