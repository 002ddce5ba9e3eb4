#include <gtest/gtest.h>

#include <cmath>
#include <cstdio>
#include <numbers>
#include <vector>

#include "drivers/emulated/front_end.h"
#include "drivers/emulated/nest.h"
#include "drivers/emulated/spectrometer.h"

// How well the emulated devices repeat, against the figures of the design's prototype. The analysis here is plain and
// its own: nothing of the station's is in it.
namespace probewright::emulated {
namespace {

double sd_of(const std::vector<double>& values) {
  double mean = 0.0, square = 0.0;
  for (const double value : values) mean += value / static_cast<double>(values.size());
  for (const double value : values) square += (value - mean) * (value - mean);
  return std::sqrt(square / static_cast<double>(values.size() - 1));
}

struct Line {
  LineShape shape;
  double power_at_full_scale;  ///< puts the peak at full scale in 20 ms
  double from_nm, to_nm;       ///< where the clean line is above 1 % of its peak
};
const Line red_line{{661.5, 19.0, -0.15}, 1.0 / 0.45, 633.0, 685.0};
const Line infrared_line{{942.8, 46.0, -0.10}, 2.5 / 0.35, 875.0, 995.0};

/// Centroid by plain sums over the pixels inside the line.
double centroid_nm(const Spectrum& light, const Spectrum& dark, const Line& line) {
  double area = 0.0, moment = 0.0;
  for (std::size_t i = 0; i < pixel_count; ++i) {
    const auto pixel = static_cast<double>(i);
    const double wavelength = 600.0 + pixel * (0.4402 + pixel * (-2.0e-7 - 1.0e-10 * pixel));
    if (wavelength < line.from_nm || wavelength > line.to_nm) continue;
    const double signal =
        (static_cast<double>(light.counts[i]) - dark.counts[i]) / spectrometer_certificate::response(wavelength);
    area += signal;
    moment += signal * wavelength;
  }
  return moment / area;
}

double centroid_repeats_to_nm(const Line& line, double of_full_scale, int frames) {
  const Spectrometer spectrometer({}, 1);
  Deviates noise(4);
  std::vector<double> centroids;
  for (int i = 0; i < 300; ++i) {
    const std::vector<SpectralLine> light{{line.shape, of_full_scale * line.power_at_full_scale}};
    const Spectrum bright = spectrometer.expose(light, 0.0, 0.02, frames, noise);
    centroids.push_back(centroid_nm(bright, spectrometer.expose({}, 0.0, 0.02, frames, noise), line));
  }
  return sd_of(centroids);
}

// Source: the design: one 20 ms frame at 10 % of full scale repeats to 0.03 nm, four at 30 % to 0.007 nm. It does not
// say of which line; these are the infrared one's figures, whose light is spread over more pixels. The red one has
// half of them, as shot noise (width / sqrt(electrons): 0.012 nm at 10 %) and read noise (0.007 nm) add up to.
TEST(Repeatability, OfTheCentroidAsTheDesignSays) {
  const double red_one = centroid_repeats_to_nm(red_line, 0.10, 1),
               red_four = centroid_repeats_to_nm(red_line, 0.30, 4);
  const double one = centroid_repeats_to_nm(infrared_line, 0.10, 1),
               four = centroid_repeats_to_nm(infrared_line, 0.30, 4);
  std::printf("[  figures ] centroid, one frame at 10 %%: red %.4f, infrared %.4f nm\n", red_one, one);
  std::printf("[  figures ] centroid, four frames at 30 %%: red %.4f, infrared %.4f nm\n", red_four, four);
  EXPECT_NEAR(red_one, 0.014, 0.002);
  EXPECT_NEAR(one, 0.03, 0.01);
  EXPECT_NEAR(four, 0.007, 0.002);
}

/// Amplitude over mean at 5 Hz by projection on sine and cosine: the captures below hold whole periods.
double modulation_of(const std::vector<double>& values, double per_second) {
  double mean = 0.0, sine = 0.0, cosine = 0.0;
  const auto count = static_cast<double>(values.size());
  for (std::size_t i = 0; i < values.size(); ++i) {
    const double angle = 2.0 * std::numbers::pi * 5.0 * static_cast<double>(i) / per_second;
    mean += values[i] / count;
    sine += values[i] * std::sin(angle) * 2.0 / count;
    cosine += values[i] * std::cos(angle) * 2.0 / count;
  }
  return std::hypot(sine, cosine) / mean;
}

// Source: the design: R has an sd of 0.061 % / sqrt(T / s) at 1 % modulation, without window. Half of the variance
// comes from the converter's 0.09 nA, half from the drive's noise of 5e-5, which the design's figure implies.
TEST(Repeatability, OfTheRatioAsTheDesignSays) {
  Nest nest({.number = 1, .seed = 11, .perfect = true});
  FrontEnd front_end({}, 1);
  Probe probe = draw_probe(11, "AQ20-048-00001", "AQ-20");
  probe.red.transfer_nA_per_mA = 100.0;
  probe.infrared.transfer_nA_per_mA = 150.0;
  nest.seat(0.0, probe);
  nest.drive(0.0, 20.0, 20.0);
  nest.modulate(0.0, 2, {0.01, 0.01}, 5.0);
  constexpr int cycles = 569;  // one second but for 0.8 ms: five periods
  constexpr double slot_s = 1.0 / (4.0 * cycles);
  std::vector<double> ratios;
  for (int capture = 0; capture < 250; ++capture) {
    std::vector<double> red, infrared, slots;
    double before = 0.0;
    for (int slot = 0; slot < 4 * cycles + 2; ++slot) {
      const auto kind = slot % 2 == 1 ? Slot::dark : slot % 4 == 0 ? Slot::red : Slot::infrared;
      const auto current = nest.photocurrent(kind, 30.0 + 1.1 * capture + slot * slot_s);
      slots.push_back(front_end.code(current.light_nA, current.background_nA, before, slot_s));
      before = current.total_nA();
    }
    for (std::size_t i = 2; i + 1 < slots.size(); i += 2) {
      (i % 4 == 0 ? red : infrared).push_back(slots[i] - 0.5 * (slots[i - 1] + slots[i + 1]));
    }
    ratios.push_back(100.0 * modulation_of(red, cycles) / modulation_of(infrared, cycles));
  }
  const double sd = sd_of(ratios);
  std::printf("[  figures ] R at 1 %% modulation repeats to %.4f %% in 1 s\n", sd);
  EXPECT_NEAR(sd, 0.061, 0.012);
}

}  // namespace
}  // namespace probewright::emulated
