#pragma once
#include <optional>
#include <string>
#include <vector>

#include "station/measure/model.h"

namespace probewright::measure {

/// One part of a reading's uncertainty, as it was in this run.
struct Component {
  std::string name;         ///< "noise", "temperature", "wavelength_scale" ...
  double standard_u = 0.0;  ///< in the unit of the reading
  Scope scope = Scope::per_probe;
  bool operator==(const Component&) const = default;
};

/// A value with unit and expanded uncertainty, or the reason why there is none.
struct Reading {
  std::string check;            ///< slug of the catalogue
  std::optional<double> value;  ///< in `unit`; yes/no: 1 or 0; finite, never -0.0
  std::string none_reason;      ///< set when there is no value: not_captured, blocked_by:<check>, clipped,
                                ///< too_dark, no_peak, cut_off, no_modulation,
                                ///< id_open, not_certified, not_a_number
  std::optional<double> expanded_uncertainty;  ///< k = 2, in `unit`; none for yes/no
  std::string unit;                            ///< as in the catalogue
  std::string definition;                      ///< method, parameters and version: "centroid;threshold=0.01;...;v1"
  bool cut_short = false;                      ///< from a capture that was ended early
  std::vector<Component> components;           ///< what the uncertainty is made of
  bool operator==(const Reading&) const = default;
};

}  // namespace probewright::measure
