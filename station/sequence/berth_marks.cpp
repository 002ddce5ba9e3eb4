#include "station/sequence/berth_marks.h"

#include <algorithm>
#include <cmath>

#include "station/base/catalogue.h"
#include "station/measure/pulses.h"

namespace probewright::sequence {
namespace {

using measure::Band;

constexpr std::size_t most_points = 200;
/// Device time of what the model does not tell: replies of the electrical checks, one spectrum with its dark frame.
constexpr double electrical_s = 0.3, spectrum_s = 0.35;
constexpr double settle_s = 0.2;  ///< of the modulator, before each pulse capture

/// In which part of the routine a check is made: the last of the captures that it needs decides.
enum Part { electrical, dark, pulses, closed_path, ambient, spectra, parts };
Part part_of(const Check& check) {
  if (check.needs & needs_spectra) return spectra;
  if (check.needs & needs_ambient) return ambient;
  if (check.needs & needs_closed_path) return closed_path;
  if (check.needs & needs_pulses) return pulses;
  if (check.needs & needs_dark) return dark;
  return electrical;
}

double device_time_s(Part part, const measure::Model& model) {
  switch (part) {
    case electrical:
      return model.warmup_s + electrical_s;
    case dark:
      return 2.0 * model.dark_time_s;
    case pulses:
      return static_cast<double>(model.needed_set_points().size()) * (settle_s + model.pulse_capture_s);
    case closed_path:
      return model.closed_path ? model.closed_path->capture_s : 0.0;
    case ambient:
      return model.ambient ? 2.0 * model.ambient->capture_s : 0.0;
    case spectra:
      return spectrum_s;
    case parts:
      break;
  }
  return 0.0;
}

RailMark mark_of(const JudgedReading& judged, const limits::CheckRule& rule) {
  const limits::Judgement& judgement = judged.judgement;
  RailMark mark;
  mark.check = judgement.check;
  mark.ok = judgement.lets_pass();
  const auto& [lower, upper] = judgement.acceptance;
  mark.one_sided = !(lower && upper);
  if (!judged.reading.value || !judgement.margin) {
    mark.unusable = true;
    return mark;
  }
  const double value = *judged.reading.value, u = judged.reading.expanded_uncertainty.value_or(0.0);
  mark.margin = *judgement.margin;
  double unit = 0.0, guard = 0.0;  // what 1 on the scale is
  if (!mark.one_sided) {
    unit = 0.5 * (*upper - *lower);
    guard =
        std::max(judgement.limits.upper.value_or(*upper) - *upper, *lower - judgement.limits.lower.value_or(*lower));
    mark.position = (value - *lower) / unit - 1.0;
  } else if (rule.typical) {
    const double limit = upper ? *upper : *lower;
    unit = std::abs(limit - *rule.typical);
    guard = std::abs((upper ? judgement.limits.upper : judgement.limits.lower).value_or(limit) - limit);
    mark.position = 1.0 - mark.margin;
  }
  if (!(unit > 0.0)) {
    mark.unusable = true;
    return mark;
  }
  mark.whisker = u / unit;
  mark.guard = guard / unit;
  return mark;
}

double polynomial(const std::vector<double>& coefficients, double x) {
  double value = 0.0;
  for (auto c = coefficients.rbegin(); c != coefficients.rend(); ++c) value = value * x + *c;
  return value;
}

/// Means of neighbouring points, so that at most `most_points` remain.
PlotLine decimated(const std::vector<double>& x, const std::vector<double>& y) {
  PlotLine line;
  const std::size_t step = std::max<std::size_t>(1, (x.size() + most_points - 1) / most_points);
  for (std::size_t i = 0; i < x.size(); i += step) {
    const std::size_t end = std::min(x.size(), i + step);
    double x_sum = 0.0, y_sum = 0.0;
    for (std::size_t k = i; k < end; ++k) x_sum += x[k], y_sum += y[k];
    line.x.push_back(static_cast<float>(x_sum / static_cast<double>(end - i)));
    line.y.push_back(static_cast<float>(y_sum / static_cast<double>(end - i)));
  }
  return line;
}

/// The window in which a line is looked for, nm.
constexpr double window_nm[2][2] = {{605.0, 785.0}, {800.0, 1045.0}};

PlotLine spectrum_line(const measure::SpectrumCapture& capture, const measure::PhantomCertificate& certificate) {
  const auto& window = window_nm[capture.band == Band::red ? 0 : 1];
  std::vector<double> nm, level;
  double peak = 0.0;
  for (std::size_t pixel = 0; pixel < capture.light.size(); ++pixel) {
    const double at = polynomial(certificate.wavelength_nm, static_cast<double>(pixel));
    if (at < window[0] || at > window[1]) continue;
    nm.push_back(at);
    level.push_back(static_cast<double>(capture.light[pixel]) - static_cast<double>(capture.dark[pixel]));
    peak = std::max(peak, level.back());
  }
  if (!(peak > 0.0)) return {};
  for (double& value : level) value /= peak;
  return decimated(nm, level);
}

PlotLine pulse_line(const measure::Train& train) {
  double mean = 0.0;
  for (const double level : train.level) mean += level / static_cast<double>(train.level.size());
  if (!(std::abs(mean) > 0.0)) return {};
  std::vector<double> relative;
  for (const double level : train.level) relative.push_back(level / mean - 1.0);
  return decimated(train.t_s, relative);
}

void add_pulses(NestPlots& plots, const measure::PulseCapture& capture) {
  const auto doubles = [](const std::vector<std::int32_t>& codes) {
    return std::vector<double>(codes.begin(), codes.end());
  };
  std::vector<double> start_s;
  for (std::size_t i = 0; i < capture.red.size(); ++i) start_s.push_back(static_cast<double>(i) * capture.cycle_s);
  const auto trains = measure::subtract_dark(doubles(capture.red), doubles(capture.dark_a), doubles(capture.infrared),
                                             doubles(capture.dark_b), start_s, capture.cycle_s);
  if (!trains) return;
  plots.red_pulses = pulse_line(trains->red);
  plots.infrared_pulses = pulse_line(trains->infrared);
}

}  // namespace

std::vector<PassageStep> passage_of(const measure::Model& model) {
  std::vector<std::string> by_part[parts];
  for (const std::string& slug : model.routine)
    if (const Check* check = find_check(slug)) by_part[part_of(*check)].push_back(slug);
  std::vector<PassageStep> passage;
  for (int part = 0; part < parts; ++part)
    for (const std::string& slug : by_part[part])
      passage.push_back({slug,
                         device_time_s(static_cast<Part>(part), model) / static_cast<double>(by_part[part].size()),
                         PassageStep::State::ahead});
  return passage;
}

double expected_s(std::span<const PassageStep> passage) {
  double sum = 0.0;
  for (const PassageStep& step : passage) sum += step.expected_s;
  return sum;
}

void mark_done(std::vector<PassageStep>& passage, std::span<const JudgedReading> readings) {
  for (PassageStep& step : passage) {
    const auto reading = std::find_if(readings.begin(), readings.end(),
                                      [&](const JudgedReading& judged) { return judged.reading.check == step.check; });
    if (reading == readings.end()) continue;
    step.state = reading->reading.value ? PassageStep::State::done : PassageStep::State::left_out;
  }
}

std::vector<RailMark> rail_marks(std::span<const JudgedReading> readings, const limits::Sheet& sheet) {
  std::vector<RailMark> marks;
  for (const JudgedReading& judged : readings) {
    const limits::CheckRule* rule = sheet.find(judged.judgement.check);
    if (rule && judged.judgement.judged() && !rule->must_be_yes) marks.push_back(mark_of(judged, *rule));
  }
  return marks;
}

std::shared_ptr<const NestPlots> plots_of(const measure::Captures& captures,
                                          const measure::PhantomCertificate& certificate) {
  if (captures.pulses.empty() && !captures.red_spectrum && !captures.infrared_spectrum) return nullptr;
  auto plots = std::make_shared<NestPlots>();
  if (captures.red_spectrum) plots->red_spectrum = spectrum_line(*captures.red_spectrum, certificate);
  if (captures.infrared_spectrum) plots->infrared_spectrum = spectrum_line(*captures.infrared_spectrum, certificate);
  if (!captures.pulses.empty()) add_pulses(*plots, captures.pulses.back());
  return plots;
}

std::string what_to_do(const RunOutcome& outcome) {
  switch (outcome.verdict) {
    case RunVerdict::pass:
      return outcome.purpose == Purpose::production ? "take the probe out and apply its label"
                                                    : "take the probe out; this run releases no label";
    case RunVerdict::fail:
      return outcome.likely.rework.empty() ? "take the probe out and put it on the tray for failed probes"
                                           : "take the probe out and put it on the tray for " + outcome.likely.rework;
    case RunVerdict::void_run:
      break;
  }
  return "take the probe out; nothing was decided about it";
}

std::string decided_by(std::span<const JudgedReading> readings) {
  const JudgedReading* nearest = nullptr;
  for (const JudgedReading& judged : readings) {
    if (!judged.judgement.judged() || !judged.judgement.margin) continue;
    if (!nearest || *judged.judgement.margin < *nearest->judgement.margin) nearest = &judged;
  }
  return nearest ? nearest->judgement.check : std::string{};
}

}  // namespace probewright::sequence
