#include <cmath>

#include "drivers/emulated/arguments.h"
#include "drivers/emulated/phantom_device.h"
#include "drivers/wire/block.h"
#include "drivers/wire/crc.h"
#include "drivers/wire/le.h"
#include "station/base/numbers.h"

// The commands of drivers/phantom/WIRE.md, sections 2.3 to 2.5.
namespace probewright::emulated {
namespace {

std::string list_text(std::span<const double> values) {
  std::string text;
  for (const double value : values) text += (text.empty() ? "" : ",") + shortest(value);
  return text;
}

}  // namespace

// --- 2.3 spectrometer

PhantomDevice::Outcome PhantomDevice::exposure(const wire::Unit& unit) {
  Arguments arguments{unit};
  const double exposure_s = arguments.number("S", 0.001, 2.0);
  if (const int fault = arguments.fault()) return {.fault = fault};
  settings_.exposure_s = std::round(exposure_s * 1e6) / 1e6;
  return {};
}

PhantomDevice::Outcome PhantomDevice::ask_exposure(const wire::Unit& unit) {
  return {.fault = no_parameters(unit), .answer = shortest(settings_.exposure_s)};
}

PhantomDevice::Outcome PhantomDevice::average(const wire::Unit& unit) {
  Arguments arguments{unit};
  const long frames = arguments.integer(1, 64);
  if (const int fault = arguments.fault()) return {.fault = fault};
  settings_.frames = static_cast<int>(frames);
  return {};
}

PhantomDevice::Outcome PhantomDevice::ask_average(const wire::Unit& unit) {
  return {.fault = no_parameters(unit), .answer = std::to_string(settings_.frames)};
}

PhantomDevice::Outcome PhantomDevice::shutter(const wire::Unit& unit) {
  Arguments arguments{unit};
  const bool open = arguments.word({"OPEN", "CLOSed"}) == 0;
  if (const int fault = arguments.fault()) return {.fault = fault};
  const bool moves = open != settings_.shutter_open;
  settings_.shutter_open = open;
  return {.busy_s = moves ? 0.020 : 0.0};
}

PhantomDevice::Outcome PhantomDevice::ask_shutter(const wire::Unit& unit) {
  return {.fault = no_parameters(unit), .answer = settings_.shutter_open ? "OPEN" : "CLOS"};
}

PhantomDevice::Outcome PhantomDevice::ask_reading(const wire::Unit& unit) {
  if (const int fault = no_parameters(unit)) return {.fault = fault};
  const double light_s = settings_.exposure_s * settings_.frames;
  constexpr double readout_s = 0.002;
  return {.busy_s = light_s + readout_s,
          .answer_at_end = [this, light_s](double end_s) { return read_block(end_s - readout_s - light_s); }};
}

std::string PhantomDevice::read_block(double start_s) {
  const Spectrum spectrum =
      nest_->expose(start_s, settings_.exposure_s, settings_.frames, settings_.shutter_open, settings_.line_lamp);
  wire::LeWriter content;
  content.u32(++readings_)
      .u32(static_cast<std::uint32_t>(std::lround(settings_.exposure_s * 1e6)))
      .u16(static_cast<std::uint16_t>(settings_.frames))
      .u8(settings_.shutter_open ? 1 : 0)
      .u8(spectrum.full ? 1 : 0)
      .i16(static_cast<std::int16_t>(std::lround(100.0 * nest_->shown_degC())))
      .u16(static_cast<std::uint16_t>(pixel_count));
  for (const std::uint16_t counts : spectrum.counts) content.u16(counts);
  content.u32(wire::crc32(content.bytes()));
  return wire::encode_block(content.bytes());
}

PhantomDevice::Outcome PhantomDevice::ask_wavelength(const wire::Unit& unit) {
  return {.fault = no_parameters(unit), .answer = list_text(spectrometer_certificate::wavelength_nm)};
}

// --- 2.4 modulator, path, lamps

void PhantomDevice::apply_modulation() {
  Depths depths = settings_.depths;
  if (settings_.set_point > 0) depths = stored_set_points[static_cast<std::size_t>(settings_.set_point - 1)].depths;
  if (!settings_.modulating) depths = {};
  nest_->modulate(clock_.now_s(), settings_.set_point, depths, settings_.rate_Hz);
}

PhantomDevice::Outcome PhantomDevice::set_point(const wire::Unit& unit) {
  Arguments arguments{unit};
  const long number = arguments.integer(0, 9);
  if (const int fault = arguments.fault()) return {.fault = fault};
  if (number > static_cast<long>(stored_set_points.size())) return {.fault = -224};
  if (settings_.set_point == number) return {};
  settings_.set_point = static_cast<int>(number);
  apply_modulation();
  optics_changed(clock_.now_s());
  return {};
}

PhantomDevice::Outcome PhantomDevice::ask_set_point(const wire::Unit& unit) {
  return {.fault = no_parameters(unit), .answer = std::to_string(settings_.set_point)};
}

PhantomDevice::Outcome PhantomDevice::ask_set_points(const wire::Unit& unit) {
  std::vector<double> values;
  for (std::size_t i = 0; i < stored_set_points.size(); ++i) {
    const StoredSetPoint& point = stored_set_points[i];
    values.insert(values.end(),
                  {static_cast<double>(i + 1), point.nominal_ratio, point.depths.red, point.depths.infrared});
  }
  return {.fault = no_parameters(unit), .answer = list_text(values)};
}

PhantomDevice::Outcome PhantomDevice::rate(const wire::Unit& unit) {
  Arguments arguments{unit};
  const double rate_Hz = arguments.number("HZ", 0.5, 10.0);
  if (const int fault = arguments.fault()) return {.fault = fault};
  if (settings_.rate_Hz == rate_Hz) return {};
  settings_.rate_Hz = rate_Hz;
  apply_modulation();
  optics_changed(clock_.now_s());
  return {};
}

PhantomDevice::Outcome PhantomDevice::ask_rate(const wire::Unit& unit) {
  return {.fault = no_parameters(unit), .answer = shortest(settings_.rate_Hz)};
}

PhantomDevice::Outcome PhantomDevice::red_depth(const wire::Unit& unit) {
  Arguments arguments{unit};
  const double depth = arguments.number("", 0.0, 0.1);
  if (const int fault = arguments.fault()) return {.fault = fault};
  if (settings_.depths.red == depth) return {};
  settings_.depths.red = depth;
  apply_modulation();
  optics_changed(clock_.now_s());
  return {};
}

PhantomDevice::Outcome PhantomDevice::ask_red_depth(const wire::Unit& unit) {
  return {.fault = no_parameters(unit), .answer = shortest(settings_.depths.red)};
}

PhantomDevice::Outcome PhantomDevice::infrared_depth(const wire::Unit& unit) {
  Arguments arguments{unit};
  const double depth = arguments.number("", 0.0, 0.1);
  if (const int fault = arguments.fault()) return {.fault = fault};
  if (settings_.depths.infrared == depth) return {};
  settings_.depths.infrared = depth;
  apply_modulation();
  optics_changed(clock_.now_s());
  return {};
}

PhantomDevice::Outcome PhantomDevice::ask_infrared_depth(const wire::Unit& unit) {
  return {.fault = no_parameters(unit), .answer = shortest(settings_.depths.infrared)};
}

PhantomDevice::Outcome PhantomDevice::modulate(const wire::Unit& unit) {
  const bool before = settings_.modulating;
  const Outcome outcome = set_flag(unit, settings_.modulating, 0.0);
  if (settings_.modulating == before) return outcome;
  apply_modulation();
  optics_changed(clock_.now_s());
  return outcome;
}

PhantomDevice::Outcome PhantomDevice::ask_modulate(const wire::Unit& unit) {
  return {.fault = no_parameters(unit), .answer = truth_text(settings_.modulating)};
}

PhantomDevice::Outcome PhantomDevice::ask_settled(const wire::Unit& unit) {
  return {.fault = no_parameters(unit), .answer = truth_text(clock_.now_s() >= settled_at_s())};
}

PhantomDevice::Outcome PhantomDevice::blade(const wire::Unit& unit) {
  constexpr double moving_s = 0.1;
  const bool before = settings_.blade_in;
  const Outcome outcome = set_flag(unit, settings_.blade_in, moving_s);
  if (settings_.blade_in == before) return outcome;
  const double now_s = clock_.now_s();
  nest_->set_blade(now_s, settings_.blade_in);
  optics_changed(now_s);
  return outcome;
}

PhantomDevice::Outcome PhantomDevice::ask_blade(const wire::Unit& unit) {
  return {.fault = no_parameters(unit), .answer = truth_text(settings_.blade_in)};
}

PhantomDevice::Outcome PhantomDevice::lamp(const wire::Unit& unit) {
  const Outcome outcome = set_flag(unit, settings_.lamp.on, 0.0);
  nest_->set_lamp(clock_.now_s(), settings_.lamp);
  return outcome;
}

PhantomDevice::Outcome PhantomDevice::ask_lamp(const wire::Unit& unit) {
  return {.fault = no_parameters(unit), .answer = truth_text(settings_.lamp.on)};
}

PhantomDevice::Outcome PhantomDevice::lamp_level(const wire::Unit& unit) {
  Arguments arguments{unit};
  const double level = arguments.number("", 0.0, 1.0);
  if (const int fault = arguments.fault()) return {.fault = fault};
  settings_.lamp.level = level;
  nest_->set_lamp(clock_.now_s(), settings_.lamp);
  return {};
}

PhantomDevice::Outcome PhantomDevice::ask_lamp_level(const wire::Unit& unit) {
  return {.fault = no_parameters(unit), .answer = shortest(settings_.lamp.level)};
}

PhantomDevice::Outcome PhantomDevice::lamp_flicker(const wire::Unit& unit) {
  Arguments arguments{unit};
  const double flicker_Hz = arguments.number("HZ", 0.0, 120.0);
  if (const int fault = arguments.fault()) return {.fault = fault};
  if (flicker_Hz != 0.0 && flicker_Hz != 100.0 && flicker_Hz != 120.0) return {.fault = -224};
  settings_.lamp.flicker_Hz = flicker_Hz;
  nest_->set_lamp(clock_.now_s(), settings_.lamp);
  return {};
}

PhantomDevice::Outcome PhantomDevice::ask_lamp_flicker(const wire::Unit& unit) {
  return {.fault = no_parameters(unit), .answer = shortest(settings_.lamp.flicker_Hz)};
}

PhantomDevice::Outcome PhantomDevice::line_lamp(const wire::Unit& unit) {
  return set_flag(unit, settings_.line_lamp, 0.05);
}

PhantomDevice::Outcome PhantomDevice::ask_line_lamp(const wire::Unit& unit) {
  return {.fault = no_parameters(unit), .answer = truth_text(settings_.line_lamp)};
}

PhantomDevice::Outcome PhantomDevice::ask_lines(const wire::Unit& unit) {
  return {.fault = no_parameters(unit), .answer = list_text(line_lamp_nm)};
}

// --- 2.5 nest

PhantomDevice::Outcome PhantomDevice::ask_temperature(const wire::Unit& unit) {
  return {.fault = no_parameters(unit), .answer = fixed(nest_->shown_degC(), 2)};
}

PhantomDevice::Outcome PhantomDevice::ask_lid(const wire::Unit& unit) {
  return {.fault = no_parameters(unit), .answer = nest_->lid_open() ? "OPEN" : "CLOS"};
}

PhantomDevice::Outcome PhantomDevice::ask_probe(const wire::Unit& unit) {
  return {.fault = no_parameters(unit), .answer = truth_text(nest_->probe().has_value())};
}

PhantomDevice::Outcome PhantomDevice::ask_probe_count(const wire::Unit& unit) {
  return {.fault = no_parameters(unit), .answer = std::to_string(nest_->insertions() - insertions_before_)};
}

}  // namespace probewright::emulated
