#pragma once
#include <boost/asio/awaitable.hpp>
#include <functional>
#include <string>
#include <string_view>
#include <vector>

#include "drivers/adapter/driver.h"
#include "drivers/phantom/driver.h"
#include "drivers/wire/line_clock.h"
#include "station/measure/model.h"
#include "station/sequence/capture_book.h"
#include "station/sequence/run_step.h"

namespace probewright::sequence {

namespace asio = boost::asio;

/// The two devices of one nest.
struct NestDevices {
  phantom::Driver& phantom;
  adapter::Driver& adapter;
};

/// How often a probe had been put in, by both devices, when the run began: another one since then is another probe.
struct Insertions {
  std::uint32_t phantom = 0, adapter = 0;
  bool operator==(const Insertions&) const = default;
};

/// The probe or a person ended the run: problem lid_opened, probe_unplugged or probe_exchanged.
class Disturbed : public ProblemError {
 public:
  using ProblemError::ProblemError;
};

/// Tells the adapter's driver what the model's runs need before their first command: the highest drive, and the slots'
/// timing. The drive must be off. Throws as the driver does.
asio::awaitable<void> prepare_adapter(adapter::Driver& adapter, const measure::Model& model);

/// What one nest does to one probe, in order: asks the devices for captures and hands them to the book. It computes no
/// reading. One coroutine per run; line thread only; may be cancelled at any await.
///
/// Both devices work at the same time where physics allows it:
///   LEDs off        dark current, mains, reverse leakage, beside a dark frame of the spectrometer
///   one LED alone   infrared's slots, then red's beside the spectrum of the red LED
///   both LEDs       voltages and ID; ambient light; closed path; then one capture of pulses for each set point, the
///   one
///                   that stands for the light's level last and with the spectra beside it
/// Voltages are asked for while the modulator settles. A stage's captures count when the probe was in its place and
/// driven up to its end.
class Routine {
 public:
  /// Tells what is being done, and how far it is: "pulses at ratio 0.4", 4 of 6.
  using Progress = std::function<void(std::string_view doing, int stage, int stages)>;

  Routine(NestDevices devices, const measure::Model& model, const measure::PhantomCertificate& certificate,
          Insertions insertions, wire::LineClock& clock, CaptureBook& book, Progress progress);

  /// Gathers all captures. Throws Disturbed, wire::DeviceLost and other ProblemErrors, system_error(operation_aborted)
  /// when cancelled. The drive may still be on then: whoever called switches it off.
  asio::awaitable<void> gather();

 private:
  /// A step that is going on; it is noted in the book when it ends.
  class Going;

  asio::awaitable<void> gather_all();
  asio::awaitable<void> check_stage();
  asio::awaitable<void> check_adapter();
  asio::awaitable<void> check_phantom();
  void begin_stage(std::string_view doing);
  asio::awaitable<void> settle_book();

  asio::awaitable<void> take_dark();
  asio::awaitable<void> prepare_phantom();
  void add_dark();

  asio::awaitable<void> take_infrared_alone();
  asio::awaitable<void> take_red_alone();
  asio::awaitable<void> take_slots_alone(measure::Band lit);
  asio::awaitable<void> take_red_spectrum();

  asio::awaitable<void> take_contact();
  asio::awaitable<bool> both_shine();
  asio::awaitable<void> take_around();
  asio::awaitable<void> take_ambient();
  asio::awaitable<void> take_closed_path();

  asio::awaitable<void> take_all_pulses(std::vector<measure::SetPoint> set_points);
  asio::awaitable<void> modulate(measure::SetPoint set_point, std::string after);
  asio::awaitable<void> between_captures(std::size_t next, std::size_t count);
  asio::awaitable<void> take_pulses(measure::SetPoint set_point);
  asio::awaitable<void> take_drive_voltages();
  asio::awaitable<void> take_quarter_voltages();
  void add_driven();

  asio::awaitable<void> take_spectra();
  asio::awaitable<measure::SpectrumCapture> exposed_well(measure::Band band, measure::SpectrumCapture capture);
  asio::awaitable<measure::SpectrumCapture> expose(measure::Band band, double exposure_s);
  asio::awaitable<measure::SpectrumCapture> expose_light(measure::Band band, phantom::Spectrum dark);
  phantom::SpectrometerSetting setting(double exposure_s, phantom::Shutter shutter) const;
  measure::SpectrumCapture of_band(measure::SpectrumCapture frames, measure::Band band) const;

  asio::awaitable<void> wait_since_both_on(double time_s);
  asio::awaitable<adapter::Capture> capture(double time_s);
  int stored(const measure::SetPoint& set_point) const;
  bool wants_crosstalk() const { return model_.has_check("slot_crosstalk"); }

  NestDevices devices_;
  const measure::Model& model_;
  const measure::PhantomCertificate& certificate_;
  Insertions insertions_;
  wire::LineClock& clock_;
  CaptureBook& book_;
  Progress progress_;
  int stage_ = 0;

  double temperature_C_ = 0.0;  ///< of the nest, at the beginning
  std::vector<phantom::SetPoint> stored_set_points_;
  std::optional<phantom::Spectrum> dark_frame_;  ///< of the first exposure
  adapter::DarkCurrent dark_connected_, dark_open_;
  adapter::ForwardVoltage infrared_first_;
  measure::ElectricalCapture contact_, driven_;
  SteadyTime both_on_{};
  SteadyTime recovered_{};  ///< when the LEDs are as before their voltages at a quarter of the drive
  bool blade_in_ = false;
  double settling_s_ = 0.0;  ///< of the optics, after the last step that changed them
};

}  // namespace probewright::sequence
