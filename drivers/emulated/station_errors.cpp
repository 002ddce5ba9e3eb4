#include "drivers/emulated/station_errors.h"

#include <string>

#include "drivers/emulated/deviates.h"

namespace probewright::emulated {

StationErrors draw_station_errors(std::uint64_t seed, int nest) {
  Deviates deviates(named_seed(seed, "station errors of nest " + std::to_string(nest)));
  StationErrors errors;
  errors.wavelength_offset_nm = deviates.normal(0.0, 0.08);
  errors.wavelength_stretch = deviates.normal(0.0, 3e-4);
  errors.response_slope_per_nm = deviates.normal(0.0, 4e-4);
  errors.thermometer_K = deviates.normal(0.0, 0.25);
  for (Depths& point : errors.set_points) point = {deviates.normal(0.0, 0.0022), deviates.normal(0.0, 0.0022)};
  errors.red_transmission = deviates.normal(0.0, 0.01);
  errors.infrared_transmission = deviates.normal(0.0, 0.01);
  errors.source_gain = deviates.normal(0.0, 0.001);
  errors.sense_gain = deviates.normal(0.0, 0.0012);
  errors.voltage_offset_V = deviates.normal(0.0, 0.001);
  errors.converter_gain = deviates.normal(0.0, 0.003);
  errors.resistance_gain = deviates.normal(0.0, 0.0006);
  return errors;
}

}  // namespace probewright::emulated
