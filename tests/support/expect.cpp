#include "tests/support/expect.h"

#include <gtest/gtest.h>

#include <cmath>
#include <cstdio>

namespace {

void compare(double actual, double wanted, double bound, const std::source_location& where) {
  if (std::abs(actual - wanted) <= bound) return;  // false for NaN
  char line[160];
  std::snprintf(line, sizeof line, "actual %.17g, wanted %.17g, difference %.3g, bound %.3g", actual, wanted,
                actual - wanted, bound);
  ADD_FAILURE_AT(where.file_name(), static_cast<int>(where.line())) << line;
}

}  // namespace

void expect_relative(double actual, double wanted, double relative, std::source_location where) {
  compare(actual, wanted, relative * std::abs(wanted), where);
}

void expect_within(double actual, double wanted, double absolute, std::source_location where) {
  compare(actual, wanted, absolute, where);
}
