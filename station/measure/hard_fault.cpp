#include "station/measure/hard_fault.h"

#include <algorithm>

#include "station/base/catalogue.h"
#include "station/measure/checks.h"

namespace probewright::measure {
namespace {

constexpr double shorted_below_V = 0.5;

}  // namespace

bool cannot_shine(const ForwardVoltage& at_drive) {
  return at_drive.at_compliance || at_drive.voltage_V < shorted_below_V;
}

namespace checks {
namespace {

constexpr unsigned optical = needs_spectra | needs_pulses | needs_closed_path | needs_ambient;
constexpr unsigned by_detector = needs_pulses | needs_closed_path | needs_ambient;

bool no_probe(const Run& run) {
  const auto& electrical = run.captures.electrical;
  if (!electrical) return false;
  return electrical->present_phantom == false || electrical->present_adapter == false;
}

bool dead(const Run& run, Band band) {
  const auto& electrical = run.captures.electrical;
  return electrical && electrical->led.of(band).at_drive && cannot_shine(*electrical->led.of(band).at_drive);
}

/// The detector conducts whatever its bias: the converter is full in the dark.
bool full_in_the_dark(const Run& run) {
  constexpr double codes = 8388608.0, full_from = 0.99;
  const auto& dark = run.captures.dark;
  return dark && dark->connected_nA >= full_from * codes * run.certificates.adapter.nA_per_code;
}

/// Levels of the light of both LEDs, from the first captures that have them.
std::optional<PerBand<Level>> levels(const Run& run) {
  const auto red = alone_levels(run, Band::red), infrared = alone_levels(run, Band::infrared);
  if (red && infrared) return PerBand<Level>{red->red, infrared->infrared};
  for (const FittedPulses& pulse : run.pulses) {
    if (!pulse.reason.empty()) continue;
    return PerBand<Level>{{pulse.fits.red.dc, pulse.fits.red.dc_u}, {pulse.fits.infrared.dc, pulse.fits.infrared.dc_u}};
  }
  return std::nullopt;
}

/// Both LEDs shine and the detector tells of neither; a reversed one tells of less than nothing.
bool no_photocurrent(const Run& run) {
  const auto found = levels(run);
  const auto nothing = [](const Level& level) { return !(level.value > 10.0 * level.noise_u); };
  return found && nothing(found->red) && nothing(found->infrared);
}

}  // namespace

std::string hard_fault(const Run& run) {
  if (no_probe(run)) return "probe_present";
  for (const Band band : {Band::red, Band::infrared})
    if (dead(run, band)) return std::string{slug(band)} + "_forward_voltage";
  if (full_in_the_dark(run)) return "dark_current";
  if (no_photocurrent(run)) return "red_transfer";
  return {};
}

bool means_nothing(const Run& run, std::string_view fault, std::string_view check) {
  const Check* known = find_check(check);
  const unsigned needs = known == nullptr ? 0u : known->needs;
  if (fault == "probe_present") return check != fault;
  if (fault == "dark_current") return (needs & by_detector) != 0;
  if (fault == "red_transfer") return (needs & by_detector) != 0 && !check.ends_with("_transfer");
  if (!fault.ends_with("_forward_voltage")) return false;
  for (const Band band : {Band::red, Band::infrared}) {
    const std::string led{slug(band)};
    if (dead(run, band) && (check == led + "_voltage_rise" || check == led + "_warmup")) return true;
  }
  return (needs & optical) != 0;
}

}  // namespace checks
}  // namespace probewright::measure
