#pragma once
#include <functional>
#include <optional>
#include <string_view>

#include "db/queries/entry_range.h"
#include "db/reader.h"
#include "db/rows.h"

namespace probewright::db {

/// One judged reading with a number, as charts take it. Texts live for the call only.
struct ChartedReading {
  RunId run;
  std::string_view model, check, unit;
  std::optional<double> value, acceptance_lower, acceptance_upper, margin;
};

/// Every reading of the production runs whose closing entry lies in the range, if it was judged by numbers (it has an
/// acceptance limit), with or without a value: run by run in the order in which they ended, then in catalogue order. Of
/// one lot, or of all where `lot` is empty. Throws db::Error.
void production_readings_within(Reader& reader, EntryRange range, std::string_view lot,
                                const std::function<void(const ChartedReading&)>& take);

}  // namespace probewright::db
