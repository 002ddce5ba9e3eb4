#pragma once
#include "db/reader.h"
#include "station/base/zone.h"
#include "station/text/choices.h"
#include "station/text/console.h"

namespace probewright::text {

/// The plant's time zone for what a ledger tells: that of the station file which the ledger itself holds, so that a
/// copy elsewhere is read by the plant's days; else that of the station chosen; else UTC, with a warning.
Zone plant_zone(db::Reader& reader, const StationChoice& choice, Console& console);

}  // namespace probewright::text
