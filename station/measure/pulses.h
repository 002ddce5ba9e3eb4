#pragma once
#include <array>
#include <optional>
#include <span>
#include <vector>

#include "station/base/result.h"
#include "station/measure/bands.h"

namespace probewright::measure {

/// Moments of the slots red, dark a, infrared, dark b within a cycle, as parts of it.
constexpr std::array<double, 4> slot_moments = {1.0 / 8, 3.0 / 8, 5.0 / 8, 7.0 / 8};

/// One band's light against time, dark level subtracted.
struct Train {
  std::vector<double> t_s;
  std::vector<double> level;
};

/// Subtracts from each red and infrared slot the mean of its two neighbouring dark slots: their linear interpolation,
/// since neighbours stand a quarter of a cycle before and after.
/// red, dark_a, infrared, dark_b   n values each, n >= 2, in any unit
/// start_s                         moments at which the cycles begin, n values, evenly spaced by cycle_s
/// The first red slot has no dark slot before it and is dropped: red has n - 1 values, infrared n.
/// Times are those of the slots. Errors: pulses_lengths_differ.
Result<PerBand<Train>> subtract_dark(std::span<const double> red, std::span<const double> dark_a,
                                     std::span<const double> infrared, std::span<const double> dark_b,
                                     std::span<const double> start_s, double cycle_s);

/// What one band's train says. Units of the train unless said otherwise.
struct PulseFit {
  double dc = 0.0;           ///< level at the middle of the train: offset and slope of the fit there
  double ac = 0.0;           ///< amplitude of the fundamental
  double phase_rad = 0.0;    ///< level = dc + ac sin(2 pi rate t + phase) + ...; t as in the train, phase in (-pi, pi]
  double modulation = 0.0;   ///< ac / dc
  double slope_per_s = 0.0;  ///< drift
  double residual_relative = 0.0;  ///< sd of the residuals over |dc|
  double rate_Hz = 0.0;
  double dc_u = 0.0, ac_u = 0.0, modulation_u = 0.0, phase_u_rad = 0.0, rate_u_Hz = 0.0;  ///< standard, from noise
  double noise_sd = 0.0;                                                                  ///< of one sample
  std::vector<double> residuals;
  std::size_t columns = 0;  ///< of the model that was fitted
};

struct PulseRules {
  std::optional<double> rate_Hz;  ///< of the modulator; may be left out when free
  bool free_rate = false;         ///< fit the rate too, starting from rate_Hz or else from the strongest line
  bool curvature = false;         ///< the drift bends: LEDs that still warm up. Its mean level counts as dc
};

/// Weighted least squares with Hann weights over the length of the train: offset, slope, sine and cosine at the rate,
/// harmonics 2 and 3; with `curvature` also a parabola whose weighted mean is 0.
/// Needs two periods or more and at least 16 samples per harmonic model; times strictly rising.
/// Errors: pulses_too_few, pulses_too_short (under two periods), pulses_time_not_rising, pulses_rate_out_of_range,
/// pulses_no_modulation (free rate: nothing to hold on to), fit_impossible.
/// Source: sine fitting as in IEEE 1057 (three and four parameters), extended by slope and harmonics; Hann weights keep
/// what is not in the model, such as aliased flicker, from leaking into the fundamental.
Result<PulseFit> fit_pulses(const Train& train, const PulseRules& rules);

/// A steady level in the units of the train, with its standard uncertainty from noise.
struct Level {
  double value = 0.0, noise_u = 0.0;
};
/// Level of a train that nothing modulates but perhaps a lamp: least squares with Hann weights of an offset and, when
/// `flicker_Hz` is above 0, of sine and cosine at that frequency and at twice it.
/// Errors: pulses_too_few, pulses_lengths_differ, pulses_time_not_rising, fit_impossible.
Result<Level> fit_level(const Train& train, double flicker_Hz);

/// Standard deviation of the fit's residuals, over |dc|, after lines at these frequencies and a drift of fourth
/// order are fitted out of them.
/// Errors: fit_impossible.
Result<double> residual_without_lines(const Train& train, const PulseFit& fit, std::span<const double> lines_Hz);

/// Whether a band's fit holds enough light and modulation to say how much it is modulated.
/// Errors: pulses_too_dark (a level that is not well above its noise), pulses_no_modulation.
Result<void> is_modulated(const PulseFit& fit);

/// Ratio of the modulations of two bands and its noise, with the correlation that shared dark slots bring.
struct Ratio {
  double value = 0.0;
  double noise_u = 0.0;
};
/// The fits must come from the same capture. Errors: pulses_too_dark (a level that is not well above its
/// noise), pulses_no_modulation.
Result<Ratio> ratio_of(const PerBand<PulseFit>& fits);

}  // namespace probewright::measure
