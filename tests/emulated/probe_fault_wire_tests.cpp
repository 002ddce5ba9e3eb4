#include <algorithm>
#include <array>
#include <cmath>
#include <cstdio>

#include "drivers/emulated/control_commands.h"
#include "drivers/emulated/front_end.h"
#include "drivers/wire/block.h"
#include "tests/emulated/trial.h"

// What both devices say of a faulty probe, taken apart by plain sums of this file's own, against its truth. The
// stations are perfect, so what differs is noise and seating.
namespace probewright::emulated {
namespace {

constexpr std::size_t red = 0, infrared = 1;
using Pair = std::array<double, 2>;

/// One wavelength axis for all: the phantom is exactly as its certificate says.
double wavelength_nm(std::size_t pixel) {
  const auto x = static_cast<double>(pixel);
  return 600.0 + x * (0.4402 + x * (-2.0e-7 - 1.0e-10 * x));
}

/// A spectrum without its dark frame, per spectral density.
struct Light {
  std::vector<double> density;

  double sum(double from_nm, double to_nm, bool moment = false) const {
    double sum = 0.0;
    for (std::size_t i = 1; i + 1 < density.size(); ++i) {
      const double at = wavelength_nm(i), step = 0.5 * (wavelength_nm(i + 1) - wavelength_nm(i - 1));
      if (at >= from_nm && at <= to_nm) sum += density[i] * step * (moment ? at : 1.0);
    }
    return sum;
  }
  std::size_t peak(double from_nm, double to_nm) const {
    std::size_t best = 0;
    for (std::size_t i = 0; i < density.size(); ++i) {
      const bool inside = wavelength_nm(i) >= from_nm && wavelength_nm(i) <= to_nm;
      if (inside && (best == 0 || density[i] > density[best])) best = i;
    }
    return best;
  }
  /// Where the line falls below a share of its peak, on one side.
  double edge_nm(std::size_t top, double share, int side) const {
    std::size_t i = top;
    const auto next = [&] { return side < 0 ? i - 1 : i + 1; };
    while (next() > 0 && next() + 1 < density.size() && density[next()] > share * density[top]) i = next();
    const double part = (density[i] - share * density[top]) / (density[i] - density[next()]);
    return wavelength_nm(i) + part * (wavelength_nm(next()) - wavelength_nm(i));
  }
  double centroid_nm(double from_nm, double to_nm) const {
    const std::size_t top = peak(from_nm, to_nm);
    const double low = std::max(from_nm, edge_nm(top, 0.01, -1)), high = std::min(to_nm, edge_nm(top, 0.01, +1));
    return sum(low, high, true) / sum(low, high);
  }
  double width_nm(double from_nm, double to_nm) const {
    const std::size_t top = peak(from_nm, to_nm);
    const double seen = edge_nm(top, 0.5, +1) - edge_nm(top, 0.5, -1);
    return std::sqrt(seen * seen - 2.5 * 2.5);
  }
};

/// Captured slots of one kind, dark taken off, nA.
struct Train {
  std::vector<double> values;

  double mean() const {
    double sum = 0.0;
    for (const double value : values) sum += value;
    return sum / static_cast<double>(values.size());
  }
  /// Amplitude over mean at 5 Hz; the train holds whole periods.
  double modulation() const {
    double sine = 0.0, cosine = 0.0;
    const double level = mean();
    for (std::size_t i = 0; i < values.size(); ++i) {
      const double angle = 2.0 * M_PI * 5.0 * 4.0 * 439e-6 * static_cast<double>(i);
      sine += (values[i] - level) * std::sin(angle);
      cosine += (values[i] - level) * std::cos(angle);
    }
    return 2.0 * std::hypot(sine, cosine) / static_cast<double>(values.size()) / std::abs(level);
  }
  /// Relative noise from one slot to the next but one: the modulation hardly differs between them.
  double noise() const {
    double sum = 0.0;
    for (std::size_t i = 2; i < values.size(); ++i) {
      const double bend = values[i] - 2.0 * values[i - 1] + values[i - 2];
      sum += bend * bend / 6.0;
    }
    return std::sqrt(sum / static_cast<double>(values.size() - 2)) / std::abs(mean());
  }
  int gaps() const {
    return static_cast<int>(std::count_if(values.begin(), values.end(),
                                          [m = mean()](double v) { return std::abs(v) < 0.5 * std::abs(m); }));
  }
};
using Trains = std::array<Train, 2>;

/// Everything that the devices say of one probe.
struct Look {
  Pair forward_V{}, first_V{}, quarter_V{}, drive_mA{}, leakage_uA{};
  std::array<bool, 2> compliance{}, inseparable{};
  double dark_nA = 0.0, ambient_nA = 0.0, mains_nA = 0.0, id_ohm = 0.0;
  double ambient_in_slots_nA = 0.0;  ///< dark slots of a capture, lamp on minus off
  bool id_open = false;
  Light both, red_alone;
  std::array<Trains, 3> pulses;
  Trains closed;

