#pragma once
#include <algorithm>
#include <cmath>
#include <map>
#include <string>
#include <string_view>

#include "drivers/emulated/truth.h"

// How far a station's readings are from what the emulated bench knows, check by check.
namespace probewright::faults {

/// The truth of a check of a demonstration model's probe, in the check's unit; not a number where the bench knows none.
double truth_of(const emulated::Truth& truth, std::string_view check);

/// Mean and standard deviation of errors.
class Moments {
 public:
  void add(double error) {
    sum_ += error;
    squares_ += error * error;
    ++count_;
  }
  int count() const { return count_; }
  double bias() const { return sum_ / count_; }
  double sd() const {
    return count_ < 2 ? 0.0 : std::sqrt(std::max(0.0, (squares_ - sum_ * sum_ / count_) / (count_ - 1)));
  }

 private:
  double sum_ = 0.0, squares_ = 0.0;
  int count_ = 0;
};

/// Errors of all readings, by check.
using Table = std::map<std::string, Moments>;
/// One line a check, in catalogue order: bias and sd in the check's unit.
std::string words_of(const Table& table);

}  // namespace probewright::faults
