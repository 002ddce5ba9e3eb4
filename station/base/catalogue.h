#pragma once
#include <span>
#include <string_view>

namespace probewright {

/// What a check's unit measures; units of a sheet are checked against it.
enum class Dimension {
  yes_no,
  ratio,
  current,
  voltage,
  resistance,
  length,
  time,
  temperature,
  saturation,
  responsivity,
  none
};

/// What raw data a check is computed from, as flags.
enum Needs : unsigned {
  needs_electrical = 1,
  needs_spectra = 2,
  needs_pulses = 4,
  needs_closed_path = 8,
  needs_dark = 16,
  needs_ambient = 32,
  needs_coded_bin = 64
};

/// One named quantity with a unit. The slug is its identity in sheets, ledger and exports, for ever.
struct Check {
  std::string_view slug;      ///< "red_centroid"
  std::string_view shown_as;  ///< "red centroid wavelength"
  std::string_view unit;      ///< unit of readings in files: "nm", "mA", "%", "ohm", "1", "%SpO2" ...
  Dimension dimension;
  std::string_view of;  ///< for "%": of what ("certificate", "coded value" ...), else empty
  unsigned needs;       ///< Needs
};

/// Every check, in catalogue order (the order of readings in digests).
std::span<const Check> catalogue();
/// The check with this slug, or nullptr.
const Check* find_check(std::string_view slug);
/// Its place in catalogue order, or -1.
int check_index(std::string_view slug);

}  // namespace probewright
