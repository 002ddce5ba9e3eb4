#include <gtest/gtest.h>

#include <cmath>
#include <cstdlib>
#include <iostream>
#include <map>

#include "drivers/emulated/deviates.h"
#include "station/base/catalogue.h"
#include "station/base/numbers.h"
#include "station/sequence/production/simulated_nest.h"
#include "station/sequence/production/simulation.h"
#include "station/sequence/production/true_values.h"
#include "tests/trial/trial.h"

// Whether the uncertainties that the station tells hold: healthy probes, each on a station of its own whose devices
// differ from their certificates, in rooms of 20 to 30 C. The error of each reading against the emulated bench's truth
// should be smaller than its U (k = 2) in about 95 of 100 cases. PROBEWRIGHT_COVERAGE_PROBES=N: as many as that.
namespace probewright {
namespace {

using namespace sequence::production;

constexpr int usual_probes = 1000;

int probes() {
  const char* wanted = std::getenv("PROBEWRIGHT_COVERAGE_PROBES");
  return wanted ? static_cast<int>(parse_integer(wanted).value()) : usual_probes;
}

/// Errors of one check's readings.
struct Errors {
  double sum = 0.0, squares = 0.0, expanded = 0.0;
  int n = 0, covered = 0, none = 0;

  void add(double error, double u) {
    sum += error, squares += error * error, expanded += u;
    ++n;
    covered += std::abs(error) <= u ? 1 : 0;
  }
  double bias() const { return sum / n; }
  double sd() const { return std::sqrt(std::max(0.0, (squares - sum * sum / n) / (n - 1))); }
  double rms() const { return std::sqrt(squares / n); }
  double mean_U() const { return expanded / n; }
  double coverage() const { return static_cast<double>(covered) / n; }
};

void take(std::map<std::string, Errors>& errors, const measure::Reading& reading, std::optional<double> truth) {
  if (!truth) return;
  Errors& of = errors[reading.check];
  if (!reading.value)
    ++of.none;
  else if (std::isfinite(*truth))
    of.add(*reading.value - *truth, reading.expanded_uncertainty.value_or(0.0));
}

std::string padded(std::string text, std::size_t width) {
  return text.size() < width ? std::string(width - text.size(), ' ') + text : text;
}

std::string significant(double value) {
  const double size = std::abs(value);
  if (size == 0.0) return "0";
  const int decimals = 2 - static_cast<int>(std::floor(std::log10(size)));
  return fixed(value, std::clamp(decimals, 0, 9));
}

/// One line for each check: bias, standard deviation, U, and how large the errors are in units of U / 2.
void print(const std::map<std::string, Errors>& errors, const limits::Sheet& sheet) {
  std::cout << padded("check", 30) << padded("bias", 12) << padded("sd", 12) << padded("mean U", 12)
            << padded("declared", 12) << padded("rms/(U/2)", 11) << padded("covered", 9) << "  judged\n";
  for (const Check& check : catalogue()) {
    const auto found = errors.find(std::string{check.slug});
    if (found == errors.end() || found->second.n == 0 || found->second.mean_U() == 0.0) continue;
    const Errors& of = found->second;
    const limits::CheckRule* rule = sheet.find(check.slug);
    std::cout << padded(std::string{check.slug}, 30) << padded(significant(of.bias()), 12)
              << padded(significant(of.sd()), 12) << padded(significant(of.mean_U()), 12)
              << padded(rule ? significant(rule->expanded_uncertainty) : "", 12)
              << padded(fixed(of.rms() / (0.5 * of.mean_U()), 2), 11) << padded(fixed(100.0 * of.coverage(), 1), 8)
              << "%  " << (rule && rule->use == limits::Use::judged ? "yes" : "no")
              << (of.none ? ", without a reading " + std::to_string(of.none) : "") << "\n";
  }
}

TEST(Coverage, UncertaintiesHoldOnFreshlyDrawnStations) {
  const sequence::Configuration& demo = trial::demonstration();
  const measure::Model& model = demo.models.at("AQ-20").value;
  const limits::Sheet& sheet = demo.sheets.at("AQ-20").value;
  const measure::Certificates certificates = simulated_certificates(demo).value();
  const TrueValues values{model};
  std::map<std::string, Errors> errors;
  for (int i = 0; i < probes(); ++i) {
    const std::uint64_t seed = derived_seed(20, static_cast<std::uint64_t>(i));
    emulated::Deviates room{derived_seed(seed, 1)};
    const SimulatedPlace place{model, certificates, seed, emulated::draw_station_errors(seed, 1),
                               20.0 + 10.0 * room.uniform()};
    const emulated::Probe probe = emulated::draw_probe(seed, "coverage", model.name);
    SimulatedNest nest{place};
    const auto readings = nest.test(probe);
    ASSERT_TRUE(readings) << readings.error().text();
    const emulated::Truth truth = emulated::truth_of(probe);
    for (const measure::Reading& reading : *readings)
      take(errors, reading, values.at_station(truth, reading.check, place.errors, place.room_degC));
  }
  print(errors, sheet);
  const double chance = 3.0 * std::sqrt(0.05 * 0.95 / probes());
  for (const auto& [check, of] : errors) {
    const limits::CheckRule* rule = sheet.find(check);
    if (rule == nullptr || rule->use != limits::Use::judged || rule->must_be_yes) continue;
    EXPECT_GE(of.coverage(), 0.93 - chance) << check;
    EXPECT_LE(of.coverage(), 0.97 + chance) << check;
    EXPECT_EQ(of.none, 0) << check;
  }
}

}  // namespace
}  // namespace probewright
