#include "drivers/emulated/front_end.h"

#include <algorithm>
#include <cmath>

namespace probewright::emulated {
namespace {

constexpr double electron_nC = 1.602176634e-10;  ///< exact in the SI, in nC

double drawn_offset_nA(std::uint64_t seed) {
  Deviates deviates(derived_seed(seed, 1));
  return deviates.normal(0.0, 0.15);
}

}  // namespace

FrontEnd::FrontEnd(const StationErrors& errors, std::uint64_t seed)
    : errors_(errors), noise_(seed), offset_nA_(drawn_offset_nA(seed)) {}

std::int32_t FrontEnd::code(double light_nA, double background_nA, double before_nA, double slot_s) {
  const double current = light_nA + background_nA;
  const double settled = current + settling_residue * (before_nA - current);
  const double shot_variance = electron_nC * std::abs(current) / (settled_share * slot_s);
  const double drive_nA = drive_noise * light_nA;
  const double sd = std::sqrt(slot_noise_nA * slot_noise_nA + drive_nA * drive_nA + shot_variance);
  const double seen = settled * (1.0 + errors_.converter_gain) + offset_nA_ + noise_.normal(0.0, sd);
  const double rounded = std::floor(seen / adapter_certificate::nA_per_code + 0.5);
  return static_cast<std::int32_t>(std::clamp(rounded, -8388608.0, 8388607.0));
}

FrontEnd::Mean FrontEnd::mean_current(double current_nA, double time_s) {
  constexpr double slot_s = 439e-6, floor_nA = 0.006;  // white noise averages out, slow wander does not
  const double white = slot_noise_nA * std::sqrt(settled_share * slot_s / time_s);
  const double sd = std::sqrt(white * white + floor_nA * floor_nA);
  const double seen = current_nA * (1.0 + errors_.converter_gain) + offset_nA_ + noise_.normal(0.0, sd);
  constexpr double full = adapter_certificate::full_scale_nA;
  return {std::clamp(seen, -full, full), sd * noise_.log_normal(1.0, 0.1)};
}

double FrontEnd::reported_mA(double delivered_mA) {
  return delivered_mA * (1.0 + errors_.sense_gain) * (1.0 + noise_.normal(0.0, 2e-5));
}

double FrontEnd::measured_V(double voltage_V) {
  return voltage_V + errors_.voltage_offset_V + noise_.normal(0.0, 30e-6);
}

double FrontEnd::measured_ohm(double resistance_ohm) {
  return resistance_ohm * (1.0 + errors_.resistance_gain) * (1.0 + noise_.normal(0.0, 5e-5));
}

double FrontEnd::measured_leakage_uA(double leakage_uA) {
  return std::max(0.0, leakage_uA * (1.0 + noise_.normal(0.0, 0.005)) + noise_.normal(0.0, 2e-4));
}

double FrontEnd::measured_pickup_nA(double rms_nA) { return std::hypot(rms_nA, noise_.normal(0.0, 0.02)); }

}  // namespace probewright::emulated
