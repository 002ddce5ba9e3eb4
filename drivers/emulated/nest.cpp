#include "drivers/emulated/nest.h"

#include <cmath>
#include <numbers>
#include <string>
#include <utility>

namespace probewright::emulated {
namespace {

constexpr double room_light = 4.0;          ///< through an open lid, relative to the lamp at full level
constexpr double room_flicker_depth = 0.3;  ///< amplitude over mean, at twice the mains
constexpr double room_e_per_s = 1.5e5;      ///< the same in the spectrometer, per pixel
constexpr double infrared_power = 2.5;      ///< of the nominal red LED's: peak at about a third of full scale
constexpr double operating_bias_V = 5.0;    ///< across the photodiode while slots are taken

std::uint64_t nest_seed(const Nest::Setup& setup, const char* part) {
  return named_seed(setup.seed, std::string(part) + " of nest " + std::to_string(setup.number));
}

double drawn_phase(const Nest::Setup& setup, const char* part) {
  Deviates deviates(nest_seed(setup, part));
  return deviates.uniform();
}

StationErrors errors_of(const Nest::Setup& setup) {
  if (setup.perfect) return {};
  return setup.errors ? *setup.errors : draw_station_errors(setup.seed, setup.number);
}

}  // namespace

Nest::Nest(const Setup& setup)
    : setup_(setup),
      errors_(errors_of(setup)),
      noise_(nest_seed(setup, "noise")),
      spectrometer_(errors_, nest_seed(setup, "pixels")),
      modulator_(drawn_phase(setup, "modulator")),
      ambient_degC_(setup.ambient_degC),
      mains_Hz_(setup.mains_Hz),
      mains_phase_turns_(drawn_phase(setup, "mains")) {}

void Nest::seat(double time_s, Probe probe) {
  if (look_) look_(time_s);
  probe_ = std::move(probe);
  ++insertions_;
  seat_coupling_ = noise_.log_normal(1.0, 0.005);
  seat_pick_off_ = noise_.log_normal(1.0, 0.02);
  leds_.seat(time_s, probe_->red, probe_->infrared);
}

void Nest::remove(double time_s) {
  if (look_) look_(time_s);
  probe_.reset();
  ++removals_;
  leds_.remove(time_s);
}

void Nest::set_lid(double time_s, bool open) { lid_open_.set(time_s, open); }

void Nest::modulate(double time_s, int set_point, Depths depths, double rate_Hz) {
  modulation_ = {set_point, depths, rate_Hz};
  apply_modulation(time_s);
}

void Nest::apply_modulation(double time_s) {
  Depths depths = modulation_.depths;
  if (modulation_.set_point > 0) {
    const Depths& error = errors_.set_points[static_cast<std::size_t>(modulation_.set_point - 1)];
    depths = {depths.red * (1.0 + error.red), depths.infrared * (1.0 + error.infrared)};
  }
  modulator_.change(time_s, depths, modulation_.rate_Hz);
}

void Nest::set_errors(double time_s, const StationErrors& errors) {
  errors_ = errors;
  apply_modulation(time_s);
}

void Nest::set_blade(double time_s, bool in) { blade_.set(time_s, in); }

double Nest::shown_degC() { return ambient_degC_ + errors_.thermometer_K + noise_.normal(0.0, 0.01); }

void Nest::drive(double time_s, double red_mA, double infrared_mA) { leds_.set(time_s, red_mA, infrared_mA); }

double Nest::ambient_light(double time_s) const {
  double room = 0.0;
  if (lid_open_.at(time_s)) {
    const double flicker = std::sin(2.0 * std::numbers::pi * (2.0 * mains_Hz_ * time_s + mains_phase_turns_));
    room = room_light * (1.0 + room_flicker_depth * flicker);
  }
  return room + lamp_light(lamp_.at(time_s), time_s, mains_phase_turns_) +
         flicker_light(flicker_.at(time_s), time_s, mains_phase_turns_);
}

double Nest::mains_nA(double time_s) const {
  const double angle = 2.0 * std::numbers::pi * (mains_Hz_ * time_s + mains_phase_turns_);
  return probe_->mains_pickup_nA * std::numbers::sqrt2 * std::sin(angle);
}

double Nest::led_light_nA(LedColour colour, const LedDrive::Moment& drive, const Path& phantom) const {
  const bool red = colour == LedColour::red;
  const double current_mA = red ? drive.red_mA : drive.infrared_mA;
  if (current_mA <= 0.0) return 0.0;
  const Led& led = red ? probe_->red : probe_->infrared;
  if (!shines(led)) return 0.0;
  const bool red_light = led.colour == LedColour::red;
  const double light = light_at(led, excess_K(led, ambient_degC_, red ? drive.red : drive.infrared));
  const double transmission = 1.0 + (red_light ? errors_.red_transmission : errors_.infrared_transmission);
  const double secondary = red_light ? probe_->secondary_current : 0.0;
  const double own_band = red_light ? phantom.bands.red : phantom.bands.infrared;
  const double through = (1.0 - secondary) * own_band + secondary * phantom.bands.infrared;
  const double path = phantom.blade_in ? 0.0 : (1.0 - probe_->direct_light) * transmission * through;
  return current_mA * led.transfer_nA_per_mA * light * seat_coupling_ * (path + probe_->direct_light);
}

Nest::Photocurrent Nest::photocurrent(Slot slot, double time_s) {
  if (!probe_) return {};
  Photocurrent current;
  if (is_open(probe_->contact, time_s)) return {0.0, mains_nA(time_s)};
  const double share = photocurrent_share(probe_->photodiode);
  current.background_nA = dark_current_nA(probe_->photodiode, ambient_degC_, operating_bias_V) +
                          share * probe_->ambient_nA * ambient_light(time_s) + mains_nA(time_s);
  if (slot == Slot::dark) return current;
  const LedDrive::Moment drive = leds_.at(time_s);
  const Path phantom{modulator_.at(time_s), blade_.at(time_s)};
  const double red = led_light_nA(LedColour::red, drive, phantom);
  const double infrared = led_light_nA(LedColour::infrared, drive, phantom);
  const double own = slot == Slot::red ? red : infrared, other = slot == Slot::red ? infrared : red;
  current.light_nA = share * (own + probe_->slot_crosstalk * other) * (1.0 + noise_.normal(0.0, probe_->contact_noise));
  return current;
}

double Nest::dark_nA(double bias_V, double from_s, double time_s) const {
  if (!probe_) return 0.0;
  const double to_s = from_s + time_s;
  const double mains =
      probe_->mains_pickup_nA * std::numbers::sqrt2 * mean_sine(mains_Hz_, mains_phase_turns_, from_s, to_s);
  const Lamp& lamp = lamp_.at(from_s);
  double light = lamp.on ? lamp.level : 0.0;
  if (lamp.on && lamp.flicker_Hz > 0.0) {
    light *= 1.0 + Lamp::flicker_depth * mean_sine(lamp.flicker_Hz, mains_phase_turns_, from_s, to_s);
  }
  if (lid_open_.at(from_s)) {
    light += room_light * (1.0 + room_flicker_depth * mean_sine(2.0 * mains_Hz_, mains_phase_turns_, from_s, to_s));
  }
  light += mean_flicker(flicker_.at(from_s), mains_phase_turns_, from_s, to_s);
  light *= photocurrent_share(probe_->photodiode);
  return dark_current_nA(probe_->photodiode, ambient_degC_, bias_V) + probe_->ambient_nA * light + mains;
}

double Nest::forward_V(LedColour colour, double drive_mA, double from_s, double to_s) const {
  const LedDrive::Moment mean = leds_.mean_over(from_s, to_s);
  const bool red = colour == LedColour::red;
  const Led& led = red ? probe_->red : probe_->infrared;
  return forward_voltage_V(led, drive_mA, excess_K(led, ambient_degC_, red ? mean.red : mean.infrared));
}

void Nest::add_led_lines(std::vector<SpectralLine>& lines, double from_s, double to_s) const {
  const LedDrive::Moment mean = leds_.mean_over(from_s, to_s);
  for (const LedColour colour : {LedColour::red, LedColour::infrared}) {
    const bool red = colour == LedColour::red;
    const Led& led = red ? probe_->red : probe_->infrared;
    const double current_mA = red ? mean.red_mA : mean.infrared_mA;
    if (current_mA <= 0.0 || !shines(led)) continue;
    const bool red_light = led.colour == LedColour::red;
    const double excess = excess_K(led, ambient_degC_, red ? mean.red : mean.infrared);
    const double power = (red_light ? 1.0 : infrared_power) * led.optical_power * seat_pick_off_ *
                         light_at(led, excess) * current_mA / 20.0;
    const double secondary = red_light ? probe_->secondary_power : 0.0;
    lines.push_back({line_at(led, excess), power * (1.0 - secondary)});
    if (secondary > 0.0) lines.push_back({probe_->secondary_line, power * secondary});
  }
}

Spectrum Nest::expose(double start_s, double exposure_s, int frames, bool shutter_open, bool line_lamp) {
  const double end_s = start_s + exposure_s * frames;
  if (look_) look_(end_s);
  std::vector<SpectralLine> lines;
  double background_e_per_s = 0.0;
  if (shutter_open) {
    if (probe_) add_led_lines(lines, start_s, end_s);
    if (line_lamp) {
      for (const double wavelength : line_lamp_nm) lines.push_back({{wavelength, 0.05, 0.0}, 0.08});
    }
    if (lid_open_.at(end_s)) background_e_per_s = room_e_per_s;
  }
  return spectrometer_.expose(lines, background_e_per_s, exposure_s, frames, noise_);
}

}  // namespace probewright::emulated
