#include "station/trace/sensitivity.h"

namespace probewright::trace {

ChangeLine::ChangeLine(const std::vector<Change>& changes) : runs_(static_cast<int>(changes.size())) {
  if (changes.empty()) return;
  const double n = static_cast<double>(changes.size());
  for (const Change& each : changes) centre_ += each.value / n, offset_ += each.change / n;
  double squares = 0.0, products = 0.0;
  for (const Change& each : changes) {
    squares += (each.value - centre_) * (each.value - centre_);
    products += (each.value - centre_) * (each.change - offset_);
  }
  if (changes.size() >= 5 && squares > 0.0) slope_ = products / squares;
}

}  // namespace probewright::trace
