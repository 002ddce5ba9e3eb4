#include "fake_line.h"

#include <algorithm>
#include <cmath>
#include <random>

#include "station/base/catalogue.h"

namespace probewright::windows {

using namespace sequence;

namespace {

/// A judged check of the demonstration sheet: acceptance limits, what is typical, spread, uncertainty; in its unit.
struct Rule {
  const char* check;
  std::optional<double> lower, upper;
  double typical, spread, uncertainty, guard;
  double expected_s;
};

// Limits of configs/sheets/aq-20.yaml, moved inwards by U; typical values and spreads are invented.
const std::vector<Rule>& rules() {
  static const std::vector<Rule> all = {
      {"id_deviation", -1.34, 1.34, 0.1, 0.3, 0.16, 0.16, 0.1},
      {"cable_noise", {}, 1.9e-4, 4.5e-5, 1e-5, 1e-5, 1e-5, 0.1},
      {"mains_pickup", {}, 1.9, 0.05, 0.1, 0.1, 0.1, 0.2},
      {"dark_current", {}, 4.6, 0.8, 0.3, 0.4, 0.4, 0.8},
      {"red_forward_voltage", 1.756, 2.194, 1.97, 0.04, 0.006, 0.006, 0.1},
      {"infrared_forward_voltage", 1.156, 1.444, 1.30, 0.03, 0.006, 0.006, 0.1},
      {"red_voltage_rise", 57.0, 148.0, 100.0, 12.0, 2.0, 2.0, 0.1},
      {"infrared_voltage_rise", 57.0, 148.0, 98.0, 12.0, 2.0, 2.0, 0.1},
      {"red_drive", 19.648, 20.352, 20.0, 0.08, 0.052, 0.052, 0.1},
      {"infrared_drive", 19.648, 20.352, 20.0, 0.08, 0.052, 0.052, 0.1},
      {"red_warmup", {}, 13.5, 7.9, 0.8, 0.5, 0.5, 0.2},
      {"ambient_uptake", {}, 116.0, 40.0, 8.0, 4.0, 4.0, 0.2},
      {"red_modulation_deviation", -2.2, 2.2, 0.0, 0.6, 0.8, 0.8, 0.3},
      {"infrared_modulation_deviation", -2.2, 2.2, 0.0, 0.6, 0.8, 0.8, 0.3},
      {"red_transfer", 69.0, 136.0, 100.0, 9.0, 4.0, 4.0, 0.1},
      {"infrared_transfer", 103.0, 204.0, 150.0, 12.0, 6.0, 6.0, 0.1},
      {"closed_path_light", {}, 0.95, 0.1, 0.05, 0.05, 0.05, 0.3},
      {"slot_crosstalk", {}, 0.18, 0.02, 0.01, 0.02, 0.02, 0.1},
      {"ratio_deviation_0p4", -1.6, 1.6, 0.0, 0.5, 0.8, 0.4, 0.7},
      {"ratio_deviation_1p0", -1.6, 1.6, 0.0, 0.5, 0.8, 0.4, 0.7},
      {"ratio_deviation_1p6", -1.6, 1.6, 0.0, 0.5, 0.8, 0.4, 0.7},
      {"red_centroid", 655.33, 664.67, 660.0, 1.6, 0.33, 0.33, 0.4},
      {"infrared_centroid", 932.93, 947.67, 940.0, 2.4, 0.63, 0.63, 0.4},
      {"red_width", 14.23, 23.77, 19.0, 1.4, 0.23, 0.23, 0.1},
      {"infrared_width", 37.56, 54.44, 46.0, 2.6, 0.56, 0.56, 0.1},
      {"secondary_emission", {}, 0.26, 0.02, 0.02, 0.05, 0.04, 0.1},
      {"saturation_error_90", -1.1, 1.1, 0.1, 0.25, 0.4, 0.4, 0.1},
      {"saturation_error_70", -2.0, 2.0, 0.2, 0.5, 0.8, 0.8, 0.1},
  };
  return all;
}

JudgedReading judged(const Rule& rule, double value) {
  JudgedReading one;
  one.reading.check = one.judgement.check = rule.check;
  one.reading.value = value;
  one.reading.expanded_uncertainty = rule.uncertainty;
  one.reading.unit = find_check(rule.check)->unit;
  one.judgement.use = limits::Use::judged;
  one.judgement.acceptance = {rule.lower, rule.upper};
  one.judgement.limits = {rule.lower ? std::optional{*rule.lower - rule.guard} : std::nullopt,
                          *rule.upper + rule.guard};
  const double half = rule.lower ? (*rule.upper - *rule.lower) / 2 : *rule.upper - rule.typical;
  const double up = (*rule.upper - value) / half;
  one.judgement.margin = rule.lower ? std::min(up, (value - *rule.lower) / half) : up;
  one.judgement.outcome = *one.judgement.margin >= 0 ? limits::Outcome::ok : limits::Outcome::not_ok;
  return one;
}

RailMark mark_of(const JudgedReading& one) {
  const auto& [lower, upper] = one.judgement.acceptance;
  RailMark mark;
  mark.check = one.reading.check;
  mark.one_sided = !lower;
  const double half = lower ? (*upper - *lower) / 2 : (*upper - *one.reading.value) / *one.judgement.margin;
  mark.position = lower ? (*one.reading.value - (*lower + *upper) / 2) / half : 1.0 - *one.judgement.margin;
  mark.guard = (*one.judgement.limits.upper - *upper) / half;
  mark.whisker = *one.reading.expanded_uncertainty / half;
  mark.margin = *one.judgement.margin;
  mark.ok = one.judgement.lets_pass();
  return mark;
}

std::vector<PassageStep> passage(double share) {
  std::vector<PassageStep> steps;
  double whole = 0.0, from = 0.0;
  for (const Rule& rule : rules()) whole += rule.expected_s;
  for (const Rule& rule : rules()) {
    const double to = from + rule.expected_s / whole;
    using State = PassageStep::State;
    steps.push_back({rule.check, rule.expected_s,
                     to <= share + 1e-9 ? State::done
                     : from < share     ? State::doing
                                        : State::ahead});
    from = to;
  }
  return steps;
}

std::shared_ptr<const NestPlots> plots(unsigned seed) {
  std::mt19937 noise{seed};
  std::normal_distribution<double> spread{0.0, 0.01};
  NestPlots made;
  const auto put = [](PlotLine& line, double x, double y) {
    line.x.push_back(static_cast<float>(x));
    line.y.push_back(static_cast<float>(y));
  };
  for (int i = 0; i < 240; ++i) {
    const double nm = 600.0 + i * 1.9;
    put(made.red_spectrum, nm, std::exp(-0.5 * std::pow((nm - 660) / 8.0, 2)) + spread(noise) * 0.3);
    put(made.infrared_spectrum, nm, std::exp(-0.5 * std::pow((nm - 940) / 19.5, 2)) + spread(noise) * 0.3);
    const double s = i / 120.0, wave = std::sin(6.283 * 1.5 * s) + 0.25 * std::sin(12.566 * 1.5 * s + 0.7);
    put(made.red_pulses, s, 0.02 * wave + spread(noise) * 0.05);
    put(made.infrared_pulses, s, 0.02 * wave + spread(noise) * 0.05);
  }
  return std::make_shared<const NestPlots>(std::move(made));
}

std::string serial_of(int number) {
  std::string digits = std::to_string(number);
  return "AQ20-048-" + std::string(5 - digits.size(), '0') + digits;
}

}  // namespace

RunOutcome some_outcome(int nest, const std::string& serial, double dark_nA, unsigned seed) {
  std::mt19937 random{seed};
  RunOutcome outcome;
  outcome.run = 400 + nest;
  outcome.nest = nest, outcome.serial = serial;
  outcome.purpose = Purpose::production;
  outcome.emulated = true;
  for (const Rule& rule : rules()) {
    std::normal_distribution<double> spread{rule.typical, rule.spread};
    const double most = *rule.upper, least = rule.lower.value_or(rule.typical - 2 * rule.spread);
    const double drawn = std::clamp(spread(random), least, most);
    const JudgedReading one = judged(rule, std::string_view{rule.check} == "dark_current" ? dark_nA : drawn);
    if (!one.judgement.lets_pass()) outcome.failing.push_back(rule.check);
    outcome.readings.push_back(one);
  }
  outcome.verdict = outcome.failing.empty() ? RunVerdict::pass : RunVerdict::fail;
  outcome.cause = outcome.failing.empty() ? "completed" : "limits";
  if (outcome.verdict == RunVerdict::fail)
    outcome.likely = {"detector_leaky", "leaky detector", "RW-10 exchange the detector",
                      "Leaky detector: dark current 1.1 times its tolerance. Rework: RW-10 exchange the detector.",
                      false};
  outcome.cycle = from_seconds(6.8);
  return outcome;
}

BerthView empty_berth(int nest) {
  BerthView berth;
  berth.nest.nest = nest;
  berth.nest.state = NestState::empty;
  berth.nest.words = "scan a probe";
  berth.passage = passage(0.0);
  return berth;
}

BerthView armed_berth(int nest, const std::string& serial, int left_s) {
  BerthView berth = empty_berth(nest);
  berth.nest.state = NestState::armed;
  berth.nest.serial = serial;
  berth.nest.words = "put probe " + serial + " into nest " + std::to_string(nest);
  berth.armed_left_s = left_s;
  return berth;
}

BerthView running_berth(int nest, const std::string& serial, double share, unsigned seed) {
  BerthView berth = ended_berth(some_outcome(nest, serial, 0.9, seed));
  berth.last.reset();
  berth.nest = {nest, NestState::running, "testing " + serial, serial, "pulses at ratio 1.0", 4, 6};
  berth.passage = passage(share);
  berth.progress = share;
  berth.marks.resize(static_cast<std::size_t>(share * static_cast<double>(berth.marks.size())));
  return berth;
}

BerthView ended_berth(const RunOutcome& outcome) {
  BerthView berth = empty_berth(outcome.nest);
  berth.nest.state = NestState::occupied;
  berth.nest.words = "take the probe out of nest " + std::to_string(outcome.nest);
  berth.passage = passage(1.0);
  berth.progress = 1.0;
  for (const JudgedReading& one : outcome.readings) berth.marks.push_back(mark_of(one));
  berth.plots = plots(static_cast<unsigned>(outcome.run));
  LastRun last;
  last.run = outcome.run, last.serial = outcome.serial, last.purpose = outcome.purpose, last.verdict = outcome.verdict;
  last.cause = outcome.cause, last.cause_words = outcome.cause_words;
  last.what_to_do = outcome.verdict == RunVerdict::pass ? "take the probe out and apply its label"
                    : outcome.verdict == RunVerdict::fail
                        ? "take the probe out and put it on the tray for RW-10 exchange the detector"
                        : "take the probe out; nothing was decided about it";
  if (outcome.verdict == RunVerdict::fail) last.likely_cause = "leaky detector";
  if (!outcome.failing.empty()) last.decided_by = outcome.failing.front();
  berth.last = last;
  return berth;
}

BerthView lost_berth(int nest) {
  BerthView berth = empty_berth(nest);
  const std::string device = "phantom of nest " + std::to_string(nest);
  berth.nest.state = NestState::not_ready;
  berth.trouble = Problem{"device_lost", device, {{"tries", "3"}, {"cause", "no answer in time"}}};
  berth.nest.words = berth.trouble->text();
  return berth;
}

Scene busy_scene(int nests) {
  Scene scene;
  LineView& view = scene.view;
  view.station = "Quay-1", view.zone = "Europe/Amsterdam", view.emulated = true, view.speed = 10.0;
  view.next_due = "PHC-2026-0101 on 2027-06-30";
  view.person = SignedIn{"Imre Vasko", "operator"};
  view.lot = OpenLotView{"AQ20-W48-07", "AQ-20", 4, 200, 136};
  view.tally = {
      136, 129, 131, 5, 2, 588.0, {{"saturation_error_70", 2}, {"dark_current", 2}, {"secondary_emission", 1}}};
  for (int nest = 1; nest <= nests; ++nest) {
    const std::string serial = serial_of(136 + nest);
    const unsigned seed = static_cast<unsigned>(nest);
    RunOutcome outcome = some_outcome(nest, serial, nest % 7 == 2 ? 5.1 : 1.1, seed);
    switch (nest % 7) {
      case 1:
      case 2:
        break;
      case 3:
        view.berths.push_back(running_berth(nest, serial, 0.62, seed));
        continue;
      case 4:
        view.berths.push_back(armed_berth(nest, serial, 14));
        continue;
      case 5:
        view.berths.push_back(empty_berth(nest));
        continue;
      case 6:
        view.berths.push_back(lost_berth(nest));
        continue;
      default:
        outcome.verdict = RunVerdict::void_run, outcome.cause = "device_reset";
        outcome.cause_words = "the device has started anew and lost its settings";
        outcome.failing.clear();
        outcome.readings.resize(9);
    }
    view.berths.push_back(ended_berth(outcome));
    scene.outcomes.push_back(outcome);
  }
  for (const BerthView& berth : view.berths)
    if (berth.trouble && !view.trouble) view.trouble = berth.trouble;
  return scene;
}

}  // namespace probewright::windows
