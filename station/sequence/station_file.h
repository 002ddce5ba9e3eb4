#pragma once
#include <string>
#include <string_view>
#include <vector>

#include "station/base/result.h"

namespace probewright::sequence {

/// One serial device of a nest: where it is plugged in, and the certificate that it must carry.
struct DevicePlace {
  std::string port;         ///< full path, or a name inside StationFile::ports_in
  std::string certificate;  ///< number of the certificate
};

struct NestPlace {
  int nest = 0;  ///< 1 to 16
  DevicePlace phantom, adapter;
};

/// What the station consists of. Read before the line starts; plain values, any thread.
struct StationFile {
  std::string station;
  std::string zone;  ///< the plant's time zone, a name of the tz database
  bool emulated = false;
  double speed = 1.0;  ///< of the emulated bench; 1 on real devices
  unsigned baud = 921600;
  std::string ports_in;          ///< "runtime", or a folder; only for names that are not full paths
  std::string ledger;            ///< "default", or a path
  std::vector<NestPlace> nests;  ///< by rising number
};

/// Reads a station file strictly; all faults at once. Beyond the YAML: station_nest_twice, station_port_twice,
/// station_no_nest, station_speed, station_baud, zone_unknown.
ResultOrFaults<StationFile> read_station_file(std::string_view text, std::string_view file);

/// Folder of the emulated bench's ports by default: $XDG_RUNTIME_DIR/probewright-bench, else a folder of this user in
/// the system's temporary folder.
std::string runtime_port_folder();
/// Full path of a device's port. `folder_instead` (of --ports) replaces StationFile::ports_in unless empty.
std::string port_path(const StationFile& station, const DevicePlace& place, std::string_view folder_instead);
/// Where the ledger stands: the station file's path, or $XDG_DATA_HOME/probewright/<station>/ledger.db.
std::string ledger_path(const StationFile& station);

}  // namespace probewright::sequence
