#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <cstdlib>
#include <iostream>
#include <map>
#include <numeric>

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

/// Errors of one check's readings, and what their uncertainties are made of.
struct Errors {
  std::vector<double> errors;
  double expanded = 0.0;
  int covered = 0, none = 0;
  std::map<std::string, double> components;  ///< sums of squares

  void add(double error, const measure::Reading& reading) {
    const double u = reading.expanded_uncertainty.value_or(0.0);
    errors.push_back(error);
    expanded += u;
    covered += std::abs(error) <= u ? 1 : 0;
    for (const measure::Component& c : reading.components) components[c.name] += c.standard_u * c.standard_u;
  }
  double n() const { return static_cast<double>(errors.size()); }
  double bias() const { return std::accumulate(errors.begin(), errors.end(), 0.0) / n(); }
  double sd() const {
    double squares = 0.0;
    for (const double error : errors) squares += (error - bias()) * (error - bias());
    return std::sqrt(squares / (n() - 1.0));
  }
  /// What 95 of 100 errors stay within.
  double within_95() const {
    std::vector<double> sizes;
    for (const double error : errors) sizes.push_back(std::abs(error));
    std::sort(sizes.begin(), sizes.end());
    return sizes[static_cast<std::size_t>(0.95 * (n() - 1.0))];
  }
  double mean_U() const { return expanded / n(); }
  double coverage() const { return covered / n(); }
};

void take(std::map<std::string, Errors>& errors, const measure::Reading& reading, std::optional<double> truth) {
  if (!truth) return;
  Errors& of = errors[reading.check];
  if (!reading.value)
    ++of.none;
  else if (std::isfinite(*truth))
    of.add(*reading.value - *truth, reading);
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

std::vector<std::pair<std::string, const Errors*>> in_order(const std::map<std::string, Errors>& errors) {
  std::vector<std::pair<std::string, const Errors*>> all;
  for (const Check& check : catalogue()) {
    const auto found = errors.find(std::string{check.slug});
    if (found != errors.end() && !found->second.errors.empty() && found->second.mean_U() > 0.0)
      all.emplace_back(check.slug, &found->second);
  }
  return all;
}

/// One line for each check: what its errors are, what its U is, and how often that holds.
void print_errors(const std::map<std::string, Errors>& errors, const limits::Sheet& sheet) {
  std::cout << padded("check", 30) << padded("bias", 12) << padded("sd", 12) << padded("95 % within", 12)
            << padded("mean U", 12) << padded("declared U", 12) << padded("covered", 9) << "  judged\n";
  for (const auto& [check, of] : in_order(errors)) {
    const limits::CheckRule* rule = sheet.find(check);
    std::cout << padded(check, 30) << padded(significant(of->bias()), 12) << padded(significant(of->sd()), 12)
              << padded(significant(of->within_95()), 12) << padded(significant(of->mean_U()), 12)
              << padded(rule ? significant(rule->expanded_uncertainty) : "", 12)
              << padded(fixed(100.0 * of->coverage(), 1), 7) << " %  "
              << (rule && rule->use == limits::Use::judged ? "yes" : "no")
              << (of->none ? ", without a reading " + std::to_string(of->none) : "") << "\n";
  }
}

/// Standard uncertainties of the components, root mean square over the readings.
void print_components(const std::map<std::string, Errors>& errors) {
  for (const auto& [check, of] : in_order(errors)) {
    std::cout << padded(check, 30) << ":";
    for (const auto& [name, squares] : of->components)
      std::cout << " " << name << " " << significant(std::sqrt(squares / of->n()));
    std::cout << "\n";
  }
}

/// Errors of healthy probes, each on its own station.
std::map<std::string, Errors> errors_of(const measure::Model& model, const measure::Certificates& certificates) {
  const TrueValues values{model};
  std::map<std::string, Errors> errors;
  for (int i = 0; i < probes(); ++i) {
    const std::uint64_t seed = derived_seed(20, static_cast<std::uint64_t>(i));
    emulated::Deviates room{derived_seed(seed, 1)};
    const SimulatedPlace place{model, certificates, seed, emulated::draw_station_errors(seed, 1),
                               20.0 + 10.0 * room.uniform()};
    const emulated::Probe probe = emulated::draw_probe(seed, "coverage", model.name);
    SimulatedNest nest{place};
    const auto readings = nest.test(probe).value();
    const emulated::Truth truth = emulated::truth_of(probe);
    for (const measure::Reading& reading : readings)
      take(errors, reading, values.at_station(truth, reading.check, place.errors, place.room_degC));
  }
  return errors;
}

class Coverage : public testing::TestWithParam<const char*> {};

TEST_P(Coverage, UncertaintiesHoldOnFreshlyDrawnStations) {
  const sequence::Configuration& demo = trial::demonstration();
  const limits::Sheet& sheet = demo.sheets.at(GetParam()).value;
  const auto errors = errors_of(demo.models.at(GetParam()).value, simulated_certificates(demo).value());
  print_errors(errors, sheet);
  print_components(errors);
  const double chance = 3.0 * std::sqrt(0.05 * 0.95 / probes());
  for (const auto& [check, of] : errors) {
    const limits::CheckRule* rule = sheet.find(check);
    if (rule == nullptr || rule->use != limits::Use::judged || rule->must_be_yes) continue;
    EXPECT_GE(of.coverage(), 0.93 - chance) << check;
    EXPECT_LE(of.coverage(), 0.97 + chance) << check;
    EXPECT_LE(of.mean_U(), rule->expanded_uncertainty) << check;
    EXPECT_EQ(of.none, 0) << check;
  }
}

INSTANTIATE_TEST_SUITE_P(Models, Coverage, testing::Values("AQ-20", "AQ-35"));

}  // namespace
}  // namespace probewright
