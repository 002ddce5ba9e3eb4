#include "station/measure/pulses.h"

#include <algorithm>
#include <cmath>
#include <numbers>
#include <numeric>

#include "station/base/numbers.h"
#include "station/measure/least_squares.h"

namespace probewright::measure {
namespace {

constexpr double two_pi = 2.0 * std::numbers::pi;
constexpr std::size_t least_samples = 16;

/// Columns of the model: offset, slope, then sine and cosine of the fundamental and of harmonics 2 and 3.
/// Then come a parabola, when the drift bends, and the derivative by the rate, when that is free.
enum Column : std::size_t { offset, slope, sine, cosine, first_harmonic, linear_columns = 8 };

/// What is fitted beside that.
struct Shape {
  bool curvature = false;
  std::size_t columns() const { return linear_columns + (curvature ? 1 : 0); }
};

Problem problem(std::string_view id, std::initializer_list<std::pair<std::string, std::string>> arguments = {}) {
  return {id, "", arguments};
}

double middle_of(const Train& train) { return 0.5 * (train.t_s.front() + train.t_s.back()); }
double length_of(const Train& train) { return train.t_s.back() - train.t_s.front(); }

/// Hann window over the train and half a sample beyond each end, so that no sample weighs nothing.
std::vector<double> hann_weights(const Train& train) {
  const double step = length_of(train) / static_cast<double>(train.t_s.size() - 1);
  const double start = train.t_s.front() - 0.5 * step, length = length_of(train) + step;
  std::vector<double> weights(train.t_s.size());
  std::transform(train.t_s.begin(), train.t_s.end(), weights.begin(),
                 [&](double t) { return 0.5 - 0.5 * std::cos(two_pi * (t - start) / length); });
  return weights;
}

/// Appends sine and cosine of each frequency at a moment.
void add_lines(std::vector<double>& row, double t_s, std::span<const double> lines_Hz) {
  for (const double line_Hz : lines_Hz) {
    row.push_back(std::sin(two_pi * line_Hz * t_s));
    row.push_back(std::cos(two_pi * line_Hz * t_s));
  }
}

/// One row per sample. With `previous` also the derivative with respect to the rate, for the fit of a free rate.
std::vector<double> design_of(const Train& train, double rate_Hz, Shape shape, const LinearFit* previous) {
  const double middle = middle_of(train), half = 0.5 * length_of(train);
  // Mean of x^2 over -1 to 1 with the weights (1 + cos(pi x))/2: the parabola then leaves the mean level alone.
  constexpr double mean_square = 1.0 / 3.0 - 2.0 / (std::numbers::pi * std::numbers::pi);
  std::vector<double> design;
  design.reserve(train.t_s.size() * (linear_columns + 2));
  for (const double t : train.t_s) {
    const double since = t - middle, angle = two_pi * rate_Hz * since;
    design.push_back(1.0);
    design.push_back(since);
    for (int harmonic = 1; harmonic <= 3; ++harmonic) {
      design.push_back(std::sin(harmonic * angle));
      design.push_back(std::cos(harmonic * angle));
    }
    if (shape.curvature) design.push_back(since / half * (since / half) - mean_square);
    if (previous == nullptr) continue;
    double derivative = 0.0;
    for (int harmonic = 1; harmonic <= 3; ++harmonic) {
      const std::size_t at = sine + 2 * static_cast<std::size_t>(harmonic - 1);
      derivative += harmonic * (previous->coefficients[at] * std::cos(harmonic * angle) -
                                previous->coefficients[at + 1] * std::sin(harmonic * angle));
    }
    design.push_back(two_pi * since * derivative);
  }
  return design;
}

Result<LinearFit> fit_at(const Train& train, double rate_Hz, Shape shape, std::span<const double> weights) {
  return fit_linear(design_of(train, rate_Hz, shape, nullptr), shape.columns(), train.level, weights);
}

std::optional<Problem> not_a_train(const Train& train) {
  if (train.t_s.size() != train.level.size()) return problem("pulses_lengths_differ");
  if (train.t_s.size() < least_samples)
    return problem("pulses_too_few",
                   {{"count", std::to_string(train.t_s.size())}, {"least", std::to_string(least_samples)}});
  for (std::size_t i = 1; i < train.t_s.size(); ++i)
    if (!(train.t_s[i] > train.t_s[i - 1])) return problem("pulses_time_not_rising", {{"row", std::to_string(i + 1)}});
  return std::nullopt;
}

/// Harmonic 3 must stay below half the sampling rate, and two periods must fit in.
std::optional<Problem> not_a_rate(const Train& train, double rate_Hz) {
  const double sampling_Hz = static_cast<double>(train.t_s.size() - 1) / length_of(train);
  if (!(rate_Hz > 0.0) || rate_Hz * 6.0 >= sampling_Hz)
    return problem("pulses_rate_out_of_range", {{"rate", shortest(rate_Hz)}, {"highest", shortest(sampling_Hz / 6.0)}});
  // A train of exactly two periods ends one sample before the third begins.
  const double periods = (length_of(train) + 1.0 / sampling_Hz) * rate_Hz;
  if (periods < 2.0 - 1e-6) return problem("pulses_too_short", {{"periods", fixed(periods, 2)}});
  return std::nullopt;
}

double weighted_squares(const LinearFit& fit, std::span<const double> weights) {
  double sum = 0.0;
  for (std::size_t i = 0; i < weights.size(); ++i) sum += weights[i] * fit.residuals[i] * fit.residuals[i];
  return sum;
}

/// The rate on a grid of a quarter of the resolution that leaves the least, from two periods up.
Result<double> strongest_rate(const Train& train, Shape shape, std::span<const double> weights) {
  constexpr double highest_Hz = 20.0;  // a pulse train of this trade is slower than this
  const double sampling_Hz = static_cast<double>(train.t_s.size() - 1) / length_of(train);
  const double resolution = 1.0 / length_of(train), limit = std::min(highest_Hz, sampling_Hz / 6.0);
  double best_rate = 0.0, best = 0.0;
  for (double rate = 2.0 * resolution; rate < limit; rate += 0.25 * resolution) {
    const auto fit = fit_at(train, rate, shape, weights);
    if (!fit) continue;
    // By the fundamental's amplitude: a subharmonic fits as well through its harmonics, but with a small fundamental.
    const double amplitude = std::hypot(fit->coefficients[sine], fit->coefficients[cosine]);
    if (amplitude > best) best = amplitude, best_rate = rate;
  }
  if (best_rate == 0.0) return problem("pulses_no_modulation");
  return best_rate;
}

struct FreeFit {
  LinearFit linear;  ///< at the fitted rate
  double rate_Hz = 0.0, rate_u_Hz = 0.0;
  LinearFit full;  ///< with the rate as last coefficient: its covariance is the one that counts
};

/// Gauss-Newton on the rate; each step is halved until it improves the fit.
Result<FreeFit> fit_free(const Train& train, double start_Hz, Shape shape, std::span<const double> weights) {
  const std::size_t rate_column = shape.columns();
  const double resolution = 1.0 / length_of(train);
  double rate = start_Hz;
  auto linear = fit_at(train, rate, shape, weights);
  if (!linear) return linear.error();
  for (int round = 0; round < 60; ++round) {
    const auto full = fit_linear(design_of(train, rate, shape, &*linear), rate_column + 1, train.level, weights);
    if (!full) return problem("pulses_no_modulation");
    double step = std::clamp(full->coefficients[rate_column], -0.5 * resolution, 0.5 * resolution);
    const double before = weighted_squares(*linear, weights);
    bool better = false;
    for (; std::abs(step) > 1e-13 * rate; step *= 0.5) {
      if (not_a_rate(train, rate + step)) continue;
      auto next = fit_at(train, rate + step, shape, weights);
      if (!next || !(weighted_squares(*next, weights) < before)) continue;
      linear = std::move(next), rate += step, better = true;
      break;
    }
    if (!better) return FreeFit{*linear, rate, std::sqrt(full->variance(rate_column)), *full};
  }
  return problem("pulses_no_modulation");
}

double wrapped(double angle) { return std::remainder(angle, two_pi); }

/// Amplitude and phase from sine and cosine coefficients, and the noise of all of them.
PulseFit pulse_fit(const Train& train, const LinearFit& fit, const LinearFit& spread, double rate_Hz) {
  const double s = fit.coefficients[sine], c = fit.coefficients[cosine];
  PulseFit out;
  out.rate_Hz = rate_Hz;
  out.dc = fit.coefficients[offset];
  out.slope_per_s = fit.coefficients[slope];
  out.ac = std::hypot(s, c);
  out.phase_rad = wrapped(std::atan2(c, s) - two_pi * rate_Hz * middle_of(train));
  out.modulation = out.ac / out.dc;
  out.noise_sd = fit.noise_sd;
  out.residuals = fit.residuals;
  out.columns = fit.coefficients.size();
  const double squares = std::inner_product(fit.residuals.begin(), fit.residuals.end(), fit.residuals.begin(), 0.0);
  const std::size_t n = fit.residuals.size(), p = spread.coefficients.size();
  out.residual_relative = std::sqrt(squares / static_cast<double>(n > p ? n - p : 1)) / std::abs(out.dc);

  const double cos_a = out.ac > 0.0 ? s / out.ac : 1.0, sin_a = out.ac > 0.0 ? c / out.ac : 0.0;
  const double ss = spread.variance(sine), cc = spread.variance(cosine), sc = spread.covariance_of(sine, cosine);
  const double ac_variance = cos_a * cos_a * ss + sin_a * sin_a * cc + 2.0 * cos_a * sin_a * sc;
  const double across = sin_a * sin_a * ss + cos_a * cos_a * cc - 2.0 * cos_a * sin_a * sc;
  const double dc_variance = spread.variance(offset);
  const double both = cos_a * spread.covariance_of(offset, sine) + sin_a * spread.covariance_of(offset, cosine);
  const double m = out.modulation;
  out.dc_u = std::sqrt(dc_variance);
  out.ac_u = std::sqrt(std::max(0.0, ac_variance));
  out.phase_u_rad = out.ac > 0.0 ? std::sqrt(std::max(0.0, across)) / out.ac : std::numbers::pi;
  out.modulation_u = std::sqrt(std::max(0.0, ac_variance + m * m * dc_variance - 2.0 * m * both)) / std::abs(out.dc);
  return out;
}

/// Correlation that one dark slot in two differences brings to the two bands: of residuals of the same cycle and of
/// red in the cycle after, in all; at the slow modulation both add up. Between 0 and the 1/3 of pure slot noise.
double shared_noise(const PulseFit& red, const PulseFit& infrared) {
  const auto& r = red.residuals;
  const auto& i = infrared.residuals;
  // red has lost its first slot when the pair comes from slots: red[k] then belongs to cycle k + 1.
  const std::size_t shift = i.size() > r.size() ? i.size() - r.size() : 0;
  const std::size_t n = std::min(r.size(), i.size());
  if (n < least_samples || shift > 1) return 0.0;
  double same = 0.0, after = 0.0, rr = 0.0, ii = 0.0;
  for (std::size_t k = 0; k < n; ++k) {
    const double infrared_same = i[k + shift];
    same += r[k] * infrared_same;
    rr += r[k] * r[k];
    ii += infrared_same * infrared_same;
    if (k + shift >= 1) after += r[k] * i[k + shift - 1];
  }
  const double norm = std::sqrt(rr * ii);
  return norm > 0.0 ? std::clamp((same + after) / norm, 0.0, 1.0 / 3.0) : 0.0;
}

}  // namespace

Result<PerBand<Train>> subtract_dark(std::span<const double> red, std::span<const double> dark_a,
                                     std::span<const double> infrared, std::span<const double> dark_b,
                                     std::span<const double> start_s, double cycle_s) {
  const std::size_t n = red.size();
  if (n < 2 || dark_a.size() != n || infrared.size() != n || dark_b.size() != n || start_s.size() != n)
    return problem("pulses_lengths_differ");
  PerBand<Train> trains;
  for (std::size_t k = 0; k < n; ++k) {
    if (k > 0) {
      trains.red.t_s.push_back(start_s[k] + slot_moments[0] * cycle_s);
      trains.red.level.push_back(red[k] - 0.5 * (dark_b[k - 1] + dark_a[k]));
    }
    trains.infrared.t_s.push_back(start_s[k] + slot_moments[2] * cycle_s);
    trains.infrared.level.push_back(infrared[k] - 0.5 * (dark_a[k] + dark_b[k]));
  }
  return trains;
}

Result<PulseFit> fit_pulses(const Train& train, const PulseRules& rules) {
  if (auto wrong = not_a_train(train)) return *wrong;
  const auto weights = hann_weights(train);
  if (!rules.rate_Hz && !rules.free_rate)
    return problem("pulses_rate_out_of_range", {{"rate", "none"}, {"highest", "20"}});
  const Shape shape{rules.curvature};
  double rate = rules.rate_Hz.value_or(0.0);
  if (!rules.rate_Hz) {
    const auto found = strongest_rate(train, shape, weights);
    if (!found) return found.error();
    rate = *found;
  }
  if (auto wrong = not_a_rate(train, rate)) return *wrong;
  if (!rules.free_rate) {
    const auto fit = fit_at(train, rate, shape, weights);
    if (!fit) return fit.error();
    return pulse_fit(train, *fit, *fit, rate);
  }
  const auto free = fit_free(train, rate, shape, weights);
  if (!free) return free.error();
  PulseFit out = pulse_fit(train, free->linear, free->full, free->rate_Hz);
  out.rate_u_Hz = free->rate_u_Hz;
  // The phase is told at t = 0, the rate's error turns it about the middle of the train.
  out.phase_u_rad = std::hypot(out.phase_u_rad, two_pi * middle_of(train) * out.rate_u_Hz);
  return out;
}

Result<Level> fit_level(const Train& train, double flicker_Hz) {
  if (auto wrong = not_a_train(train)) return *wrong;
  const std::size_t columns = flicker_Hz > 0.0 ? 5 : 1;
  std::vector<double> design;
  for (const double t : train.t_s) {
    design.push_back(1.0);
    if (columns > 1) add_lines(design, t, std::array{flicker_Hz, 2.0 * flicker_Hz});
  }
  const auto fit = fit_linear(design, columns, train.level, hann_weights(train));
  if (!fit) return fit.error();
  return Level{fit->coefficients[0], std::sqrt(fit->variance(0))};
}

Result<double> residual_without_lines(const Train& train, const PulseFit& fit, std::span<const double> lines_Hz) {
  const double middle = middle_of(train), half = 0.5 * length_of(train);
  std::vector<double> design;
  for (const double t : train.t_s) {
    const double x = (t - middle) / half;
    design.insert(design.end(), {1.0, x, x * x, x * x * x, x * x * x * x});  // weighted alike, unlike in the fit
    add_lines(design, t, lines_Hz);
  }
  const std::size_t columns = 5 + 2 * lines_Hz.size(), n = fit.residuals.size();
  const auto lines = fit_linear(design, columns, fit.residuals);
  if (!lines) return lines.error();
  const auto& rest = lines->residuals;
  const double squares = std::inner_product(rest.begin(), rest.end(), rest.begin(), 0.0);
  const std::size_t fitted = fit.columns + columns;
  return std::sqrt(squares / static_cast<double>(n > fitted ? n - fitted : 1)) / std::abs(fit.dc);
}

Result<void> is_modulated(const PulseFit& fit) {
  if (!(fit.dc > 10.0 * fit.dc_u)) return problem("pulses_too_dark");
  if (!(fit.ac > 3.0 * fit.ac_u) || !(fit.ac > 1e-9 * fit.dc)) return problem("pulses_no_modulation");
  return {};
}

Result<Ratio> ratio_of(const PerBand<PulseFit>& fits) {
  for (const PulseFit* fit : {&fits.red, &fits.infrared})
    if (const auto modulated = is_modulated(*fit); !modulated) return modulated.error();
  const double red = fits.red.modulation_u / fits.red.modulation;
  const double infrared = fits.infrared.modulation_u / fits.infrared.modulation;
  const double alike = shared_noise(fits.red, fits.infrared) * std::cos(fits.red.phase_rad - fits.infrared.phase_rad);
  const double value = fits.red.modulation / fits.infrared.modulation;
  const double variance = red * red + infrared * infrared - 2.0 * alike * red * infrared;
  return Ratio{value, value * std::sqrt(std::max(0.0, variance))};
}

}  // namespace probewright::measure