  double transfer(std::size_t led, double set_mA) const { return pulses[1][led].mean() / set_mA; }
  double rise_mV(std::size_t led) const { return 1e3 * (forward_V[led] - quarter_V[led]); }
};

class Looker {
 public:
  Looker(const std::string& command, double drive_mA) : drive_mA_(drive_mA), phantom_(trial_), adapter_(trial_) {
    EXPECT_EQ(obey(trial_.bench, command), "ok") << command;
  }
  const Truth& truth() const { return trial_.bench.truths().begin()->second; }

  Look look() {
    Look look;
    electrical(look);
    drive(drive_mA_, drive_mA_);
    for (int i = 0; i < 5; ++i) {  // warm
      trial_.wait_s(1.5);
      adapter_.ask(0x0B);
    }
    for (const std::size_t led : {red, infrared}) voltages(look, led);
    for (int i = 0; i < 3; ++i) {  // warm again after the quarter drive
      trial_.wait_s(1.5);
      adapter_.ask(0x0B);
    }
    look.both = light();
    for (std::size_t point = 0; point < 3; ++point) {
      EXPECT_EQ(phantom_.ask("MOD:RATE 5;STAT ON;SETP " + std::to_string(point + 1) + ";*OPC?"), "1");
      look.pulses[point] = capture(1152, 1139);  // 2 s but for 0.1 ms: ten periods
    }
    EXPECT_EQ(phantom_.ask("MOD:STAT OFF;:PATH:OPAQ ON;*OPC?"), "1");
    look.closed = capture(352, 351);
    const double dark_slots_nA = dark_slots_nA_;
    phantom_.ask("LAMP:STAT ON;STAT?");
    capture(352, 351);
    look.ambient_in_slots_nA = dark_slots_nA_ - dark_slots_nA;
    phantom_.ask("LAMP:STAT OFF;STAT?");
    EXPECT_EQ(phantom_.ask("PATH:OPAQ OFF;*OPC?"), "1");
    drive(drive_mA_, 0.0);
    look.red_alone = light();
    return look;
  }

 private:
  void drive(double red_mA, double infrared_mA) {
    adapter_.ask(
        0x02,
        pack().u32(static_cast<std::uint32_t>(1e3 * red_mA)).u32(static_cast<std::uint32_t>(1e3 * infrared_mA)).take());
  }

  double mean_nA(std::uint8_t input) {
    const Bytes reply = adapter_.ask(0x06, pack().u16(5000).u16(100).u8(input).take());
    wire::LeReader fields{reply};
    fields.u16(), fields.u16(), fields.u8();
    return 1e-3 * fields.i32();
  }

  void electrical(Look& look) {
    for (const std::size_t led : {red, infrared}) {
      const Bytes reply = adapter_.ask(0x05, pack().u8(static_cast<std::uint8_t>(led + 1)).u16(5000).take());
      wire::LeReader fields{reply};
      fields.u8(), fields.u16();
      look.leakage_uA[led] = 1e-6 * fields.u32();
      look.inseparable[led] = fields.u8() == 1;
    }
    const double connected = mean_nA(1);
    look.dark_nA = connected - mean_nA(0);
    phantom_.ask("LAMP:LEV 1;FLIC 0;STAT ON;STAT?");
    look.ambient_nA = mean_nA(1) - connected;
    phantom_.ask("LAMP:STAT OFF;STAT?");
    Bytes reply = adapter_.ask(0x07);
    const std::uint32_t milliohm = wire::LeReader{reply}.u32();
    look.id_open = milliohm == 0xFFFFFFFF;
    look.id_ohm = 1e-3 * milliohm;
    reply = adapter_.ask(0x08, pack().u16(100).take());
    wire::LeReader fields{reply};
    fields.u16();
    look.mains_nA = 1e-3 * fields.u32();
  }

