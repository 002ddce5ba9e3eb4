#pragma once
#include "station/trace/rederive.h"
#include "station/trace/stored_run.h"

namespace probewright::trace {

/// Compares a stored reading with the one that came out now; nothing where they are bitwise the same.
std::optional<ReadingDifference> difference_of(const db::ReadingRow& stored, const DerivedReading& derived);
/// Compares a whole run. `each` is called for every reading on either side, with its difference or nullptr.
RunAgreement agreement_of(
    const db::RunRecord& stored, const DerivedRun& derived,
    const std::function<void(const std::string& check, const std::string& unit, const ReadingDifference*)>& each);

}  // namespace probewright::trace
