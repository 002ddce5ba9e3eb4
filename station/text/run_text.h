#pragma once
#include <string>

#include "station/sequence/line_types.h"
#include "station/text/json_out.h"

namespace probewright::text {

/// A run's verdict and readings for people: what failed and by how much first, then all readings.
std::string run_text(const sequence::RunOutcome& outcome);
/// The same as JSON, the shape of FORMATS.md ("test").
Json run_json(const sequence::RunOutcome& outcome);

}  // namespace probewright::text
