#pragma once
#include <string>
#include <string_view>
#include <vector>

#include "station/base/result.h"
#include "station/base/times.h"

namespace probewright {

/// A time zone of the plant: UTC stays in the ledger, screens and due days go by this. Read once from the system's tz
/// database (RFC 8536, version 2 or later data); C's own localtime knows only one zone per process.
class Zone {
 public:
  /// `name` as in the tz database, "Europe/Amsterdam". Errors: zone_unknown, zone_malformed.
  static Result<Zone> read(std::string_view name, std::string_view folder = "/usr/share/zoneinfo");
  /// UTC.
  Zone();

  /// Seconds to add to UTC at this moment. After the last change that the file lists its last offset stands; tables
  /// are written up to 2037.
  int offset_s(UtcTime time) const;
  /// The day at this moment in this zone, "2026-12-01"; days compare as text.
  std::string day(UtcTime time) const;
  /// "2026-12-01 06:36:12" in this zone.
  std::string local_text(UtcTime time) const;
  const std::string& name() const { return name_; }

 private:
  struct Change {
    std::int64_t at_s;
    int offset_s;
  };
  std::string name_ = "UTC";
  int before_s_ = 0;  ///< offset before the first change
  std::vector<Change> changes_;
};

}  // namespace probewright
