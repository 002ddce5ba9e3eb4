#include "drivers/emulated/model_nominals.h"

namespace probewright::emulated {
namespace {

// The warm-up of the red LED between 5 ms and warm is -7.9 mV and -2.8 %: 3.95 K at -2.0 mV and -0.7 % per K, of which
// exp(-1) of the die's rise is still to come at 5 ms. The infrared LED takes 1.30 / 1.95 of the power.
constexpr Heating red_heating{1.0, 0.005, 3.62, 0.5};
constexpr Heating infrared_heating{0.667, 0.005, 2.413, 0.5};

LedNominals red_led(double drive_mA, double transfer_nA_per_mA) {
  LedNominals n;
  n.led.line = {661.5, 19.0, -0.15};
  n.led.transfer_nA_per_mA = transfer_nA_per_mA;
  n.led.forward_V = 1.95;
  n.led.standard_drive_mA = drive_mA;
  n.led.series_ohm = 40.0 / drive_mA;
  n.led.reverse_leakage_uA = 0.02;
  n.led.temperature = {0.14, 0.05, -0.007, -0.0020};
  n.led.heating = red_heating;
  n.centroid_sd_nm = 1.3;
  n.fwhm_sd_nm = 0.8;
  n.skew_sd = 0.1;
  n.power_sd = 0.08;
  n.forward_sd_V = 0.03;
  n.series_sd_ohm = 10.0 / drive_mA;
  return n;
}

LedNominals infrared_led(double drive_mA, double transfer_nA_per_mA) {
  LedNominals n;
  n.led.colour = LedColour::infrared;
  n.led.line = {942.8, 46.0, -0.10};
  n.led.transfer_nA_per_mA = transfer_nA_per_mA;
  n.led.forward_V = 1.30;
  n.led.standard_drive_mA = drive_mA;
  n.led.series_ohm = 40.0 / drive_mA;
  n.led.reverse_leakage_uA = 0.02;
  n.led.temperature = {0.28, 0.10, -0.005, -0.0015};
  n.led.heating = infrared_heating;
  n.centroid_sd_nm = 2.0;
  n.fwhm_sd_nm = 2.0;
  n.skew_sd = 0.1;
  n.power_sd = 0.08;
  n.forward_sd_V = 0.02;
  n.series_sd_ohm = 10.0 / drive_mA;
  return n;
}

ModelNominals aq_20() {
  ModelNominals m{"AQ-20", Wiring::separate, red_led(20.0, 100.0), infrared_led(20.0, 150.0)};
  m.secondary_power = 2e-4;
  m.direct_light = 1e-3;
  m.slot_crosstalk = 2e-4;
  m.ambient_nA = 60.0;
  m.mains_pickup_nA = 0.2;
  m.dark_nA = 0.8;
  return m;
}

ModelNominals aq_35() {
  ModelNominals m{"AQ-35", Wiring::antiparallel, red_led(10.0, 48.0), infrared_led(10.0, 70.0)};
  m.secondary_power = 2e-4;
  m.direct_light = 3e-3;
  m.slot_crosstalk = 2e-4;
  m.ambient_nA = 100.0;
  m.mains_pickup_nA = 0.2;
  m.dark_nA = 0.8;
  return m;
}

}  // namespace

const std::array<ModelNominals, 2>& all_models() {
  static const std::array<ModelNominals, 2> models{aq_20(), aq_35()};
  return models;
}

const ModelNominals* find_model(std::string_view model) {
  for (const ModelNominals& nominals : all_models()) {
    if (nominals.model == model) return &nominals;
  }
  return nullptr;
}

const std::array<BinNominals, 5>& all_bins() {
  static constexpr std::array<BinNominals, 5> bins{{{"B1", 656.0, 10200.0},
                                                    {"B2", 658.0, 11800.0},
                                                    {"B3", 660.0, 13700.0},
                                                    {"B4", 662.0, 15800.0},
                                                    {"B5", 664.0, 18200.0}}};
  return bins;
}

}  // namespace probewright::emulated
