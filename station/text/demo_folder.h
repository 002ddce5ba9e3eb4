#pragma once
#include <filesystem>
#include <string>

#include "station/base/result.h"
#include "station/base/times.h"
#include "station/sequence/station_file.h"
#include "station/text/demo.h"

namespace probewright::text {

/// Where everything of one demonstration stands: enough to trace, verify and report it later.
struct DemoFolder {
  std::filesystem::path path;
  std::string file(const char* name) const { return (path / name).string(); }
  std::string configs() const { return file("configs"); }
  std::string ports() const { return file("ports"); }
  std::string ledger() const { return file("ledger.db"); }
  std::string truth() const { return file("truth.json"); }
  std::string labels() const { return file("labels"); }
  std::string report() const { return file("shift-report.pdf"); }
};

/// Makes the folder: the configuration as it is used, with a station of the bench's nests, and the truth file. A folder
/// that already holds this very demonstration is taken up again.
/// Errors: demo_folder, demo_other_lot (it holds another one), all faults of the station file.
ResultOrFaults<DemoFolder> make_demo_folder(const DemoOptions& options, const DemoParts& parts, UtcTime now);

/// A station file that read_station_file reads as this.
std::string station_text(const sequence::StationFile& station);

}  // namespace probewright::text
