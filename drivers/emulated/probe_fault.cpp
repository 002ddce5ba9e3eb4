#include "drivers/emulated/probe_fault.h"

#include <algorithm>
#include <array>
#include <cmath>
#include <limits>
#include <stdexcept>
#include <utility>
#include <vector>

#include "drivers/emulated/deviates.h"
#include "drivers/emulated/model_nominals.h"
#include "drivers/emulated/probe.h"

namespace probewright::emulated {
namespace {

using Part = Led Probe::*;

template <Part part>
void led_open(Probe& probe, double, Deviates&) {
  (probe.*part).circuit = LedCircuit::open;
}

/// A short of one LED of an antiparallel pair lies across the other as well.
template <Part part>
void led_short(Probe& probe, double, Deviates&) {
  (probe.*part).circuit = LedCircuit::shorted;
  if (probe.wiring == Wiring::antiparallel) probe.red.circuit = probe.infrared.circuit = LedCircuit::shorted;
}

void leds_swapped(Probe& probe, double, Deviates&) { std::swap(probe.red, probe.infrared); }

/// In an antiparallel pair each polarity lights one LED, so turning the pair round exchanges them.
void leds_reversed(Probe& probe, double severity, Deviates& deviates) {
  if (probe.wiring == Wiring::antiparallel) return leds_swapped(probe, severity, deviates);
  for (Led* led : {&probe.red, &probe.infrared}) led->circuit = LedCircuit::reversed;
}

/// Two bins of 2 nm, towards the middle of the bins: a part that some other probe could rightly have.
void red_led_wrong_bin(Probe& probe, double severity, Deviates&) {
  constexpr double two_bins_nm = 4.0, middle_nm = 660.0;
  probe.red.line.peak_nm += probe.red.line.centroid_nm() > middle_nm ? -two_bins_nm * severity : two_bins_nm * severity;
}

/// Infrared LEDs are not binned: this one comes from a reel of another kind.
void infrared_led_wrong_bin(Probe& probe, double severity, Deviates& deviates) {
  constexpr double other_reel_nm = 14.0;
  probe.infrared.line.peak_nm += (deviates.uniform() < 0.5 ? -other_reel_nm : other_reel_nm) * severity;
}

void secondary_emission(Probe& probe, double severity, Deviates&) {
  constexpr double power = 0.02;
  probe.secondary_power += power * severity;
  probe.secondary_current += secondary_current_per_power * power * severity;
}

/// The die sits badly on its carrier and gets hotter: 8.6 K more in a typical red LED. Its values are kept for the warm
/// state, so they move with it.
template <Part part>
void die_attach(Probe& probe, double severity, Deviates&) {
  constexpr double further_rise = 1.86;
  Led& led = probe.*part;
  const double further_K = further_rise * severity * led.heating.standard_rise_K();
  const double droop = light_at(led, further_K);
  led.line = line_at(led, further_K);
  led.transfer_nA_per_mA *= droop;
  led.optical_power *= droop;
  led.forward_V += led.temperature.forward_V_per_K * further_K;
  led.heating.die_rise_K *= 1.0 + further_rise * severity;
  led.heating.package_rise_K *= 1.0 + further_rise * severity;
}

template <Part part>
void led_weak(Probe& probe, double severity, Deviates&) {
  constexpr double lost = 0.5;
  (probe.*part).transfer_nA_per_mA *= 1.0 - lost * severity;
  (probe.*part).optical_power *= 1.0 - lost * severity;
}

void detector_open(Probe& probe, double, Deviates&) { probe.photodiode.circuit = DetectorCircuit::open; }
void detector_short(Probe& probe, double, Deviates&) { probe.photodiode.circuit = DetectorCircuit::shorted; }
void detector_reversed(Probe& probe, double, Deviates&) { probe.photodiode.circuit = DetectorCircuit::reversed; }

void detector_leaky(Probe& probe, double severity, Deviates&) {
  constexpr double surface_nA = 20.0;
  probe.photodiode.surface_nA += surface_nA * severity;
}

void shield_open(Probe& probe, double severity, Deviates&) {
  constexpr double pickup_nA = 10.0;
  probe.mains_pickup_nA += pickup_nA * severity;
}

void housing_light_leak(Probe& probe, double severity, Deviates&) {
  constexpr double further = 4.0;
  probe.ambient_nA *= 1.0 + further * severity;
}

void direct_light_shunt(Probe& probe, double severity, Deviates&) {
  constexpr double share = 0.05;
  probe.direct_light += share * severity;
}

void slot_crosstalk(Probe& probe, double severity, Deviates&) {
  constexpr double share = 0.01;
  probe.slot_crosstalk += share * severity;
}

/// Half way to the next bin's resistor: nobody's value.
void id_wrong(Probe& probe, double severity, Deviates&) {
  constexpr double off = 0.07;
  probe.id_ohm *= 1.0 + off * severity;
}

void id_missing(Probe& probe, double, Deviates&) { probe.id_ohm = std::numeric_limits<double>::infinity(); }

/// The resistor of the bin two steps away, as good a part as the right one.
void id_other_bin(Probe& probe, double, Deviates& deviates) {
  const auto& bins = all_bins();
  const auto own =
      std::find_if(bins.begin(), bins.end(), [&](const BinNominals& b) { return b.name == probe.coded_bin; });
  if (own == bins.end()) throw std::invalid_argument("no such bin: " + probe.coded_bin);
  const auto up_to = bins.end() - own, from = own - bins.begin();
  const bool up = from < 2 || (up_to > 2 && deviates.uniform() < 0.5);
  const BinNominals& other = own[up ? 2 : -2];
  probe.coded_bin = other.name;
  probe.id_ohm *= other.id_ohm / own->id_ohm;
}

void cable_intermittent(Probe& probe, double severity, Deviates& deviates) {
  constexpr double noise = 1e-3, gaps_per_s = 4.0;
  probe.contact_noise += noise * severity;
  probe.contact.gaps_per_s += gaps_per_s * severity;
  probe.contact.seed = deviates.bits();
}

template <Part part>
void series_resistance(Probe& probe, double severity, Deviates&) {
  constexpr double further_mV = 100.0;  // at the standard drive
  Led& led = probe.*part;
  led.series_ohm += further_mV * severity / led.standard_drive_mA;
  led.forward_V += 1e-3 * further_mV * severity;
}

struct Row {
  ProbeFault fault;
  std::string_view slug, cause;
  bool hard;
  void (*plant)(Probe&, double severity, Deviates&);
};

constexpr Part red = &Probe::red, infrared = &Probe::infrared;
constexpr std::array rows{
    Row{ProbeFault::red_led_open, "red_led_open", "led_open", true, led_open<red>},
    Row{ProbeFault::infrared_led_open, "infrared_led_open", "led_open", true, led_open<infrared>},
    Row{ProbeFault::red_led_short, "red_led_short", "led_short", true, led_short<red>},
    Row{ProbeFault::infrared_led_short, "infrared_led_short", "led_short", true, led_short<infrared>},
    Row{ProbeFault::leds_swapped, "leds_swapped", "leds_swapped", true, leds_swapped},
    Row{ProbeFault::leds_reversed, "leds_reversed", "leds_reversed", true, leds_reversed},
    Row{ProbeFault::red_led_wrong_bin, "red_led_wrong_bin", "led_wrong_bin", false, red_led_wrong_bin},
    Row{ProbeFault::infrared_led_wrong_bin, "infrared_led_wrong_bin", "led_wrong_bin", false, infrared_led_wrong_bin},
    Row{ProbeFault::secondary_emission, "secondary_emission", "secondary_emission", false, secondary_emission},
    Row{ProbeFault::red_die_attach, "red_die_attach", "die_attach", false, die_attach<red>},
    Row{ProbeFault::infrared_die_attach, "infrared_die_attach", "die_attach", false, die_attach<infrared>},
    Row{ProbeFault::red_led_weak, "red_led_weak", "led_weak", false, led_weak<red>},
    Row{ProbeFault::infrared_led_weak, "infrared_led_weak", "led_weak", false, led_weak<infrared>},
    Row{ProbeFault::detector_open, "detector_open", "detector_open", true, detector_open},
    Row{ProbeFault::detector_short, "detector_short", "detector_short", true, detector_short},
    Row{ProbeFault::detector_reversed, "detector_reversed", "detector_reversed", true, detector_reversed},
    Row{ProbeFault::detector_leaky, "detector_leaky", "detector_leaky", false, detector_leaky},
    Row{ProbeFault::shield_open, "shield_open", "shield_open", false, shield_open},
    Row{ProbeFault::housing_light_leak, "housing_light_leak", "housing_light_leak", false, housing_light_leak},
    Row{ProbeFault::direct_light_shunt, "direct_light_shunt", "direct_light_shunt", false, direct_light_shunt},
    Row{ProbeFault::slot_crosstalk, "slot_crosstalk", "slot_crosstalk", false, slot_crosstalk},
    Row{ProbeFault::id_wrong, "id_wrong", "id_wrong", false, id_wrong},
    Row{ProbeFault::id_missing, "id_missing", "id_missing", true, id_missing},
    Row{ProbeFault::id_other_bin, "id_other_bin", "id_other_bin", true, id_other_bin},
    Row{ProbeFault::cable_intermittent, "cable_intermittent", "cable_intermittent", false, cable_intermittent},
    Row{ProbeFault::red_series_resistance, "red_series_resistance", "series_resistance", false, series_resistance<red>},
    Row{ProbeFault::infrared_series_resistance, "infrared_series_resistance", "series_resistance", false,
        series_resistance<infrared>},
};

constexpr bool in_order() {
  for (std::size_t i = 0; i < rows.size(); ++i) {
    if (static_cast<std::size_t>(rows[i].fault) != i) return false;
  }
  return true;
}
static_assert(in_order() && rows.back().fault == ProbeFault::infrared_series_resistance, "one row for each, in order");

const Row& row_of(ProbeFault fault) { return rows.at(static_cast<std::size_t>(fault)); }

constexpr auto faults_of_rows() {
  std::array<ProbeFault, rows.size()> faults{};
  for (std::size_t i = 0; i < rows.size(); ++i) faults[i] = rows[i].fault;
  return faults;
}

}  // namespace

std::span<const ProbeFault> all_faults() {
  static constexpr auto faults = faults_of_rows();
  return faults;
}

std::string_view slug_of(ProbeFault fault) { return row_of(fault).slug; }
std::string_view cause_of(ProbeFault fault) { return row_of(fault).cause; }
bool is_hard(ProbeFault fault) { return row_of(fault).hard; }

std::optional<ProbeFault> parse_fault(std::string_view slug) {
  for (const Row& row : rows) {
    if (row.slug == slug) return row.fault;
  }
  return std::nullopt;
}

std::string known_faults() {
  std::string slugs;
  for (const Row& row : rows) {
    if (!slugs.empty()) slugs += ", ";
    slugs += row.slug;
  }
  return slugs;
}

Probe with_fault(Probe probe, PlantedFault planted, std::uint64_t seed) {
  if (!(planted.severity >= 0.0 && planted.severity <= 1.0)) throw std::invalid_argument("a severity is 0 to 1");
  if (planted.severity == 0.0) return probe;
  const Row& row = row_of(planted.fault);
  if (row.hard) planted.severity = 1.0;
  Deviates deviates(named_seed(seed, probe.serial + " " + std::string(row.slug)));
  row.plant(probe, planted.severity, deviates);
  probe.faults.push_back(planted);
  return probe;
}

}  // namespace probewright::emulated
