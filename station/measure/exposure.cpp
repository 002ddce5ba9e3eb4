#include "station/measure/exposure.h"

#include <algorithm>
#include <cmath>

#include "station/measure/spectrum.h"

namespace probewright::measure {
namespace {

constexpr double most_of_full = 0.80;

double brightest_counts(const SpectrumCapture& capture) {
  return *std::max_element(capture.light.begin(), capture.light.end());
}

}  // namespace

ExposureAdvice advise_exposure(const SpectrumCapture& capture, const Model& model,
                               const PhantomCertificate& certificate) {
  const double full = certificate.saturation_counts, target = model.exposure_target * full;
  const double brightest = brightest_counts(capture), line = line_counts(capture, certificate);
  const bool clipped = capture.pixel_was_full || brightest >= clipped_from * full;
  ExposureAdvice advice;
  advice.usable = !clipped && line >= too_dark_below * full;
  advice.good = advice.usable && line >= 0.5 * target && line <= 1.5 * target;
  if (advice.good) return advice;
  const double wanted = std::min(target / std::max(1.0, line), most_of_full * full / std::max(1.0, brightest));
  const double factor = clipped ? 0.25 : std::min(100.0, wanted);
  const double next_s = std::clamp(capture.exposure_s * factor, model.exposure_min_s, model.exposure_max_s);
  // The device's steps are 1 us: a change of less than a fiftieth is none.
  if (std::abs(next_s / capture.exposure_s - 1.0) > 0.02) advice.next_s = std::round(next_s * 1e6) * 1e-6;
  return advice;
}

}  // namespace probewright::measure
