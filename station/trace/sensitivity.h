#pragma once
#include <map>
#include <string>
#include <vector>

namespace probewright::trace {

/// How much a correction changes a reading, as it was found on runs that could be made again: change against value.
struct Change {
  double value = 0.0, change = 0.0;
};

/// Change of one check's readings as a straight line in the value: least squares from five runs on that do not all have
/// the same value, else the mean change.
class ChangeLine {
 public:
  ChangeLine() = default;
  explicit ChangeLine(const std::vector<Change>& changes);
  double at(double value) const { return offset_ + slope_ * (value - centre_); }
  int runs() const { return runs_; }

 private:
  double offset_ = 0.0, slope_ = 0.0, centre_ = 0.0;
  int runs_ = 0;
};

}  // namespace probewright::trace
