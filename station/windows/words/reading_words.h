#pragma once
#include <QString>
#include <optional>

#include "station/sequence/line_types.h"

namespace probewright::windows {

/// A unit as screens show it: "Ω", "µA", "points"; empty for plain numbers.
QString unit_words(const std::string& unit);
/// Digits so that the expanded uncertainty has two; a value and its limits are told alike.
QString number_words(double value, const std::optional<double>& expanded_uncertainty);
/// "7.4 nA", "yes", or why there is none: "no reading (clipped)".
QString value_words(const measure::Reading& reading);
/// "accepted up to 4.6 nA", "accepted from 655.3 to 664.7 nm"; empty without limits.
QString acceptance_words(const sequence::JudgedReading& judged);
/// "Dark current 7.4 nA, accepted up to 4.6 nA." For a judged reading that did not let the probe pass.
QString failing_words(const sequence::JudgedReading& judged);

}  // namespace probewright::windows
