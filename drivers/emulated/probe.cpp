#include "drivers/emulated/probe.h"

#include <algorithm>
#include <cmath>
#include <stdexcept>

#include "drivers/emulated/deviates.h"
#include "drivers/emulated/model_nominals.h"

namespace probewright::emulated {
namespace {

/// Resistors of a real lot sit well inside their 1 %.
constexpr double id_relative_sd = 0.003;

/// What the sorting of LEDs into bins does not know of the centroid.
constexpr double sorting_sd_nm = 0.15;

Led draw_led(const LedNominals& nominals, Deviates& deviates) {
  const Led& nominal = nominals.led;
  Led led = nominal;
  const double centroid_nm = deviates.normal(nominal.line.centroid_nm(), nominals.centroid_sd_nm);
  const double fwhm_nm = std::max(5.0, deviates.normal(nominal.line.fwhm_nm(), nominals.fwhm_sd_nm));
  led.line = line_of(centroid_nm, fwhm_nm, deviates.normal(nominal.line.skew, nominals.skew_sd));
  led.optical_power = deviates.log_normal(1.0, nominals.power_sd);
  led.forward_V = deviates.normal(nominal.forward_V, nominals.forward_sd_V);
  led.series_ohm = std::max(0.2 * nominal.series_ohm, deviates.normal(nominal.series_ohm, nominals.series_sd_ohm));
  led.reverse_leakage_uA = deviates.log_normal(nominal.reverse_leakage_uA, 0.4);
  led.heating.die_rise_K = deviates.log_normal(nominal.heating.die_rise_K, 0.08);
  led.heating.package_rise_K = deviates.log_normal(nominal.heating.package_rise_K, 0.08);
  led.heating.package_time_s = deviates.log_normal(nominal.heating.package_time_s, 0.08);
  return led;
}

/// The photodiode answers a little differently to a line that sits elsewhere.
double responsivity_factor(const LineShape& line, const LineShape& nominal) {
  return silicon_responsivity_A_per_W(line.centroid_nm()) / silicon_responsivity_A_per_W(nominal.centroid_nm());
}

const BinNominals& nearest_bin(double centroid_nm) {
  const auto& bins = all_bins();
  return *std::min_element(bins.begin(), bins.end(), [centroid_nm](const BinNominals& a, const BinNominals& b) {
    return std::abs(a.centre_nm - centroid_nm) < std::abs(b.centre_nm - centroid_nm);
  });
}

}  // namespace

std::string_view to_text(Wiring wiring) {
  switch (wiring) {
    case Wiring::separate:
      return "separate";
    case Wiring::common:
      return "common";
    case Wiring::antiparallel:
      return "antiparallel";
  }
  return "separate";
}

std::string known_models() {
  std::string names;
  for (const ModelNominals& nominals : all_models()) {
    if (!names.empty()) names += ", ";
    names += nominals.model;
  }
  return names;
}

bool knows_model(std::string_view model) { return find_model(model) != nullptr; }

Probe draw_probe(std::uint64_t seed, std::string_view serial, std::string_view model) {
  const ModelNominals* nominals = find_model(model);
  if (nominals == nullptr) throw std::invalid_argument("no such probe model: " + std::string(model));
  Deviates deviates(named_seed(seed, serial));
  Probe probe;
  probe.serial = serial;
  probe.model = model;
  probe.wiring = nominals->wiring;
  probe.red = draw_led(nominals->red, deviates);
  probe.infrared = draw_led(nominals->infrared, deviates);
  const double coupling = deviates.log_normal(1.0, 0.04);  // detector size, alignment, optics: common to both bands
  for (auto [led, nominal] : {std::pair{&probe.red, &nominals->red.led}, {&probe.infrared, &nominals->infrared.led}}) {
    led->transfer_nA_per_mA =
        nominal->transfer_nA_per_mA * led->optical_power * coupling * responsivity_factor(led->line, nominal->line);
  }
  probe.secondary_power = deviates.log_normal(nominals->secondary_power, 0.3);
  probe.secondary_line = line_of(deviates.normal(890.0, 5.0), 48.0, 0.0);
  probe.secondary_current = secondary_current_per_power * probe.secondary_power;
  probe.photodiode = {deviates.log_normal(nominals->dark_nA, 0.3), std::max(5.0, deviates.normal(10.0, 1.5)), 0.02, 0.0,
                      DetectorCircuit::whole};
  const BinNominals& bin = nearest_bin(deviates.normal(probe.red.line.centroid_nm(), sorting_sd_nm));
  probe.coded_bin = bin.name;
  probe.id_ohm = bin.id_ohm * deviates.normal(1.0, id_relative_sd);
  probe.mains_pickup_nA = deviates.log_normal(nominals->mains_pickup_nA, 0.3);
  probe.contact_noise = deviates.log_normal(1e-5, 0.3);
  probe.direct_light = deviates.log_normal(nominals->direct_light, 0.3);
  probe.slot_crosstalk = deviates.log_normal(nominals->slot_crosstalk, 0.3);
  probe.ambient_nA = deviates.log_normal(nominals->ambient_nA, 0.15);
  return probe;
}

}  // namespace probewright::emulated
