#pragma once
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "db/reader.h"
#include "db/rows.h"
#include "station/base/times.h"

namespace probewright::db {

/// Closed runs of a serial, of a lot, or all of them, by rising number. Throws db::Error.
std::vector<RunId> closed_runs(Reader& reader);
std::vector<RunId> closed_runs_of_serial(Reader& reader, std::string_view serial);
std::vector<RunId> closed_runs_of_lot(Reader& reader, std::string_view lot);

/// Passed runs that a device took part in, by rising number: those opened from `since` up to, but without, `until`.
/// device  the number of its certificate, its whole identity, or its serial alone (the identity's last word)
std::vector<RunId> passed_runs_with_device(Reader& reader, std::string_view device, UtcTime since,
                                           std::optional<UtcTime> until = {});
/// The newest closed runs of a model whose captures are all kept, newest first, at most `most`.
std::vector<RunId> newest_runs_with_captures(Reader& reader, std::string_view model, int most);

}  // namespace probewright::db
