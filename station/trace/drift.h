#pragma once
#include <optional>
#include <string>
#include <string_view>
#include <variant>

#include "station/measure/certificate.h"

namespace probewright::trace {

/// What of a device can be found to be off.
enum class DriftOf {
  wavelength,    ///< phantom: the spectrometer's axis, in nm
  temperature,   ///< phantom: its thermometer, in K
  slit,          ///< phantom: the width of its line, in nm
  ratio,         ///< phantom: R at all set points, in % of the value
  modulation,    ///< phantom: both depths at all set points, in % of the value
  drive,         ///< adapter: LED currents, in % of the value
  photocurrent,  ///< adapter: all photocurrents, in % of the value
  voltage,       ///< adapter: forward voltages, in % of the value
  resistance     ///< adapter: ID resistances, in % of the value
};
std::string_view slug(DriftOf quantity);
std::string_view unit_of(DriftOf quantity);
std::optional<DriftOf> find_drift(std::string_view slug);

/// A device that, with its certificate applied, told values too high by `too_high`: the truth lay lower.
struct Drift {
  DriftOf of = DriftOf::wavelength;
  double too_high = 0.0;  ///< in unit_of(of); negative: told too low
};

/// The certificates as they should have been.
measure::Certificates corrected(const measure::Certificates& certificates, const Drift& drift);

}  // namespace probewright::trace
