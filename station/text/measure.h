#pragma once
#include <optional>
#include <string>

#include "station/text/console.h"

namespace probewright::text {

struct MeasureSpectrumOptions {
  std::string file;                     ///< CSV: wavelength_nm,signal and perhaps dark, response
  std::string band;                     ///< "red" or "infrared"; empty: told from where the light is
  double threshold = 0.01;              ///< part of the peak where the centroid's run ends; 0: the whole line window
  std::optional<double> temperature_C;  ///< of the probe; wavelengths are then referred to 25 C
  double slit_nm = 0.0;                 ///< of the spectrometer, taken out of the width
};
/// `measure spectrum`: the wavelengths of one LED line from a lab's own file.
/// Exit status: 0, 1 the spectrum cannot be used, 2 refused input.
int measure_spectrum(const MeasureSpectrumOptions& options, Console& console);

struct MeasurePulsesOptions {
  std::string file;               ///< CSV: t_s,red,dark_a,infrared,dark_b or t_s,red,infrared
  std::optional<double> rate_Hz;  ///< of the modulation; may be left out with free_frequency
  std::optional<double> cycle_s;  ///< length of one cycle of four slots; needed with dark slots
  bool free_frequency = false;    ///< fit the rate too
};
/// `measure pulses`: AC, DC, modulation and ratio of a pulse train from a lab's own file.
/// Exit status: 0, 1 the train cannot be used, 2 refused input.
int measure_pulses(const MeasurePulsesOptions& options, Console& console);

}  // namespace probewright::text
