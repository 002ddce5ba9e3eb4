#pragma once
#include <optional>

#include "station/sequence/configuration.h"
#include "station/text/choices.h"

namespace probewright::text {

/// The configuration that the options name, read whole; `speed` replaces the station file's (emulated benches only).
/// Errors: all faults of the configuration's files, station_speed.
ResultOrFaults<sequence::Configuration> chosen_configuration(const StationChoice& choice,
                                                             std::optional<double> speed = std::nullopt);

}  // namespace probewright::text
