#pragma once
#include <optional>
#include <string>

#include "limits/judge.h"
#include "limits/sheet.h"

namespace probewright::limits {

/// What became of a reading, in one sentence for people. Shown with enough digits that a value that lies outside a
/// limit never looks like the limit.
std::string sentence(const CheckRule& rule, const Judgement& judgement, std::optional<double> value,
                     double expanded_uncertainty);

}  // namespace probewright::limits
