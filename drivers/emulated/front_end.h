#pragma once
#include <array>
#include <cstdint>

#include "drivers/emulated/deviates.h"
#include "drivers/emulated/station_errors.h"

namespace probewright::emulated {

/// What the certificates of the demonstration adapters say; the electronics are exactly this when the station's errors
/// are zero.
namespace adapter_certificate {
inline constexpr double full_scale_nA = 10000.0;                  ///< either sign
inline constexpr double nA_per_code = full_scale_nA / 8388608.0;  ///< 24 bit, signed
inline constexpr double reference_ohm = 10000.0;
inline constexpr double dummy_load_V = 2.0;
inline constexpr double proof_current_mA = 20.0;
}  // namespace adapter_certificate

/// Photocurrent amplifier and converter, current source and volt meter of an adapter. One thread.
class FrontEnd {
 public:
  static constexpr double slot_noise_nA = 0.09;     ///< of one slot
  static constexpr double drive_noise = 5e-5;       ///< relative, of the light of one slot
  static constexpr double settling_residue = 1e-4;  ///< of the slot before, still there in a slot
  static constexpr double settled_share = 0.6;      ///< of a slot that the converter averages
  static constexpr double compliance_V = 5.0;

  FrontEnd(const StationErrors& errors, std::uint64_t seed);
  /// Other errors from now on.
  void set_errors(const StationErrors& errors) { errors_ = errors; }

  /// Converter code of a slot. `light_nA` and `background_nA` together are the photocurrent, `before_nA` that of the
  /// slot before it.
  std::int32_t code(double light_nA, double background_nA, double before_nA, double slot_s);

  struct Mean {
    double current_nA = 0.0;
    double sd_nA = 0.0;  ///< of the mean, as the adapter estimates it
  };
  /// Mean of a steady current over a time, offset included; the converter's full scale bounds it.
  Mean mean_current(double current_nA, double time_s);

  /// Currents that flow for a current that was set, both mA.
  double delivered_mA(double set_mA) const { return set_mA * (1.0 + errors_.source_gain); }
  double reported_mA(double delivered_mA);
  double measured_V(double voltage_V);
  double measured_ohm(double resistance_ohm);
  double measured_leakage_uA(double leakage_uA);
  double measured_pickup_nA(double rms_nA);

 private:
  StationErrors errors_;
  Deviates noise_;
  double offset_nA_;
};

}  // namespace probewright::emulated
