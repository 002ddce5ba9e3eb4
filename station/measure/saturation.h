#pragma once
#include <optional>
#include <span>
#include <string>
#include <vector>

#include "station/base/result.h"
#include "station/measure/bands.h"
#include "station/measure/certificate.h"
#include "station/measure/extinction.h"
#include "station/measure/spectrum.h"

namespace probewright::measure {

/// A monitor's curve: displayed saturation in % against R, falling all the way from `from_ratio` to `to_ratio`.
/// Either a polynomial in R or points with straight lines between them.
struct Curve {
  struct Point {
    double ratio = 0.0, saturation = 0.0;
    bool operator==(const Point&) const = default;
  };
  std::vector<double> coefficients;  ///< saturation = sum of c[k] R^k; empty: points
  std::vector<Point> points;         ///< rising ratio
  double from_ratio = 0.0, to_ratio = 0.0;

  /// Displayed saturation in %, or nothing beyond the curve's ends.
  std::optional<double> saturation_at(double ratio) const;
  /// The ratio at which the curve shows this saturation, by bisection, or nothing beyond the ends.
  std::optional<double> ratio_at(double saturation) const;
  /// Whether it falls all the way (looked at in 1000 places).
  bool falls() const;
  bool operator==(const Curve&) const = default;
};

/// Log-normal line: S = exp(-ln2 (ln(1 + 2 b (nm - peak)/D)/b)^2); b = 0 is a Gaussian.
struct LineShape {
  double width_nm = 0.0;  ///< D
  double skew = 0.0;      ///< b
  bool operator==(const LineShape&) const = default;
};

/// What the modelled saturation error of a model is computed with.
struct SaturationModel {
  Curve curve;
  std::string table;         ///< name of the haemoglobin table, "haemoglobin_prahl"
  std::string table_sha256;  ///< of its file, 64 hexadecimal digits; whoever attaches the table compares it
  PerBand<LineShape>
      shape;  ///< of the nominal lines, at 25 C, as the LED emits them; their centroids stand in the bins
  std::vector<ResponsePoint> responsivity;     ///< of the detector, relative; empty: the same everywhere
  std::optional<ExtinctionTable> haemoglobin;  ///< attached by the caller, see attach_haemoglobin
  bool operator==(const SaturationModel&) const = default;
};

/// A spectrum as weights for averages over extinctions: both extinctions and the weight at each sample.
struct Absorption {
  struct Sample {
    double weight = 0.0;    ///< of the integral, power times responsivity times nm
    double variance = 0.0;  ///< of that weight, from noise
    Extinction extinction;
  };
  std::vector<Sample> samples;

  /// Mean of S HbO2 + (1 - S) Hb, S as a part of 1.
  double mean(double part_oxygenated) const;
  /// Its standard uncertainty from noise.
  double mean_u(double part_oxygenated) const;
  double area() const;
  /// Appends another spectrum's samples, multiplied.
  void add(const Absorption& other, double times);
};

/// Integrates a spectrum from `from_nm` to `to_nm` by trapezoids. The extinction is that of wavelength - shift_nm; what
/// the table does not reach is left out.
Absorption absorption_of(const Spectrum& spectrum, double from_nm, double to_nm, double shift_nm,
                         const SaturationModel& model);

/// The nominal line of a bin as the station would see it: broadened by the spectrometer's slit, cut at `threshold` of
/// its peak, moved so that its centroid over that run is `centroid_nm`.
Absorption nominal_absorption(const LineShape& shape, double centroid_nm, double slit_nm, double threshold,
                              const SaturationModel& model);

/// Modelled saturation error in points at `saturation` (in %): f(f_inv(S) R_BL(S; measured)/R_BL(S; nominal)) - S with
/// R_BL = mean absorption of red over that of infrared (single-pulse Beer and Lambert) and f the curve: the nominal
/// probe is tied to the monitor's curve. Nothing when R leaves the curve.
/// Source of the curve 110 - 25 R: common practice. Source of extinctions: the table that the model names.
std::optional<double> saturation_error_of(const PerBand<Absorption>& measured, const PerBand<Absorption>& nominal,
                                          double saturation, const SaturationModel& model);
/// Its standard uncertainty from the noise of the measured spectra; nothing as above.
std::optional<double> saturation_error_noise(const PerBand<Absorption>& measured, const PerBand<Absorption>& nominal,
                                             double saturation, const SaturationModel& model);

}  // namespace probewright::measure
