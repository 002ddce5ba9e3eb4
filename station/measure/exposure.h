#pragma once
#include <optional>

#include "station/measure/captures.h"
#include "station/measure/certificate.h"
#include "station/measure/model.h"

namespace probewright::measure {

/// What to do after a reading of the spectrometer.
struct ExposureAdvice {
  bool usable = false;           ///< neither clipped nor too dark: it may be evaluated
  bool good = false;             ///< peak between half and one and a half of the model's target: no need to try again
  std::optional<double> next_s;  ///< exposure for another try, within the model's range; none when that would not help
};

/// Looks at the light and dark frames of `capture`: the band's own line is brought to the target, as far as that leaves
/// the brightest pixel of the whole frame (the other LED's line, when both are driven) below 80 % of full scale. A
/// clipped frame does not tell by how much: the exposure is quartered.
ExposureAdvice advise_exposure(const SpectrumCapture& capture, const Model& model,
                               const PhantomCertificate& certificate);

}  // namespace probewright::measure
