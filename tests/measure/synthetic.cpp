#include "synthetic.h"

#include <algorithm>
#include <fstream>
#include <sstream>
#include <stdexcept>

namespace synthetic {
namespace {

double polynomial(const std::vector<double>& c, double x) {
  double sum = 0.0;
  for (std::size_t k = c.size(); k-- > 0;) sum = sum * x + c[k];
  return sum;
}

double response(const PhantomCertificate& certificate, double nm) {
  const auto& table = certificate.response;
  for (std::size_t i = 1; i < table.size(); ++i)
    if (nm <= table[i].wavelength_nm) {
      const double part = (nm - table[i - 1].wavelength_nm) / (table[i].wavelength_nm - table[i - 1].wavelength_nm);
      return table[i - 1].relative * (1.0 - part) + table[i].relative * part;
    }
  throw std::logic_error("wavelength beyond the response table");
}

/// Standard normal by Box and Muller (1958).
double normal_deviate(Entropy& entropy) {
  const auto uniform = [&] { return (static_cast<double>(entropy.next() >> 11) + 0.5) * 0x1p-53; };
  const double radius = std::sqrt(-2.0 * std::log(uniform()));
  return radius * std::cos(2.0 * std::numbers::pi * uniform());
}

std::uint16_t counts(double value) {
  return static_cast<std::uint16_t>(std::clamp(std::floor(value + 0.5), 0.0, 65535.0));
}

}  // namespace

std::string text_of(const std::string& path) {
  std::ifstream file{path, std::ios::binary};
  if (!file) throw std::runtime_error("cannot open " + path);
  std::ostringstream text;
  text << file.rdbuf();
  return text.str();
}

Model aq_20() { return read_model(text_of(source_path("configs/models/aq-20.yaml")), "aq-20.yaml").value(); }

Certificates certificates() {
  return {
      read_phantom_certificate(text_of(source_path("configs/certificates/phantoms/PH-01.yaml")), "PH-01.yaml").value(),
      read_adapter_certificate(text_of(source_path("configs/certificates/adapters/AD-01.yaml")), "AD-01.yaml").value()};
}

SpectrumCapture spectrum_capture(const Shape& shape, Band band, double level, int frames, std::uint64_t seed) {
  static const Certificates both = certificates();
  SeededEntropy entropy{seed};
  SpectrumCapture capture;
  capture.band = band, capture.frames = frames;
  capture.exposure_s = 0.02, capture.drive_mA = 20.0, capture.temperature_C = 25.0;
  std::array<double, spectrometer_pixels> light{};
  for (std::size_t i = 0; i < spectrometer_pixels; ++i) {
    const double nm = polynomial(both.phantom.wavelength_nm, static_cast<double>(i));
    light[i] = shape(nm) * response(both.phantom, nm);
  }
  const double scale = level * 65535.0 / *std::max_element(light.begin(), light.end());
  constexpr double electrons_per_count = 100e3 / 64535.0, read_noise = 15.0, offset = 1000.0;
  const auto noisy = [&](double signal) {
    if (seed == 0) return counts(offset + signal);
    const double sd =
        std::sqrt((signal * electrons_per_count + read_noise * read_noise) / frames) / electrons_per_count;
    return counts(offset + signal + sd * normal_deviate(entropy));
  };
  for (std::size_t i = 0; i < spectrometer_pixels; ++i) capture.light[i] = noisy(scale * light[i]);
  for (std::size_t i = 0; i < spectrometer_pixels; ++i) capture.dark[i] = noisy(0.0);
  return capture;
}

PulseCapture pulse_capture(const PulseSignal& signal, double nA_per_code, double set_point_ratio) {
  SeededEntropy entropy{signal.seed};
  PulseCapture capture;
  capture.set_point_ratio = set_point_ratio, capture.modulator_Hz = signal.rate_Hz, capture.cycle_s = signal.cycle_s;
  capture.drive_mA = {20.0, 20.0}, capture.temperature_C = 25.0;
  const double length_s = signal.cycles * signal.cycle_s;
  const auto code = [&](double nA) {
    const double noise = signal.noise_nA > 0.0 ? signal.noise_nA * normal_deviate(entropy) : 0.0;
    return static_cast<std::int32_t>(std::floor((nA + noise) / nA_per_code + 0.5));
  };
  const auto own = [&](Band band, double t) {
    const double angle = 2.0 * std::numbers::pi * signal.rate_Hz * t + signal.phase_rad;
    const double wave = std::sin(angle) + signal.second_harmonic * std::sin(2.0 * angle);
    const double drift = 1.0 + signal.drift * (t / length_s - 0.5) + signal.warming * std::exp(-t / signal.warming_s);
    const double secondary = band == Band::red ? signal.secondary : 0.0;
    const double depth = (1.0 - secondary) * signal.depth.of(band) + secondary * signal.depth.infrared;
    return signal.dc_nA.of(band) * drift * (1.0 + (1.0 - signal.around) * depth * wave);
  };
  const auto light = [&](Band band, double t) {
    const Band other = band == Band::red ? Band::infrared : Band::red;
    return own(band, t) + (signal.crosstalk == 0.0 ? 0.0 : signal.crosstalk * own(other, t));
  };
  for (int i = 0; i < signal.cycles; ++i) {
    const auto at = [&](int eighths) { return signal.cycle_s * (i + eighths / 8.0); };
    capture.red.push_back(code(light(Band::red, at(1)) + signal.ambient(at(1))));
    capture.dark_a.push_back(code(signal.ambient(at(3))));
    capture.infrared.push_back(code(light(Band::infrared, at(5)) + signal.ambient(at(5))));
    capture.dark_b.push_back(code(signal.ambient(at(7))));
  }
  return capture;
}

std::string all_checks_text() { return text_of(source_path("tests/measure/all-checks.yaml")); }

Model all_checks() {
  static const Model model = [] {
    Model read = read_model(all_checks_text(), "all-checks.yaml").value();
    const std::string file = "configs/tables/" + read.saturation->table + ".csv";
    if (!attach_haemoglobin(read, text_of(source_path(file)), file).empty()) throw std::runtime_error("bad table");
    return read;
  }();
  return model;
}

SaturationModel saturation_model(const std::string& table_text) {
  SaturationModel model = *all_checks().saturation;
  model.haemoglobin = read_extinction(table_text, "table.csv").value();
  return model;
}

AloneSlotsCapture alone_slots_capture(const PulseSignal& signal, Band lit, double nA_per_code) {
  PulseSignal alone = signal;
  alone.dc_nA = {0.0, 0.0}, alone.dc_nA.of(lit) = signal.dc_nA.of(lit);
  alone.depth = {0.0, 0.0}, alone.cycles = 64, alone.seed += lit == Band::red ? 200 : 300;
  const PulseCapture taken = pulse_capture(alone, nA_per_code);
  PerBand<double> drive_mA{0.0, 0.0};
  drive_mA.of(lit) = taken.drive_mA.of(lit);
  return {lit, taken.cycle_s, 0, taken.red, taken.dark_a, taken.infrared, taken.dark_b, drive_mA, taken.temperature_C};
}

ClosedPathCapture closed_path_capture(const PulseSignal& signal, double share, double nA_per_code) {
  PulseSignal closed = signal;
  closed.dc_nA = {signal.dc_nA.red * share, signal.dc_nA.infrared * share};
  closed.depth = {0.0, 0.0}, closed.cycles = 64, closed.seed += 100;
  const PulseCapture taken = pulse_capture(closed, nA_per_code);
  return {taken.cycle_s, 0, taken.red, taken.dark_a, taken.infrared, taken.dark_b, taken.drive_mA, taken.temperature_C};
}

AmbientCapture ambient_capture(double lamp_nA, double level, double flicker_Hz, double flicker, double noise_nA,
                               double nA_per_code) {
  PulseSignal dark;
  dark.dc_nA = {0.0, 0.0}, dark.depth = {0.0, 0.0}, dark.cycles = 64, dark.noise_nA = noise_nA, dark.seed = 77;
  constexpr double as_found_nA = 5.0;  // dark current and the amplifier's offset
  dark.ambient = [](double) { return as_found_nA; };
  const PulseCapture unlit = pulse_capture(dark, nA_per_code);
  dark.seed = 78;
  dark.ambient = [=](double t) {
    return as_found_nA + lamp_nA * level * (1.0 + flicker * std::sin(2.0 * std::numbers::pi * flicker_Hz * t + 0.3));
  };
  const PulseCapture lit = pulse_capture(dark, nA_per_code);
  return {level, flicker_Hz, dark.cycle_s, lit.dark_a, lit.dark_b, unlit.dark_a, unlit.dark_b, 25.0};
}

Captures complete(double temperature_C, std::uint64_t seed, PulseSignal signal) {
  static const Certificates both = certificates();
  Captures captures = healthy(temperature_C, seed);
  const double above = temperature_C - 25.0;
  ElectricalCapture& electrical = *captures.electrical;
  electrical.mains_pickup_nA = 0.4;
  electrical.led.red.at_quarter = ForwardVoltage{5.0, 5.0, electrical.led.red.at_drive->voltage_V - 0.095, false};
  electrical.led.infrared.at_quarter =
      ForwardVoltage{5.0, 5.0, electrical.led.infrared.at_drive->voltage_V - 0.085, false};
  for (const Band band : {Band::red, Band::infrared}) {
    LedElectrical& led = electrical.led.of(band);
    led.warm_voltage_V = led.at_drive->voltage_V, led.first_voltage_V = *led.warm_voltage_V + 0.0079;
    led.reverse_leakage_uA = 0.02;
  }
  const LogNormal warm_red{nominal_red.peak_nm + 0.14 * above, nominal_red.D_nm, nominal_red.b};
  captures.red_alone = RedAloneCapture{spectrum_capture(warm_red, Band::red, 0.5, 4, seed == 0 ? 0 : seed + 20)};
  captures.red_alone->spectrum.temperature_C = temperature_C;
  captures.pulses.clear();
  signal.dc_nA.red *= 1.0 - 0.007 * above, signal.dc_nA.infrared *= 1.0 - 0.005 * above;
  for (const SetPoint& point : all_checks().set_points) {
    signal.depth = point.depth, signal.seed = seed + 30 + captures.pulses.size();
    captures.pulses.push_back(pulse_capture(signal, both.adapter.nA_per_code, point.ratio));
    captures.pulses.back().temperature_C = temperature_C;
  }
  for (const Band lit : {Band::red, Band::infrared})
    captures.alone_slots.of(lit) = alone_slots_capture(signal, lit, both.adapter.nA_per_code);
  captures.closed_path = closed_path_capture(signal, 0.001, both.adapter.nA_per_code);
  captures.ambient = ambient_capture(60.0, 1.0, 100.0, 0.3, signal.noise_nA, both.adapter.nA_per_code);
  return captures;
}

Captures healthy(double temperature_C, std::uint64_t seed) {
  static const Certificates both = certificates();
  const double above = temperature_C - 25.0;
  ElectricalCapture electrical;
  electrical.present_phantom = electrical.present_adapter = true;
  electrical.id_resistance_ohm = 13700.0 * 1.002;
  electrical.led.red.at_drive = ForwardVoltage{20.0, 20.03, 1.95 - 0.002 * above, false};
  electrical.led.infrared.at_drive = ForwardVoltage{20.0, 19.98, 1.30 - 0.0015 * above, false};
  electrical.temperature_C = temperature_C;
  Captures captures;
  captures.electrical = electrical;
  captures.dark = DarkCapture{0.8 * std::exp2(above / 10.0) + 0.1, 0.1, 0.003, 0.003, 5.0, 0.1, temperature_C};
  const auto warm = [&](const LogNormal& line, double per_K) {
    return LogNormal{line.peak_nm + per_K * above, line.D_nm, line.b};
  };
  captures.red_spectrum = spectrum_capture(warm(nominal_red, 0.14), Band::red, 0.45, 4, seed);
  captures.infrared_spectrum = spectrum_capture(warm(nominal_infrared, 0.28), Band::infrared, 0.45, 4, seed + 1);
  captures.red_spectrum->temperature_C = captures.infrared_spectrum->temperature_C = temperature_C;
  PulseSignal signal;
  signal.noise_nA = 0.09, signal.seed = seed + 2;
  captures.pulses.push_back(pulse_capture(signal, both.adapter.nA_per_code));
  captures.pulses.back().temperature_C = temperature_C;
  return captures;
}

}  // namespace synthetic
