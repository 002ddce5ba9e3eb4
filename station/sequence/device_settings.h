#pragma once
#include <string>

#include "drivers/adapter/driver.h"
#include "drivers/phantom/driver.h"
#include "station/measure/certificate.h"
#include "station/sequence/station_file.h"

namespace probewright::sequence {

/// "nest 3", as messages name it.
std::string nest_name(int nest);

/// What the drivers of a nest are told: names for messages, the line, and the device that the documents expect. The
/// adapter's ceiling is 0, so that no LED is driven, until a run sets its model's.
phantom::Settings phantom_settings(const measure::PhantomCertificate& certificate, const StationFile& station,
                                   int nest);
adapter::Settings adapter_settings(const measure::AdapterCertificate& certificate, const StationFile& station,
                                   int nest);

}  // namespace probewright::sequence
