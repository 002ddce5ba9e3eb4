#pragma once
#include <source_location>

/// Fails the test unless |actual - wanted| <= relative * |wanted|; prints both, the difference and the bound.
/// NaN on either side fails.
void expect_relative(double actual, double wanted, double relative,
                     std::source_location where = std::source_location::current());

/// The same with |actual - wanted| <= absolute.
void expect_within(double actual, double wanted, double absolute,
                   std::source_location where = std::source_location::current());
