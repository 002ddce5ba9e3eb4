#pragma once

namespace probewright::emulated {

/// Spectral line of an LED: log-normal, value 1 at its peak.
///   S(l) = exp(-ln2 (ln(1 + 2 b (l - peak) / D) / b)^2) where the argument of ln is positive, else 0.
/// Source of the shape and its closed forms: Fraser and Suzuki, "Resolution of overlapping bands", Analytical Chemistry
/// 41 (1969) 37 (from memory); re-derived here by substitution, tests integrate numerically.
struct LineShape {
  double peak_nm = 0.0;
  double width_nm = 1.0;  ///< D: not quite the full width at half maximum, see fwhm_nm()
  double skew = 0.0;      ///< b: negative leans to short wavelengths; 0 is a Gaussian

  double at(double wavelength_nm) const;
  double centroid_nm() const;   ///< of the whole line
  double half_low_nm() const;   ///< half-power point below the peak
  double half_high_nm() const;  ///< half-power point above it
  double half_centre_nm() const { return 0.5 * (half_low_nm() + half_high_nm()); }
  double fwhm_nm() const;
  double area_nm() const;  ///< integral over all wavelengths
  /// Where the line falls to `level` (0 to 1) of its peak, below (side -1) or above (side +1) the peak.
  double edge_nm(double level, int side) const;
};

/// The line with this centroid and FWHM, in nm, and skew.
LineShape line_of(double centroid_nm, double fwhm_nm, double skew);

/// Centroid over the part of the line that is above `threshold` (0 to 1) of its peak and inside the window, in nm.
/// Simpson's rule on 1024 intervals.
double centroid_above_nm(const LineShape& line, double threshold, double window_low_nm, double window_high_nm);

}  // namespace probewright::emulated
