#include <gtest/gtest.h>

#include <cmath>

#include "station/measure/exposure.h"
#include "station/measure/spectrum.h"
#include "synthetic.h"
#include "tests/support/expect.h"

using namespace synthetic;

namespace {

Result<Line> line_of(const SpectrumCapture& capture, const PhantomCertificate& certificate) {
  const auto spectrum = spectrum_of(capture, certificate);
  if (!spectrum) return spectrum.error();
  return find_line(*spectrum, {capture.band, standard_threshold, 0.0});
}

struct Spread {
  double mean = 0.0, sd = 0.0, told_u = 0.0;
};

template <class Take>
Spread spread_of(Band band, double level, int frames, int n, Take take) {
  const PhantomCertificate certificate = certificates().phantom;
  double sum = 0.0, squares = 0.0, told = 0.0;
  for (int i = 0; i < n; ++i) {
    const Line line =
        line_of(spectrum_capture(nominal(band), band, level, frames, 1000u + static_cast<unsigned>(i)), certificate)
            .value();
    const auto [value, u] = take(line);
    sum += value, squares += value * value, told += u;
  }
  return {sum / n, std::sqrt((squares - sum * sum / n) / (n - 1)), told / n};
}

}  // namespace

TEST(SpectrumCapture, NoiseFreeFramesGiveTheClosedForms) {
  const PhantomCertificate certificate = certificates().phantom;
  for (const Band band : {Band::red, Band::infrared}) {
    const Line line = line_of(spectrum_capture(nominal(band), band, 0.5, 1, 0), certificate).value();
    expect_within(line.centroid_nm, nominal(band).centroid_nm() + (band == Band::red ? 0.04 : 0.06), 0.01);
    expect_within(line.half_power_centre_nm, nominal(band).half_centre_nm(), 0.02);
    expect_within(line.width_nm, nominal(band).fwhm_nm(), 0.03);
    expect_within(line.peak_nm, nominal(band).peak_nm, 0.05);
  }
}

// The story: an uncorrected response slope of 0.5 % per nm moves the infrared centroid by about 2 nm and no other
// figure of the frame shows it.
TEST(SpectrumCapture, UncorrectedResponseMovesTheInfraredCentroid) {
  PhantomCertificate wrong = certificates().phantom;
  for (ResponsePoint& point : wrong.response) point.relative *= std::exp(0.005 * (point.wavelength_nm - 940.0));
  const SpectrumCapture capture = spectrum_capture(nominal_infrared, Band::infrared, 0.5, 1, 0);
  const double moved =
      line_of(capture, wrong).value().centroid_nm - line_of(capture, certificates().phantom).value().centroid_nm;
  expect_within(moved, -2.0, 0.2);
}

// Repeatability by Monte Carlo, and the uncertainty that the line tells of itself. Figures of the prototype: 0.03 nm
// for one frame at 10 % of full scale, 0.007 nm for four at 30 %.
TEST(SpectrumCapture, NoiseToldAgreesWithNoiseSeen) {
  const auto centroid = [](const Line& l) { return std::pair{l.centroid_nm, l.centroid_u}; };
  const auto centre = [](const Line& l) { return std::pair{l.half_power_centre_nm, l.half_power_centre_u}; };
  const auto width = [](const Line& l) { return std::pair{l.width_nm, l.width_u}; };
  const auto peak = [](const Line& l) { return std::pair{l.peak_nm, l.peak_u}; };
  for (const Band band : {Band::red, Band::infrared}) {
    for (const Spread s : {spread_of(band, 0.3, 4, 150, centroid), spread_of(band, 0.3, 4, 150, centre),
                           spread_of(band, 0.3, 4, 150, width), spread_of(band, 0.3, 4, 150, peak)}) {
      EXPECT_GT(s.told_u, 0.75 * s.sd) << "sd " << s.sd;
      EXPECT_LT(s.told_u, 1.6 * s.sd) << "sd " << s.sd;
    }
  }
  const Spread one = spread_of(Band::infrared, 0.11, 1, 150, centroid),
               four = spread_of(Band::infrared, 0.3, 4, 150, centroid);
  RecordProperty("centroid_sd_one_frame_at_11_percent_nm", std::to_string(one.sd));
  RecordProperty("centroid_sd_four_frames_at_30_percent_nm", std::to_string(four.sd));
  EXPECT_LT(one.sd, 0.06);
  EXPECT_LT(four.sd, 0.02);
}

TEST(SpectrumCapture, ClippedFramesAreRefused) {
  const PhantomCertificate certificate = certificates().phantom;
  const auto refusal = [&](const SpectrumCapture& c) {
    const auto spectrum = spectrum_of(c, certificate);
    return spectrum ? std::string{"taken"} : spectrum.error().id;
  };
  SpectrumCapture capture = spectrum_capture(nominal_red, Band::red, 0.5, 1, 0);
  EXPECT_EQ(refusal(capture), "taken");
  capture.pixel_was_full = true;  // one frame of an average was full; the mean does not show it
  EXPECT_EQ(refusal(capture), "spectrum_clipped");
  capture.pixel_was_full = false;
  capture.light[3] = 62259;  // 95 % of 65535 is 62258.25
  EXPECT_EQ(refusal(capture), "spectrum_clipped");
  capture.light[3] = 62258;
  EXPECT_EQ(refusal(capture), "taken");
  capture.dark[900] = 65000;  // a hot pixel in the dark frame
  EXPECT_EQ(refusal(capture), "spectrum_clipped");
}

