#include "tests/faults/measured.h"

#include "station/base/catalogue.h"
#include "station/base/numbers.h"

namespace probewright::faults {
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
