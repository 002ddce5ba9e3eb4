#include <gtest/gtest.h>

#include <chrono>
#include <cmath>
#include <complex>
#include <cstdio>
#include <numbers>
#include <vector>

#include "drivers/emulated/front_end.h"
#include "drivers/emulated/lamp.h"
#include "drivers/emulated/nest.h"
#include "drivers/emulated/spectrometer.h"

namespace probewright::emulated {
namespace {

using Spec = Spectrometer;

double certificate_nm(double pixel) {
  return 600.0 + 0.4402 * pixel - 2.0e-7 * pixel * pixel - 1.0e-10 * pixel * pixel * pixel;
}

double sd_over_pixels(const Spectrum& a, const Spectrum& b) {
  double sum = 0.0;
  for (std::size_t i = 0; i < pixel_count; ++i) {
    const double difference = static_cast<double>(a.counts[i]) - b.counts[i];
    sum += difference * difference / (2.0 * pixel_count);
  }
  return std::sqrt(sum);
}

TEST(SpectrometerPhysics, DarkFramesHaveReadNoiseAroundTheOffset) {
  const Spec spectrometer({}, 1);
  Deviates noise(2);
  const Spectrum first = spectrometer.expose({}, 0.0, 0.001, 1, noise);
  const Spectrum second = spectrometer.expose({}, 0.0, 0.001, 1, noise);
  double mean = 0.0;
  for (const auto counts : first.counts) mean += counts / static_cast<double>(pixel_count);
  EXPECT_NEAR(mean, 1000.0, 2.0);
  const double read_counts = Spec::read_noise_e / Spec::electrons_per_count;  // 9.68
  EXPECT_NEAR(sd_over_pixels(first, second), read_counts, 0.08 * read_counts);
  const Spectrum third = spectrometer.expose({}, 0.0, 0.001, 16, noise);
  const Spectrum fourth = spectrometer.expose({}, 0.0, 0.001, 16, noise);
  EXPECT_NEAR(sd_over_pixels(third, fourth), read_counts / 4.0, 0.08 * read_counts / 4.0);
}

TEST(SpectrometerPhysics, LightHasShotNoise) {
  const Spec spectrometer({}, 1);
  Deviates noise(2);
  const double electrons = 40e3;
  const Spectrum first = spectrometer.expose({}, electrons / 0.02, 0.02, 1, noise);
  const Spectrum second = spectrometer.expose({}, electrons / 0.02, 0.02, 1, noise);
  const double expected = std::sqrt(electrons + 225.0) / Spec::electrons_per_count;
  EXPECT_NEAR(sd_over_pixels(first, second), expected, 0.08 * expected);
  EXPECT_NEAR(first.counts[500], 1000.0 + electrons / Spec::electrons_per_count, 5.0 * expected + 30.0);
}

TEST(SpectrometerPhysics, FullPixelsAreClippedAndTold) {
  const Spec spectrometer({}, 1);
  Deviates noise(2);
  const Spectrum full = spectrometer.expose({{{660.0, 19.0, 0.0}, 4.0}}, 0.0, 0.02, 4, noise);
  EXPECT_TRUE(full.full);
  EXPECT_EQ(*std::max_element(full.counts.begin(), full.counts.end()), 65535);
  const Spectrum fine = spectrometer.expose({{{660.0, 19.0, 0.0}, 1.0}}, 0.0, 0.02, 4, noise);
  EXPECT_FALSE(fine.full);
}

/// Centroid and second moment of what stands above the dark level near a wavelength, by the certificate.
struct Moments {
  double centroid_nm = 0.0, fwhm_nm = 0.0;
};
Moments moments_near(const Spectrum& light, const Spectrum& dark, double wavelength, double reach) {
  double area = 0.0, first = 0.0, second = 0.0;
  for (std::size_t i = 0; i < pixel_count; ++i) {
    const double x = certificate_nm(static_cast<double>(i));
    if (std::abs(x - wavelength) > reach) continue;
    const double signal =
        (static_cast<double>(light.counts[i]) - dark.counts[i]) / spectrometer_certificate::response(x);
    area += signal;
    first += signal * x;
    second += signal * x * x;
  }
  const double mean = first / area;
  return {mean, std::sqrt(8.0 * std::numbers::ln2 * (second / area - mean * mean))};
}

TEST(SpectrometerPhysics, NarrowLinesStandAtTheirPlaceAsWideAsTheSlit) {
  const Spec spectrometer({}, 1);
  Deviates noise(2);
  for (const double wavelength : {640.0, 800.0, 1000.0}) {
    const Spectrum light = spectrometer.expose({{{wavelength, 0.5, 0.0}, 0.1}}, 0.0, 0.02, 64, noise);
    const Spectrum dark = spectrometer.expose({}, 0.0, 0.02, 64, noise);
    const Moments moments = moments_near(light, dark, wavelength, 5.0);
    EXPECT_NEAR(moments.centroid_nm, wavelength, 0.01);
    EXPECT_NEAR(moments.fwhm_nm, std::hypot(2.5, 0.5), 0.06) << wavelength;
  }
}

TEST(SpectrometerPhysics, NominalPeaksStandWhereTheyShould) {
  const Spec spectrometer({}, 1);
  Deviates noise(2);
  const Spectrum both =
      spectrometer.expose({{{661.5, 19.0, -0.15}, 1.0}, {{942.8, 46.0, -0.10}, 2.5}}, 0.0, 0.02, 4, noise);
  const auto peak = [&](std::size_t from, std::size_t to) {
    return (*std::max_element(both.counts.begin() + static_cast<long>(from),
                              both.counts.begin() + static_cast<long>(to)) -
            1000.0) /
           64535.0;
  };
  EXPECT_NEAR(peak(0, 400), 0.45, 0.02);
  EXPECT_NEAR(peak(500, 1024), 0.35, 0.02);
}

TEST(SpectrometerPhysics, StationErrorsMoveTheScale) {
  StationErrors errors;
  errors.wavelength_offset_nm = 0.2;
  const Spec spectrometer(errors, 1);
  Deviates noise(2);
  const Spectrum light = spectrometer.expose({{{800.0, 0.5, 0.0}, 0.1}}, 0.0, 0.02, 64, noise);
  const Spectrum dark = spectrometer.expose({}, 0.0, 0.02, 64, noise);
  EXPECT_NEAR(moments_near(light, dark, 800.0, 5.0).centroid_nm, 799.8, 0.01);
}

/// Amplitude of one frequency over whole periods.
std::complex<double> part(const std::vector<double>& values, double turns_per_value) {
  std::complex<double> sum = 0.0;
  for (std::size_t i = 0; i < values.size(); ++i) {
    const double angle = 2.0 * std::numbers::pi * turns_per_value * static_cast<double>(i);
    sum += values[i] * std::complex<double>(std::cos(angle), std::sin(angle));
  }
  return 2.0 * sum / static_cast<double>(values.size());
}

TEST(ModulatorPhysics, ReachesItsDepthsWithSmallHarmonics) {
  Modulator modulator(0.3);
  modulator.change(1.0, {0.016, 0.010}, 5.0);
  std::vector<double> red, infrared;
  for (int i = 0; i < 1000; ++i) {
    const auto bands = modulator.at(1.0 + Modulator::settling_s + 0.001 * i);
    red.push_back(bands.red);
    infrared.push_back(bands.infrared);
  }
  EXPECT_NEAR(std::abs(part(red, 0.005)), 0.016, 3e-6);
  EXPECT_NEAR(std::abs(part(infrared, 0.005)), 0.010, 3e-6);
  EXPECT_NEAR(std::abs(part(red, 0.010)) / 0.016, Modulator::second_harmonic, 1e-4);
  EXPECT_NEAR(std::abs(part(red, 0.015)) / 0.016, Modulator::third_harmonic, 1e-4);
}

TEST(ModulatorPhysics, ChangesWithoutAJump) {
  Modulator modulator(0.1);
  modulator.change(0.0, {0.05, 0.05}, 5.0);
  const double before = modulator.at(0.7123 - 1e-7).red;
  modulator.change(0.7123, {0.0, 0.01}, 2.0);
  EXPECT_NEAR(modulator.at(0.7123).red, before, 1e-6);
  EXPECT_NEAR(modulator.at(0.7123 + 0.150).red, 1.0, 0.05 * 1e-4);
  EXPECT_NEAR(modulator.at(0.7123 - 1e-7).red, before, 1e-15);  // the past stays as it was
}

TEST(LampPhysics, Flickers) {
  EXPECT_EQ(lamp_light({false, 1.0, 100.0}, 0.1, 0.0), 0.0);
  EXPECT_EQ(lamp_light({true, 0.4, 0.0}, 0.1, 0.0), 0.4);
  double low = 1.0, high = 0.0;
  for (int i = 0; i < 1000; ++i) {
    const double light = lamp_light({true, 0.5, 120.0}, i * 1e-5, 0.2);
    low = std::min(low, light);
    high = std::max(high, light);
  }
  EXPECT_NEAR(low, 0.35, 1e-3);
  EXPECT_NEAR(high, 0.65, 1e-3);
}

TEST(FrontEndPhysics, SlotsHaveTheirNoiseAndScale) {
  FrontEnd front_end({}, 5);
  double mean = 0.0, square = 0.0, bright = 0.0;
  constexpr int count = 20000;
  for (int i = 0; i < count; ++i) {
    const double nA = front_end.code(0.0, 0.0, 0.0, 439e-6) * adapter_certificate::nA_per_code;
    mean += nA / count;
    square += nA * nA / count;
    bright += front_end.code(2000.0, 0.0, 2000.0, 439e-6) * adapter_certificate::nA_per_code / count;
  }
  EXPECT_NEAR(std::sqrt(square - mean * mean), 0.09, 0.002);
  EXPECT_NEAR(bright - mean, 2000.0, 0.01);
  EXPECT_EQ(front_end.code(20000.0, 0.0, 20000.0, 439e-6), 8388607);
  EXPECT_EQ(front_end.code(-20000.0, 0.0, -20000.0, 439e-6), -8388608);
}

TEST(FrontEndPhysics, SettlesWithinTheSlotButForAResidue) {
  FrontEnd front_end({}, 5);
  double dark = 0.0, after_light = 0.0;
  constexpr int count = 20000;
  for (int i = 0; i < count; ++i) {
    dark += front_end.code(0.0, 0.0, 0.0, 439e-6) * adapter_certificate::nA_per_code / count;
    after_light += front_end.code(0.0, 0.0, 3000.0, 439e-6) * adapter_certificate::nA_per_code / count;
  }
  EXPECT_NEAR(after_light - dark, 0.3, 0.01);
}

Nest::Setup perfect_nest() { return {.number = 1, .seed = 11, .perfect = true}; }

TEST(NestPhysics, PhotocurrentsAreAboutTwoAndThreeMicroampere) {
  Nest nest(perfect_nest());
  nest.seat(0.0, draw_probe(11, "AQ20-048-00001", "AQ-20"));
  nest.drive(0.0, 20.0, 20.0);
  EXPECT_NEAR(nest.photocurrent(Slot::red, 5.0).light_nA, 2000.0, 600.0);
  EXPECT_NEAR(nest.photocurrent(Slot::infrared, 5.0).light_nA, 3000.0, 900.0);
  EXPECT_NEAR(nest.photocurrent(Slot::dark, 5.0).background_nA, 0.8, 1.5);
  EXPECT_EQ(nest.photocurrent(Slot::dark, 5.0).light_nA, 0.0);
  nest.set_blade(6.0, true);
  EXPECT_LT(nest.photocurrent(Slot::red, 6.1).light_nA, 10.0);
  EXPECT_GT(nest.photocurrent(Slot::red, 5.9).light_nA, 1000.0);  // the past stays as it was
  nest.remove(7.0);
  EXPECT_EQ(nest.photocurrent(Slot::red, 7.1).total_nA(), 0.0);
}

TEST(NestPhysics, LidLetsRoomLightIn) {
  Nest nest(perfect_nest());
  nest.seat(0.0, draw_probe(11, "AQ20-048-00001", "AQ-20"));
  const double closed = nest.dark_nA(5.0, 1.0, 0.1);
  nest.set_lid(2.0, true);
  EXPECT_GT(nest.dark_nA(5.0, 2.0, 0.1), closed + 100.0);
}

TEST(NestPhysics, WarmsUpAndDroops) {
  Nest nest(perfect_nest());
  Probe probe = draw_probe(11, "AQ20-048-00001", "AQ-20");
  const double rise = probe.red.heating.standard_rise_K();
  nest.seat(0.0, std::move(probe));
  nest.drive(1.0, 20.0, 20.0);
  const double early = nest.photocurrent(Slot::red, 1.005).light_nA, warm = nest.photocurrent(Slot::red, 20.0).light_nA;
  EXPECT_NEAR(warm / early - 1.0, -0.028, 0.008);
  EXPECT_NEAR(nest.leds().at(20.0).red.total_K(), rise, 1e-6);
}

/// What a run asks of the physics: four spectra of four frames, dark captures, a capture of 352 cycles (0.6 s).
void whole_run(Nest& nest, FrontEnd& front_end, double start_s) {
  nest.drive(start_s, 20.0, 20.0);
  for (int i = 0; i < 4; ++i) nest.expose(start_s + 0.1 * i, 0.02, 4, i % 2 == 0, false);
  for (int i = 0; i < 2; ++i) front_end.mean_current(nest.dark_nA(5.0, start_s + 0.5, 0.1), 0.1);
  double before = 0.0;
  for (int slot = 0; slot < 4 * 352; ++slot) {
    const auto kind = slot % 2 == 1 ? Slot::dark : slot % 4 == 0 ? Slot::red : Slot::infrared;
    const auto current = nest.photocurrent(kind, start_s + 1.0 + slot * 439e-6);
    front_end.code(current.light_nA, current.background_nA, before, 439e-6);
    before = current.total_nA();
  }
  nest.drive(start_s + 2.0, 0.0, 0.0);
}

// No bound is set on the time: the machine may be busy. The release build is meant to stay below 3 ms.
TEST(NestPhysics, CostOfAWholeRun) {
  Nest nest(perfect_nest());
  FrontEnd front_end({}, 1);
  nest.seat(0.0, draw_probe(11, "AQ20-048-00001", "AQ-20"));
  constexpr int runs = 20;
  const auto begin = std::chrono::steady_clock::now();
  for (int i = 0; i < runs; ++i) whole_run(nest, front_end, 10.0 * i);
  const std::chrono::duration<double, std::milli> took = std::chrono::steady_clock::now() - begin;
  std::printf("[  figures ] physics of one run: %.3f ms\n", took.count() / runs);
  EXPECT_GT(nest.photocurrent(Slot::dark, 10.0 * runs).background_nA, 0.0);
}

}  // namespace
}  // namespace probewright::emulated