// Why: a clipped line still has a fair centroid, but a width that is 1 to 3 nm too large.
TEST(SpectrumCapture, ClippingWouldWidenTheLineUnseen) {
  PhantomCertificate blind = certificates().phantom;
  const SpectrumCapture good = spectrum_capture(nominal_infrared, Band::infrared, 0.8, 1, 0);
  SpectrumCapture clipped = good;
  for (auto& counts : clipped.light) counts = std::min<std::uint16_t>(counts, 45000);
  const Line as_is = line_of(clipped, blind).value(), right = line_of(good, blind).value();
  EXPECT_GT(as_is.width_nm - right.width_nm, 1.0);
  EXPECT_LT(std::abs(as_is.centroid_nm - right.centroid_nm), 0.5);
}

TEST(SpectrumCapture, DarkFramesAreRefused) {
  const PhantomCertificate certificate = certificates().phantom;
  const auto dim = spectrum_of(spectrum_capture(nominal_red, Band::red, 0.099, 1, 0), certificate);
  ASSERT_FALSE(dim);
  EXPECT_EQ(dim.error().id, "spectrum_too_dark");
  EXPECT_TRUE(spectrum_of(spectrum_capture(nominal_red, Band::red, 0.101, 1, 0), certificate));
}

TEST(Exposure, IsAdvisedTowardsTheTarget) {
  const Model model = aq_20();
  const PhantomCertificate certificate = certificates().phantom;
  const auto advice = [&](double level) {
    return advise_exposure(spectrum_capture(nominal_red, Band::red, level, 1, 0), model, certificate);
  };
  EXPECT_TRUE(advice(0.45).good);
  EXPECT_FALSE(advice(0.45).next_s);
  const ExposureAdvice dim = advice(0.05);
  EXPECT_FALSE(dim.usable);
  expect_relative(dim.next_s.value(), 0.02 * 0.5 / 0.05, 0.01);
  const ExposureAdvice weak = advice(0.15);
  EXPECT_TRUE(weak.usable);
  EXPECT_FALSE(weak.good);
  EXPECT_GT(weak.next_s.value(), 0.02);
  const ExposureAdvice clipped = advice(1.5);
  EXPECT_FALSE(clipped.usable);
  expect_relative(clipped.next_s.value(), 0.005, 1e-9);
  // No light at all: as long as the model allows, and not for ever.
  SpectrumCapture nothing = spectrum_capture([](double) { return 1e-9; }, Band::red, 0.0, 1, 0);
  expect_relative(advise_exposure(nothing, model, certificate).next_s.value(), model.exposure_max_s, 1e-9);
  nothing.exposure_s = model.exposure_max_s;
  EXPECT_FALSE(advise_exposure(nothing, model, certificate).next_s);
}

namespace {
/// Both LEDs driven: the red line at the level, the infrared one at this part of it.
SpectrumCapture both_lines(Band band, double level, double infrared_part) {
  const auto shape = [=](double nm) { return nominal_red(nm) + infrared_part * 1.35 * nominal_infrared(nm); };
  return spectrum_capture(shape, band, level, 4, 0);  // 1.35 is about the red response over the infrared one
}
}  // namespace

// One pair of frames may serve both bands: each line is found in its own window, and neither bends the other.
TEST(SpectrumCapture, TwoLinesInOneFrameAreToldApart) {
  const PhantomCertificate certificate = certificates().phantom;
  for (const Band band : {Band::red, Band::infrared}) {
    const Line alone = line_of_capture(spectrum_capture(nominal(band), band, 0.4, 4, 0), certificate).value();
    const Line beside = line_of_capture(both_lines(band, 0.4, 0.8), certificate).value();
    expect_within(beside.centroid_nm, alone.centroid_nm, 0.01);
    expect_within(beside.width_nm, alone.width_nm, 0.03);
  }
}

// The weak line is the one that is too dark, not the frame.
TEST(SpectrumCapture, AWeakLineBesideABrightOneIsTooDark) {
  const PhantomCertificate certificate = certificates().phantom;
  EXPECT_EQ(line_of_capture(both_lines(Band::infrared, 0.8, 0.1), certificate).error().id, "spectrum_too_dark");
  EXPECT_TRUE(line_of_capture(both_lines(Band::red, 0.8, 0.1), certificate));
  EXPECT_EQ(line_of_capture(both_lines(Band::infrared, 0.8, 0.0), certificate).error().id, "spectrum_no_peak");
}

TEST(Exposure, LooksAtItsOwnLineAndSparesTheOther) {
  const Model model = aq_20();
  const PhantomCertificate certificate = certificates().phantom;
  EXPECT_TRUE(advise_exposure(both_lines(Band::red, 0.44, 0.3), model, certificate).good);
  const ExposureAdvice weak = advise_exposure(both_lines(Band::infrared, 0.44, 0.3), model, certificate);
  EXPECT_TRUE(weak.usable);
  EXPECT_FALSE(weak.good);
  // The target would ask for 3.8 times; the red line leaves 80 % over 44 % and the offset.
  expect_relative(weak.next_s.value(), 0.02 * 0.80 / (0.44 + 1000.0 / 65535.0), 0.02);
  const ExposureAdvice most = advise_exposure(both_lines(Band::infrared, 0.785, 0.3), model, certificate);
  EXPECT_TRUE(most.usable);
  EXPECT_FALSE(most.next_s);
}
