#pragma once
#include <array>
#include <string_view>

#include "drivers/emulated/probe.h"

namespace probewright::emulated {

/// One LED colour of a model: its nominal LED and the spread between parts (1 sigma).
struct LedNominals {
  Led led;
  double centroid_sd_nm = 0.0;
  double fwhm_sd_nm = 0.0;
  double skew_sd = 0.0;
  double power_sd = 0.0;  ///< relative
  double forward_sd_V = 0.0;
  double series_sd_ohm = 0.0;
};

/// A bin of the red LED and the ID resistor that codes it.
struct BinNominals {
  std::string_view name;
  double centre_nm;
  double id_ohm;
};

/// What the bench knows of a model: engineering assumptions, not data of a real product.
struct ModelNominals {
  std::string_view model;
  Wiring wiring;
  LedNominals red, infrared;
  double secondary_power = 0.0;
  double direct_light = 0.0;
  double slot_crosstalk = 0.0;
  double ambient_nA = 0.0;
  double mains_pickup_nA = 0.0;
  double dark_nA = 0.0;
};

/// The known models.
const std::array<ModelNominals, 2>& all_models();
/// Null when the bench does not know `model`.
const ModelNominals* find_model(std::string_view model);

/// Bins of 2 nm, resistors of the E96 series (IEC 60063) at least 15 % apart. Both models use them.
const std::array<BinNominals, 5>& all_bins();

}  // namespace probewright::emulated
