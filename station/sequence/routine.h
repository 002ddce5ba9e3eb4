#pragma once
#include <boost/asio/awaitable.hpp>
#include <functional>
#include <string>
#include <string_view>

#include "drivers/adapter/driver.h"
#include "drivers/phantom/driver.h"
#include "drivers/wire/line_clock.h"
#include "station/measure/model.h"
#include "station/sequence/run_book.h"

namespace probewright::sequence {

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

/// What one nest does to one probe, in order: asks the devices for captures and hands them to the book. It computes no
/// reading. One coroutine per run; line thread only; may be cancelled at any await.
class Routine {
 public:
  /// Tells what is being done, and how far it is: "spectrum of the red LED", 3 of 5.
  using Progress = std::function<void(std::string_view doing, int stage, int stages)>;

  Routine(NestDevices devices, const measure::Model& model, const measure::PhantomCertificate& certificate,
          Insertions insertions, wire::LineClock& clock, RunBook& book, Progress progress);

  /// Gathers all captures. Throws Disturbed, wire::DeviceLost and other ProblemErrors, system_error(operation_aborted)
  /// when cancelled. The drive may still be on then: whoever called switches it off.
  asio::awaitable<void> gather();

 private:
  asio::awaitable<void> gather_lit();
  asio::awaitable<void> driven(asio::awaitable<void> work);
  asio::awaitable<void> take_contact_and_dark();
  asio::awaitable<void> warm_up();
  asio::awaitable<bool> take_voltages();
  asio::awaitable<measure::LedElectrical> voltages_of(measure::Band band);
  asio::awaitable<void> take_spectra();
  asio::awaitable<measure::SpectrumCapture> exposed_well(measure::Band band, measure::SpectrumCapture capture);
  measure::SpectrumCapture of_band(measure::SpectrumCapture frames, measure::Band band) const;
  asio::awaitable<measure::SpectrumCapture> expose(measure::Band band, double exposure_s);
  asio::awaitable<void> take_pulses(const measure::SetPoint& set_point);
  asio::awaitable<int> stored_set_point(const measure::SetPoint& set_point);
  asio::awaitable<void> still_right();
  asio::awaitable<void> lid_stays_closed();
  asio::awaitable<adapter::Capture> capture_watched(std::uint32_t cycles);
  asio::awaitable<void> finish_stage();
  void begin_stage(std::string_view doing);

  NestDevices devices_;
  const measure::Model& model_;
  const measure::PhantomCertificate& certificate_;
  Insertions insertions_;
  wire::LineClock& clock_;
  RunBook& book_;
  Progress progress_;
  measure::ElectricalCapture electrical_;
  int stage_ = 0;
};

}  // namespace probewright::sequence
