#pragma once
#include <cstdint>
#include <functional>
#include <optional>

#include "drivers/emulated/deviates.h"
#include "drivers/emulated/flicker.h"
#include "drivers/emulated/lamp.h"
#include "drivers/emulated/led_drive.h"
#include "drivers/emulated/modulator.h"
#include "drivers/emulated/probe.h"
#include "drivers/emulated/spectrometer.h"
#include "drivers/emulated/station_errors.h"
#include "drivers/emulated/timeline.h"

namespace probewright::emulated {

/// Which slot of a cycle.
enum class Slot { red, dark, infrared };

/// The physical world of one nest, which its two devices share: the probe in it, the light, the temperature. What the
/// phantom does (modulator, blade, lamp) and what the adapter does (drive) meets here. Times are device seconds since
/// the bench began and must not fall from call to call, except where the past is asked for. One thread.
class Nest {
 public:
  struct Setup {
    int number = 1;
    std::uint64_t seed = 1;
    double ambient_degC = 25.0;
    double mains_Hz = 50.0;
    bool perfect = false;                   ///< the station's own errors are zero
    std::optional<StationErrors> errors{};  ///< instead of those drawn from the seed
  };
  explicit Nest(const Setup& setup);

  // What hands do.
  void seat(double time_s, Probe probe);  ///< the nest must be empty
  void remove(double time_s);             ///< LEDs go dark at once
  void set_lid(double time_s, bool open);
  void set_ambient(double degC) { ambient_degC_ = degC; }

  // What goes wrong with the nest.
  /// Its devices differ from their certificates like this from now on (but for the spectrometer, which is as made).
  void set_errors(double time_s, const StationErrors& errors);
  /// Light of the room that gets in although the lid is closed.
  void set_flicker(double time_s, const Flicker& flicker) { flicker_.set(time_s, flicker); }

  const std::optional<Probe>& probe() const { return probe_; }
  std::uint32_t insertions() const { return insertions_; }  ///< since the bench began
  std::uint32_t removals() const { return removals_; }
  bool lid_open() const { return lid_open_.latest(); }
  double degC() const { return ambient_degC_; }
  const StationErrors& errors() const { return errors_; }
  double mains_Hz() const { return mains_Hz_; }

  // What the phantom does.
  void modulate(double time_s, int set_point, Depths depths, double rate_Hz);  ///< set point 0: depths as told
  void set_blade(double time_s, bool in);                                      ///< the opaque path
  void set_lamp(double time_s, const Lamp& lamp) { lamp_.set(time_s, lamp); }
  double shown_degC();  ///< what its thermometer says
  /// Exposure of the spectrometer that begins at `start_s`.
  Spectrum expose(double start_s, double exposure_s, int frames, bool shutter_open, bool line_lamp);

  // What the adapter does.
  void drive(double time_s, double red_mA, double infrared_mA);  ///< currents that really flow
  const LedDrive& leds() const { return leds_; }
  /// Asked before anything looks at the LEDs: lets the adapter's watchdog act in time.
  void on_look(std::function<void(double time_s)> look) { look_ = std::move(look); }

  struct Photocurrent {
    double light_nA = 0.0;       ///< from the LEDs
    double background_nA = 0.0;  ///< dark current, ambient light, mains
    double total_nA() const { return light_nA + background_nA; }
  };
  /// Photocurrent in a slot that stands for the moment `time_s`; the recent past may be asked for.
  Photocurrent photocurrent(Slot slot, double time_s);
  /// Mean photocurrent with both LEDs off, at a bias.
  double dark_nA(double bias_V, double from_s, double time_s) const;
  /// Forward voltage of an LED of the seated probe in V, mean over a span of constant drive; drive_mA > 0 and
  /// the LED conducts.
  double forward_V(LedColour colour, double drive_mA, double from_s, double to_s) const;

 private:
  double ambient_light(double time_s) const;
  void apply_modulation(double time_s);
  double mains_nA(double time_s) const;
  /// What the phantom does with light at one moment.
  struct Path {
    Modulator::Bands bands;
    bool blade_in = false;
  };
  double led_light_nA(LedColour colour, const LedDrive::Moment& drive, const Path& phantom) const;
  void add_led_lines(std::vector<SpectralLine>& lines, double from_s, double to_s) const;

  struct Modulation {
    int set_point = 0;
    Depths depths;
    double rate_Hz = 5.0;
  };
  Setup setup_;
  StationErrors errors_;
  Modulation modulation_;  ///< as the phantom set it
  Deviates noise_;
  Spectrometer spectrometer_;
  Modulator modulator_;
  Timeline<bool> blade_{false}, lid_open_{false};
  Timeline<Lamp> lamp_{Lamp{}};
  Timeline<Flicker> flicker_{Flicker{}};
  LedDrive leds_;
  std::optional<Probe> probe_;
  std::function<void(double)> look_;
  double ambient_degC_, mains_Hz_;
  double mains_phase_turns_;
  double seat_coupling_ = 1.0;  ///< how this insertion sits: photocurrent
  double seat_pick_off_ = 1.0;  ///< how this insertion sits: spectrometer
  std::uint32_t insertions_ = 0, removals_ = 0;
};

/// Wavelengths of the line lamp (argon, in air; NIST Atomic Spectra Database, from memory), nm.
inline constexpr std::array<double, 4> line_lamp_nm{696.543, 763.511, 811.531, 912.297};

}  // namespace probewright::emulated