  void voltages(Look& look, std::size_t led) {
    const auto number = static_cast<std::uint8_t>(led + 1);
    Bytes reply = adapter_.ask(0x04, pack().u8(number).u32(0).take());
    wire::LeReader fields{reply};
    fields.u8(), fields.u32();
    look.drive_mA[led] = 1e-6 * fields.u32();
    look.forward_V[led] = 1e-6 * fields.i32();
    look.first_V[led] = 1e-6 * fields.i32();
    look.compliance[led] = fields.u8() == 1;
    reply = adapter_.ask(0x04, pack().u8(number).u32(static_cast<std::uint32_t>(250.0 * drive_mA_)).take());
    wire::LeReader quarter{reply};
    quarter.u8(), quarter.u32(), quarter.u32();
    look.quarter_V[led] = 1e-6 * quarter.i32();
  }

  std::vector<double> counts(const std::string& shutter) {
    const std::string answer = phantom_.ask("SPEC:SHUT " + shutter + ";EXP 20 ms;AVER 16;READ?");
    const auto block = wire::decode_block(answer).value();
    wire::LeReader fields{block.bytes};
    fields.u32(), fields.u32(), fields.u16(), fields.u8(), fields.u8(), fields.i16(), fields.u16();
    std::vector<double> counts;
    for (int i = 0; i < 1024; ++i) counts.push_back(fields.u16());
    return counts;
  }

  Light light() {
    const auto open = counts("OPEN"), closed = counts("CLOS");
    Light light;
    for (std::size_t i = 0; i < open.size(); ++i) {
      const double x = wavelength_nm(i) - 800.0;
      light.density.push_back((open[i] - closed[i]) / (1.0 - 1.0e-3 * x - 1.0e-6 * x * x));
    }
    return light;
  }

  Trains capture(std::uint32_t cycles, std::size_t kept) {
    adapter_.ask(0x10, pack().u16(++captures_).u32(cycles).take());
    std::vector<std::array<double, 4>> all;
    while (const auto frame = adapter_.next(3.0)) {
      if (frame->type == 0x51) break;
      wire::LeReader fields{frame->payload};
      fields.u16(), fields.u32();
      for (int i = 0; i < 32; ++i) {
        std::array<double, 4> cycle{};
        for (double& slot : cycle) slot = fields.i24() * adapter_certificate::nA_per_code;
        all.push_back(cycle);
      }
    }
    EXPECT_EQ(all.size(), cycles);
    Trains trains;
    dark_slots_nA_ = 0.0;
    for (const auto& cycle : all) dark_slots_nA_ += 0.5 * (cycle[1] + cycle[3]) / static_cast<double>(all.size());
    for (std::size_t i = 1; i < std::min(all.size(), kept + 1); ++i) {
      trains[red].values.push_back(all[i][0] - 0.5 * (all[i - 1][3] + all[i][1]));
      trains[infrared].values.push_back(all[i][2] - 0.5 * (all[i][1] + all[i][3]));
    }
    return trains;
  }

