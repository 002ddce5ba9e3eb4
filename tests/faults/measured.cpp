#include "tests/faults/measured.h"

#include "station/base/catalogue.h"
#include "station/base/numbers.h"
#include "station/sequence/production/true_values.h"
#include "tests/trial/trial.h"

namespace probewright::faults {
double truth_of(const emulated::Truth& truth, std::string_view check) {
  using sequence::production::TrueValues;
  static const auto values = [] {
    std::map<std::string, TrueValues, std::less<>> by_model;
    for (const auto& [name, model] : trial::demonstration().models) by_model.try_emplace(name, model.value);
    return by_model;
  }();
  return values.at(truth.probe.model).of(truth, check).value_or(std::nan(""));
}

std::string words_of(const Table& table) {
  std::string words;
  for (const Check& check : catalogue()) {
    const auto found = table.find(std::string{check.slug});
    if (found == table.end()) continue;
    const Moments& m = found->second;
    words += std::string{check.slug} + ": bias " + fixed(m.bias(), 6) + ", sd " + fixed(m.sd(), 6) + " " +
             std::string{check.unit} + " (" + std::to_string(m.count()) + ")\n";
  }
  return words;
}

}  // namespace probewright::faults
