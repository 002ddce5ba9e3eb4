#include "station/measure/exposure.h"

#include <algorithm>
#include <cmath>

#include "station/measure/spectrum.h"

namespace probewright::measure {
namespace {

struct Brightest {
  double counts = 0.0;  ///< as sent
  double signal = 0.0;  ///< over the dark frame
};

Brightest brightest(const SpectrumCapture& capture) {
  Brightest most;
  for (std::size_t i = 0; i < spectrometer_pixels; ++i) {
    most.counts = std::max(most.counts, static_cast<double>(capture.light[i]));
    most.signal = std::max(most.signal, static_cast<double>(capture.light[i]) - static_cast<double>(capture.dark[i]));
  }
  return most;
}

}  // namespace

ExposureAdvice advise_exposure(const SpectrumCapture& capture, const Model& model,
                               const PhantomCertificate& certificate) {
  const double full = certificate.saturation_counts, target = model.exposure_target * full;
  const Brightest most = brightest(capture);
  const bool clipped = capture.pixel_was_full || most.counts >= clipped_from * full;
  ExposureAdvice advice;
  advice.usable = !clipped && most.signal >= too_dark_below * full;
  advice.good = advice.usable && most.signal >= 0.5 * target && most.signal <= 1.5 * target;
  if (advice.good) return advice;
  const double factor = clipped ? 0.25 : std::min(100.0, target / std::max(1.0, most.signal));
  const double next_s = std::clamp(capture.exposure_s * factor, model.exposure_min_s, model.exposure_max_s);
  // The device's steps are 1 us: a change of less than a fiftieth is none.
  if (std::abs(next_s / capture.exposure_s - 1.0) > 0.02) advice.next_s = std::round(next_s * 1e6) * 1e-6;
  return advice;
}

}  // namespace probewright::measure
