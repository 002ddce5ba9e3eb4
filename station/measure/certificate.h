#pragma once
#include <string>
#include <string_view>
#include <vector>

#include "station/base/result.h"
#include "station/measure/bands.h"

namespace probewright::measure {

/// What every certificate states.
struct CertificateHead {
  std::string number;         ///< "PHC-2026-0101"; the device must report the same
  std::string device_serial;  ///< "PH-01"
  std::string due;            ///< last day of validity, "2027-06-30"
  std::string issued_by;
  bool operator==(const CertificateHead&) const = default;
};

struct ResponsePoint {
  double wavelength_nm = 0.0;
  double relative = 0.0;  ///< counts per unit of spectral power, relative
  bool operator==(const ResponsePoint&) const = default;
};

/// Modulation as calibrated at one set point of the phantom.
struct CalibratedSetPoint {
  double ratio_nominal = 0.0;  ///< names the set point
  PerBand<double> modulation;  ///< amplitude over mean, as calibrated
  double ratio = 0.0;          ///< R as calibrated (calibrated as such, not the quotient of the rounded depths)
  bool operator==(const CalibratedSetPoint&) const = default;
};

/// Calibrated values of one phantom.
struct PhantomCertificate {
  CertificateHead head;
  std::vector<double> wavelength_nm;    ///< polynomial: nm = sum c[k] * pixel^k, pixel from 0; 2 to 4 coefficients
  std::vector<ResponsePoint> response;  ///< rising wavelength, spans the spectrometer; linear between points
  double slit_nm = 0.0;                 ///< width (FWHM) of the spectrometer's own line
  double saturation_counts = 0.0;       ///< full scale
  double counts_per_electron = 0.0;     ///< for the noise of counts
  double read_noise_counts = 0.0;       ///< standard deviation of one frame's pixel in the dark
  double temperature_offset_K = 0.0;    ///< thermometer reading minus true temperature
  std::vector<CalibratedSetPoint> set_points;

  double true_temperature_C(double reading_C) const { return reading_C - temperature_offset_K; }
  const CalibratedSetPoint* set_point(double ratio_nominal) const;
  bool operator==(const PhantomCertificate&) const = default;
};

/// A resistor inside the adapter by which it proves itself.
struct ReferenceResistor {
  std::string name;
  double ohm = 0.0;  ///< calibrated
  bool operator==(const ReferenceResistor&) const = default;
};

/// Calibrated values of one adapter. A scale is true value over the value that the device tells.
struct AdapterCertificate {
  CertificateHead head;
  double nA_per_code = 0.0;         ///< photocurrent per converter code, slot samples
  double photocurrent_scale = 1.0;  ///< of currents told in amperes: dark current, mains pick-up
  double drive_scale = 1.0;         ///< LED current source and its read-back
  double voltage_scale = 1.0;       ///< forward voltages
  double resistance_scale = 1.0;    ///< ID resistance
  std::vector<ReferenceResistor> reference_resistors;
  bool operator==(const AdapterCertificate&) const = default;
};

/// The certificates of one nest's two devices.
struct Certificates {
  PhantomCertificate phantom;
  AdapterCertificate adapter;
  bool operator==(const Certificates&) const = default;
};

/// Reads a certificate from its YAML text (configs/certificates shows both forms). `file` names the text in faults.
/// Errors, all at once with line and column: what strict YAML tells, and
///   certificate_wrong_device     the other device's certificate
///   certificate_bad_date         due is not a day YYYY-MM-DD
///   certificate_out_of_range     a value that no such device can have
///   certificate_axis_not_rising  the polynomial falls somewhere on the 1024 pixels, or the table is not in rising
///   order certificate_response_short   the response table does not span the spectrometer certificate_ratio_differs R
///   as calibrated differs by more than 1 % from the quotient of the depths
ResultOrFaults<PhantomCertificate> read_phantom_certificate(std::string_view text, std::string_view file);
ResultOrFaults<AdapterCertificate> read_adapter_certificate(std::string_view text, std::string_view file);

}  // namespace probewright::measure