  double drive_mA_;
  Trial trial_;
  PhantomEnd phantom_;
  AdapterEnd adapter_;
  std::uint16_t captures_ = 0;
  double dark_slots_nA_ = 0.0;  ///< mean of the latest capture's
};

struct Model {
  const char* serial;
  double drive_mA;
};
const Model aq20{"AQ20-048-00009", 20.0}, aq35{"AQ35-048-00009", 10.0};

struct Seen {
  Look look;
  Truth truth;
};
Seen seen(const Model& model, const std::string& fault) {
  const std::string command = std::string("seat 1 ") + model.serial + (fault.empty() ? "" : " fault " + fault + " 1");
  Looker looker(command, model.drive_mA);
  return {looker.look(), looker.truth()};
}

void electrical_is_the_truth(const Look& look, const LedTruth& truth, std::size_t led) {
  const bool flows = truth.drive_mA > 0.0;
  EXPECT_EQ(look.compliance[led], !flows);
  EXPECT_NEAR(look.forward_V[led], truth.forward_voltage_V, 5e-4);
  EXPECT_NEAR(look.drive_mA[led], truth.drive_mA, 0.005);
  EXPECT_NEAR(look.leakage_uA[led], truth.reverse_leakage_uA, 2e-3 + 0.02 * truth.reverse_leakage_uA);
  if (!flows) {
    EXPECT_EQ(look.quarter_V[led], 5.0);
    return;
  }
  EXPECT_NEAR(look.rise_mV(led), truth.voltage_rise_mV, 0.5);
  EXPECT_NEAR(1e3 * (look.first_V[led] - look.forward_V[led]), truth.warmup_mV, 0.3);
}

void line_is_the_truth(const Look& look, const LedTruth& truth, std::size_t led, double within_nm) {
  const double from_nm = led == red ? 605.0 : 800.0, to_nm = led == red ? 785.0 : 1045.0;
  if (std::isnan(truth.centroid_nm)) {
    EXPECT_LT(look.both.density[look.both.peak(from_nm, to_nm)], 600.0);  // of 15000 and more
    return;
  }
  EXPECT_NEAR(look.both.centroid_nm(from_nm, to_nm), truth.centroid_nm, within_nm);
  EXPECT_NEAR(look.both.width_nm(from_nm, to_nm), truth.width_nm, led == red ? 0.2 : 0.6);
}

void light_is_the_truth(const Look& look, const Truth& truth, double drive_mA) {
  const std::array leds{truth.red, truth.infrared};
  for (const std::size_t led : {red, infrared}) {
    SCOPED_TRACE(led == red ? "red" : "infrared");
    // What crosses over from the other slot is in the reading.
    const double crossing = truth.probe.slot_crosstalk * std::abs(leds[1 - led].transfer_nA_per_mA);
    EXPECT_NEAR(look.transfer(led, drive_mA), leds[led].transfer_nA_per_mA,
                0.05 + 1.05 * crossing + 0.025 * std::abs(leds[led].transfer_nA_per_mA));
    for (std::size_t point = 0; point < 3; ++point) {
      const RatioTruth& ratio = truth.ratios[point];
      const double expected = led == red ? ratio.red_modulation : ratio.infrared_modulation;
      if (std::isnan(expected)) continue;
      EXPECT_NEAR(look.pulses[point][led].modulation() / expected, 1.0, 0.003) << ratio.nominal;
    }
  }
  for (std::size_t point = 0; point < 3; ++point) {
    const RatioTruth& ratio = truth.ratios[point];
    if (std::isnan(ratio.ratio)) continue;
    const double seen = look.pulses[point][red].modulation() / look.pulses[point][infrared].modulation();
    EXPECT_NEAR(seen / ratio.ratio, 1.0, 0.003) << ratio.nominal;
  }
  for (const std::size_t led : {red, infrared}) {
    if (!(std::abs(leds[led].transfer_nA_per_mA) > 0.0)) continue;
    EXPECT_NEAR(100.0 * look.closed[led].mean() / look.pulses[1][led].mean(), truth.closed_path_light_percent,
                0.01 + 0.02 * truth.closed_path_light_percent);
  }
}

void is_the_truth(const Seen& it, const Model& model, bool red_hump_in_infrared) {
  const auto& [look, truth] = it;
  electrical_is_the_truth(look, truth.red, red);
  electrical_is_the_truth(look, truth.infrared, infrared);
  line_is_the_truth(look, truth.red, red, 0.1);
  // Both LEDs are lit: a strong secondary line of the red one stands in the infrared one's window and pulls it.
  line_is_the_truth(look, truth.infrared, infrared, red_hump_in_infrared ? 0.8 : 0.15);
  if (std::isnan(truth.secondary_emission_percent)) {
    EXPECT_LT(look.red_alone.density[look.red_alone.peak(605.0, 1045.0)], 600.0);
  } else {
    const double share = 100.0 * look.red_alone.sum(800.0, 1000.0) / look.red_alone.sum(605.0, 1045.0);
    EXPECT_NEAR(share, truth.secondary_emission_percent, 0.06 + 0.05 * truth.secondary_emission_percent);
  }
  const double few = 0.05 + 0.001 * std::abs(truth.dark_current_nA);
  EXPECT_NEAR(look.dark_nA, truth.dark_current_nA, few);
  EXPECT_NEAR(look.ambient_nA, truth.ambient_uptake_nA, 0.1);
  EXPECT_NEAR(look.ambient_in_slots_nA, truth.ambient_uptake_nA, 0.3);
  EXPECT_NEAR(look.mains_nA, truth.mains_pickup_nA, 0.1);
  EXPECT_EQ(look.id_open, std::isinf(truth.id_resistance_ohm));
  if (!look.id_open) {
    EXPECT_NEAR(look.id_ohm / truth.id_resistance_ohm, 1.0, 5e-4);
  }
  light_is_the_truth(look, truth, model.drive_mA);
}

TEST(ProbeFaultOnTheWire, HealthyProbesAreTheirTruth) {
  for (const Model& model : {aq20, aq35}) is_the_truth(seen(model, ""), model, false);
}

TEST(ProbeFaultOnTheWire, EveryFaultIsItsTruth) {
  for (const Model& model : {aq20, aq35}) {
    for (const ProbeFault fault : all_faults()) {
      if (fault == ProbeFault::cable_intermittent) continue;  // its noise is in every reading of light: see below
      SCOPED_TRACE(std::string(model.serial) + " " + std::string(slug_of(fault)));
      is_the_truth(seen(model, std::string(slug_of(fault))), model, fault == ProbeFault::secondary_emission);
    }
  }
}

// Source: the design's table of causes, as the raw replies show it.
TEST(ProbeFaultOnTheWire, HardFaultsShowAsTheTableSays) {
  const Seen good = seen(aq20, "");
  Seen it = seen(aq20, "red_led_open");
  EXPECT_TRUE(it.look.compliance[red]);
  EXPECT_EQ(it.look.forward_V[red], 5.0);
  EXPECT_EQ(it.look.drive_mA[red], 0.0);
  EXPECT_FALSE(it.look.compliance[infrared]);
  it = seen(aq20, "infrared_led_short");
  EXPECT_NEAR(it.look.forward_V[infrared], 0.010, 0.001);  // 20 mA in 0.5 ohm of leads
  EXPECT_NEAR(it.look.drive_mA[infrared], 20.0, 0.01);
  it = seen(aq20, "leds_swapped");
  EXPECT_NEAR(it.look.forward_V[red], good.look.forward_V[infrared], 1e-3);
  EXPECT_NEAR(it.look.forward_V[infrared], good.look.forward_V[red], 1e-3);
  EXPECT_GT(it.look.red_alone.centroid_nm(605.0, 1045.0), 930.0);  // what is driven as red lights in the infrared
  EXPECT_LT(good.look.red_alone.centroid_nm(605.0, 1045.0), 670.0);
  for (std::size_t point = 0; point < 3; ++point) {
    const double before = good.look.pulses[point][red].modulation() / good.look.pulses[point][infrared].modulation();
    const double after = it.look.pulses[point][red].modulation() / it.look.pulses[point][infrared].modulation();
    EXPECT_NEAR(before * after, 1.0, 0.01);
  }
  it = seen(aq20, "leds_reversed");
  EXPECT_TRUE(it.look.compliance[red] && it.look.compliance[infrared]);
  it = seen(aq20, "detector_open");
  EXPECT_NEAR(it.look.dark_nA, 0.0, 0.05);
  EXPECT_NEAR(it.look.pulses[1][red].mean(), 0.0, 0.05);
  it = seen(aq20, "detector_short");
  EXPECT_GT(it.look.dark_nA, 9000.0);
  EXPECT_EQ(it.look.pulses[1][red].mean(), 0.0);  // both sides of the difference stand at full scale
  it = seen(aq20, "detector_reversed");
  EXPECT_LT(it.look.pulses[1][red].mean(), -1000.0);
  EXPECT_LT(it.look.pulses[1][infrared].mean(), -1000.0);
  EXPECT_TRUE(seen(aq20, "id_missing").look.id_open);
}

// The light of a weak or hot LED is less in the spectrum too. The benches are alike, so both probes sit alike.
TEST(ProbeFaultOnTheWire, LightInTheSpectrumFollowsTheLed) {
  const Light good = seen(aq20, "").look.both;
  const auto share = [&](const char* fault, double from_nm, double to_nm) {
    return seen(aq20, fault).look.both.sum(from_nm, to_nm) / good.sum(from_nm, to_nm);
  };
  EXPECT_NEAR(share("red_led_weak", 605.0, 785.0), 0.5, 0.005);
  EXPECT_NEAR(share("red_led_weak", 850.0, 1030.0), 1.0, 0.005);
  EXPECT_NEAR(share("infrared_led_weak", 605.0, 785.0), 1.0, 0.005);
  EXPECT_NEAR(share("infrared_led_weak", 850.0, 1030.0), 0.5, 0.005);
  EXPECT_NEAR(share("red_die_attach", 605.0, 785.0), 0.94, 0.015);  // 8.6 K at -0.7 % per K, as hot as the part runs
  EXPECT_NEAR(share("infrared_die_attach", 850.0, 1030.0), 0.971, 0.01);  // 5.7 K at -0.5 %
}

TEST(ProbeFaultOnTheWire, ReversedAntiparallelPairLooksLikeASwappedOne) {
  const Seen swapped = seen(aq35, "leds_swapped"), reversed = seen(aq35, "leds_reversed"), good = seen(aq35, "");
  EXPECT_TRUE(reversed.look.inseparable[red] && reversed.look.inseparable[infrared]);
  EXPECT_EQ(reversed.look.leakage_uA, (Pair{0.0, 0.0}));
  EXPECT_FALSE(reversed.look.compliance[red] || reversed.look.compliance[infrared]);
  EXPECT_EQ(reversed.look.forward_V, swapped.look.forward_V);
  EXPECT_EQ(reversed.look.pulses[0][red].values, swapped.look.pulses[0][red].values);
  EXPECT_EQ(reversed.look.red_alone.density, swapped.look.red_alone.density);
  EXPECT_NEAR(reversed.look.forward_V[red], good.look.forward_V[infrared], 1e-3);
}

// Source: the design's table of causes (residual of the pulse fit, lost cycles) and limit (2e-4).
TEST(ProbeFaultOnTheWire, IntermittentCableMakesNoiseAndLosesCycles) {
  for (const Model& model : {aq20, aq35}) {
    const Seen good = seen(model, ""), bad = seen(model, "cable_intermittent");
    int lost = 0;
    for (const Trains& trains : bad.look.pulses) lost += trains[red].gaps();
    for (const Trains& trains : good.look.pulses) EXPECT_EQ(trains[red].gaps(), 0);
    std::printf("[  figures ] %s: noise %.1e, intermittent %.1e and %d of 3417 cycles lost\n", model.serial,
                good.look.pulses[1][red].noise(), bad.look.pulses[1][red].noise(), lost);
    EXPECT_GT(bad.look.pulses[1][red].noise(), 5e-4);
    EXPECT_GT(lost, 10);
    EXPECT_LT(lost, 200);
    EXPECT_EQ(bad.truth.probe.faults.front().fault, ProbeFault::cable_intermittent);
    // Nothing else: what is measured without light in pulses stays.
    EXPECT_NEAR(bad.look.forward_V[red], good.look.forward_V[red], 2e-4);
    EXPECT_NEAR(bad.look.dark_nA, good.look.dark_nA, 0.05);
    EXPECT_NEAR(bad.look.ambient_nA, good.look.ambient_nA, 0.1);
    EXPECT_NEAR(bad.look.mains_nA, good.look.mains_nA, 0.1);
    EXPECT_NEAR(bad.look.both.centroid_nm(605.0, 785.0), good.look.both.centroid_nm(605.0, 785.0), 0.03);
  }
}

}  // namespace
}  // namespace probewright::emulated
