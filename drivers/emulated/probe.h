#pragma once
#include <cstdint>
#include <string>
#include <string_view>
#include <vector>

#include "drivers/emulated/contact.h"
#include "drivers/emulated/led.h"
#include "drivers/emulated/photodiode.h"
#include "drivers/emulated/probe_fault.h"

namespace probewright::emulated {

/// How the two LEDs are connected.
enum class Wiring { separate, common, antiparallel };
std::string_view to_text(Wiring wiring);

/// One probe with everything that physics needs to know of it. Pure data; a healthy one comes from draw_probe().
struct Probe {
  std::string serial;
  std::string model;
  Wiring wiring = Wiring::separate;
  Led red, infrared;               ///< by what they are driven as
  double secondary_power = 0.0;    ///< share of the red LED's power that leaves in its secondary line
  LineShape secondary_line;        ///< where that goes
  double secondary_current = 0.0;  ///< share of the red photocurrent that it makes through the phantom
  Photodiode photodiode;
  double id_ohm = 0.0;           ///< the fitted ID resistor
  std::string coded_bin;         ///< which bin that resistor stands for
  double mains_pickup_nA = 0.0;  ///< root mean square
  double contact_noise = 0.0;    ///< relative, per slot: what the cable does to the photocurrent
  Contact contact;
  double direct_light = 0.0;         ///< share of the light that reaches the detector around the phantom
  double slot_crosstalk = 0.0;       ///< share of the other LED's light that appears in an LED's slot
  double ambient_nA = 0.0;           ///< photocurrent under the phantom's lamp at full level
  std::vector<PlantedFault> faults;  ///< what is wrong with it; its values have it in them already
};

/// Photocurrent per power of the secondary line against the red line, through the phantom: tissue-like material passes
/// less of it, silicon answers more to it.
inline constexpr double secondary_current_per_power = 0.635;

/// The models that the bench knows, separated by ", ".
std::string known_models();
bool knows_model(std::string_view model);

/// A healthy probe of a known model: every parameter drawn from (seed, serial) alone, so the same serial is the same
/// probe in every nest and every session. Unknown models are our own mistake: see knows_model().
Probe draw_probe(std::uint64_t seed, std::string_view serial, std::string_view model);

}  // namespace probewright::emulated
