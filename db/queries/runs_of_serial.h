#pragma once
#include <string_view>
#include <vector>

#include "db/queries/run_record.h"

namespace probewright::db {

/// Every run of a serial number, oldest first, with readings and the names of captures. Throws as run_record.
std::vector<RunRecord> runs_of_serial(Reader& reader, std::string_view serial);

}  // namespace probewright::db
