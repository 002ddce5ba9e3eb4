#pragma once
#include <string>
#include <string_view>

#include "station/base/catalogue.h"
#include "station/base/result.h"

namespace probewright {

/// A number as a person wrote it: "655.0 nm", "10.2 kohm", "2 %", "1.0 points", "25 degC".
struct Quantity {
  double value = 0.0;
  std::string unit;  ///< as written; empty for a bare number
};

/// Reads one number and an optional unit. No locale, no hex, no nan or inf.
/// Errors: number_malformed, unit_unknown (names the nearest known unit), number_not_finite.
Result<Quantity> parse_quantity(std::string_view text, std::string_view where = {});

/// `quantity` in `unit` ("uA" to "mA", "kohm" to "ohm").
/// Errors: unit_mismatch when the two measure different things, unit_missing when it has none.
Result<double> in_unit(const Quantity& quantity, std::string_view unit, std::string_view where = {});

/// What a unit measures; Dimension::none for "1"; errors: unit_unknown.
Result<Dimension> dimension_of(std::string_view unit);

}  // namespace probewright
