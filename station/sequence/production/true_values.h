#pragma once
#include <map>
#include <optional>
#include <string>
#include <string_view>

#include "drivers/emulated/station_errors.h"
#include "drivers/emulated/true_saturation.h"
#include "drivers/emulated/truth.h"
#include "station/measure/model.h"

namespace probewright::sequence::production {

/// True values of checks, from what the emulated bench knows of a probe; by no formula of the station's own evaluation.
/// Any number of threads may ask one object.
class TrueValues {
 public:
  explicit TrueValues(const measure::Model& model);

  /// In the unit of the catalogue, for a probe in its defined state (25 C, standard drive). Nothing when the bench
  /// knows no truth for the check; not a number when this probe has no such value any more (no light, no current).
  std::optional<double> of(const emulated::Truth& truth, std::string_view check) const;

  /// The same for a check whose measurand is of this station's own: what really flows, what is found at this
  /// temperature. Otherwise as above.
  std::optional<double> at_station(const emulated::Truth& truth, std::string_view check,
                                   const emulated::StationErrors& errors, double room_degC) const;

 private:
  std::optional<double> saturation_error(const emulated::Truth& truth, double saturation) const;
  std::optional<double> bin_mismatch(const emulated::Truth& truth) const;

  const measure::Model& model_;
  std::map<std::string, emulated::SaturationStandard, std::less<>> standards_;  ///< by the name of the bin
};

}  // namespace probewright::sequence::production
