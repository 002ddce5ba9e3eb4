#include "tests/faults/diagnosed.h"

#include <fstream>
#include <sstream>
#include <stdexcept>

namespace probewright::faults {

using limits::diagnosis::Diagnosis;

const limits::diagnosis::Rules& probe_rules() {
  static const auto rules = [] {
    const std::string name = PW_SOURCE_DIR "/configs/diagnosis/probes.yaml";
    std::ifstream file(name, std::ios::binary);
    std::ostringstream text;
    text << file.rdbuf();
    return limits::diagnosis::read_rules(text.str(), name).value();
  }();
  return rules;
}

Diagnosed DiagnosingStation::test(const std::vector<emulated::PlantedFault>& faults) {
  const std::string number = std::to_string(++made_);
  const std::string serial =
      model_.substr(0, 2) + model_.substr(3) + "-048-" + std::string(5 - number.size(), '0') + number;
  emulated::Probe probe = emulated::draw_probe(seed_, serial, model_);
  for (const emulated::PlantedFault& fault : faults) probe = with_fault(std::move(probe), fault, seed_);
  station_.bench().seat(1, std::move(probe)).value();  // from now on the serial is this probe
  station_.bench().remove(1).value();
  const trial::Told told = station_.test(serial);
  if (!told.outcome) throw std::runtime_error(serial + " was not tested");
  std::vector<limits::diagnosis::JudgedValue> readings;
  for (const sequence::JudgedReading& one : told.outcome->readings)
    readings.push_back({one.judgement, one.reading.value, one.reading.expanded_uncertainty.value_or(0.0)});
  const limits::Sheet& sheet = trial::demonstration().sheets.find(model_)->second.value;
  return {pattern_of(probe_rules(), sheet, readings), likely_causes(probe_rules(), sheet, readings),
          told.outcome->verdict};
}

std::string first_named(const Diagnosis& told) {
  if (const auto* first = told.first()) return first->slug;
  return told.answer == Diagnosis::Answer::nothing_wrong ? "(nothing wrong)" : "(none of known)";
}

std::vector<std::string> all_named(const Diagnosis& told) {
  std::vector<std::string> named;
  if (const auto* first = told.first()) named.push_back(first->slug);
  for (const auto& more : told.besides) named.push_back(more.slug);
  return named;
}

int Confusion::all() const {
  int sum = 0;
  for (const auto& [planted, names] : counts_)
    for (const auto& [name, count] : names) sum += count;
  return sum;
}

int Confusion::right() const {
  int sum = 0;
  for (const auto& [planted, names] : counts_)
    if (const auto found = names.find(planted); found != names.end()) sum += found->second;
  return sum;
}

int Confusion::count(const std::string& planted) const {
  int sum = 0;
  if (const auto found = counts_.find(planted); found != counts_.end())
    for (const auto& [name, times] : found->second) sum += times;
  return sum;
}

double Confusion::share(const std::string& planted) const {
  const auto& names = counts_.at(planted);
  const auto right = names.find(planted);
  return right == names.end() ? 0.0 : static_cast<double>(right->second) / count(planted);
}

std::string Confusion::table() const {
  std::string text;
  for (const auto& [planted, names] : counts_) {
    text += planted + " (" + std::to_string(count(planted)) + "):";
    for (const auto& [name, times] : names) text += " " + name + " " + std::to_string(times);
    text += "\n";
  }
  return text;
}

}  // namespace probewright::faults
