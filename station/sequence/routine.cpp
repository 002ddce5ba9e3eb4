#include "station/sequence/routine.h"

#include <algorithm>
#include <boost/asio/co_spawn.hpp>
#include <boost/asio/deferred.hpp>
#include <boost/asio/experimental/parallel_group.hpp>
#include <boost/asio/this_coro.hpp>
#include <boost/asio/use_awaitable.hpp>
#include <cmath>

#include "station/base/catalogue.h"
#include "station/base/numbers.h"
#include "station/measure/exposure.h"

namespace probewright::sequence {
namespace {

using measure::Band;

constexpr int most_exposures = 4;
/// How often the lid is looked at while the phantom has nothing else to do.
constexpr Duration lid_pause = std::chrono::milliseconds(100);
/// Device time that no run takes, however often it has to ask again.
constexpr Duration longest_run = std::chrono::minutes(10);

constexpr std::uint32_t microamperes(double mA) { return static_cast<std::uint32_t>(mA * 1000.0 + 0.5); }
constexpr std::uint16_t thousandths(double value) { return static_cast<std::uint16_t>(value * 1000.0 + 0.5); }
adapter::Led led_of(Band band) { return band == Band::red ? adapter::Led::red : adapter::Led::infrared; }

measure::ForwardVoltage forward_voltage(const adapter::ForwardVoltage& told, double set_mA) {
  return {set_mA, told.delivered_nA * 1e-6, told.voltage_uV * 1e-6, told.at_compliance};
}

}  // namespace

Routine::Routine(NestDevices devices, const measure::Model& model, const measure::PhantomCertificate& certificate,
                 Insertions insertions, wire::LineClock& clock, RunBook& book, Progress progress)
    : devices_(devices),
      model_(model),
      certificate_(certificate),
      insertions_(insertions),
      clock_(clock),
      book_(book),
      progress_(std::move(progress)) {}

asio::awaitable<void> Routine::gather() {
  begin_stage("contact, ID and dark current");
  co_await take_contact_and_dark();
  begin_stage("forward voltages");
  co_await devices_.adapter.drive({microamperes(model_.drive_mA.red), microamperes(model_.drive_mA.infrared)});
  co_await driven(gather_lit());
}

/// Runs `work` while something keeps asking the adapter whether the LEDs are driven: an exchange with the phantom that
/// must be tried again takes longer than the adapter's watchdog. Whichever ends first ends the other.
asio::awaitable<void> Routine::driven(asio::awaitable<void> work) {
  const auto executor = co_await asio::this_coro::executor;
  const auto [order, work_error, keeper_error] =
      co_await asio::experimental::make_parallel_group(
          asio::co_spawn(executor, std::move(work), asio::deferred),
          asio::co_spawn(executor, devices_.adapter.dwell_driven(longest_run), asio::deferred))
          .async_wait(asio::experimental::wait_for_one(), asio::use_awaitable);
  const std::exception_ptr& error = order[0] == 0 ? work_error : keeper_error;
  if (error) std::rethrow_exception(error);
  if (order[0] != 0) throw ProblemError({"run_too_long", "nest"});
}

asio::awaitable<void> Routine::gather_lit() {
  co_await warm_up();
  const bool lights = co_await take_voltages();
  co_await finish_stage();
  if (!lights) co_return;  // an LED that carries no current has no spectrum and no pulses
  for (const measure::SetPoint& set_point : model_.needed_set_points()) {
    begin_stage("pulses at ratio " + fixed(set_point.ratio, 1));
    co_await take_pulses(set_point);
    co_await finish_stage();
  }
  if (!(model_.needs() & needs_spectra)) co_return;
  begin_stage("spectra");  // last: by now the package is warm
  co_await take_spectra();
  co_await finish_stage();
}

void Routine::begin_stage(std::string_view doing) {
  const int spectra = model_.needs() & needs_spectra ? 1 : 0;
  progress_(doing, ++stage_, 2 + spectra + static_cast<int>(model_.needed_set_points().size()));
}

/// Readings of a stage count as made only when the probe was in its place, in the dark, up to its end.
asio::awaitable<void> Routine::finish_stage() {
  if (stage_ > 1) co_await devices_.adapter.require_drive();
  co_await still_right();
  book_.stage_done();
}

asio::awaitable<void> Routine::still_right() {
  const phantom::NestState nest = co_await devices_.phantom.nest_state();
  const adapter::Presence plug = co_await devices_.adapter.presence();
  if (!nest.lid_closed) throw Disturbed({"lid_opened", "nest"});
  if (!nest.probe.present || !plug.present) throw Disturbed({"probe_unplugged", "nest"});
  if (Insertions{nest.probe.insertions, plug.insertions} != insertions_) throw Disturbed({"probe_exchanged", "nest"});
}

/// Electrical checks that want the LEDs off come first.
asio::awaitable<void> Routine::take_contact_and_dark() {
  auto& adapter = devices_.adapter;
  const phantom::NestState nest = co_await devices_.phantom.nest_state();
  electrical_.temperature_C = co_await devices_.phantom.temperature_degC();
  electrical_.present_phantom = nest.probe.present;
  electrical_.present_adapter = (co_await adapter.presence()).present;
  const adapter::IdResistance id = co_await adapter.id_resistance();
  electrical_.id_open = id.open;
  if (!id.open) electrical_.id_resistance_ohm = id.resistance_milliohm * 1e-3;
  electrical_.mains_pickup_nA = (co_await adapter.mains_pickup_pA(thousandths(model_.mains_time_s))) * 1e-3;
  for (const Band band : {Band::red, Band::infrared}) {
    const auto leakage = co_await adapter.reverse_leakage(led_of(band), thousandths(model_.reverse_bias_V));
    if (!leakage.not_separate) electrical_.led.of(band).reverse_leakage_uA = leakage.leakage_pA * 1e-6;
  }
  if (!(model_.needs() & needs_dark)) co_return;
  const auto bias_mV = thousandths(model_.dark_bias_V);
  const auto time_ms = thousandths(model_.dark_time_s);
  const adapter::DarkCurrent connected = co_await adapter.dark_current(bias_mV, time_ms, adapter::Input::connected);
  const adapter::DarkCurrent open = co_await adapter.dark_current(bias_mV, time_ms, adapter::Input::open);
  measure::DarkCapture dark;
  dark.connected_nA = connected.current_pA * 1e-3;
  dark.connected_sd_nA = connected.sd_pA * 1e-3;
  dark.open_nA = open.current_pA * 1e-3;
  dark.open_sd_nA = open.sd_pA * 1e-3;
  dark.bias_V = model_.dark_bias_V;
  dark.averaged_s = model_.dark_time_s;
  dark.temperature_C = electrical_.temperature_C;
  book_.add(dark);
}

/// Until both LEDs are warm, in pieces short enough to see the lid.
asio::awaitable<void> Routine::warm_up() {
  const SteadyTime until = clock_.steady_now() + from_seconds(model_.warmup_s / clock_.speed());
  while (clock_.steady_now() < until) {
    co_await lid_stays_closed();
    co_await clock_.wait_until(
        std::min(until, clock_.steady_now() + from_seconds(seconds(lid_pause) / clock_.speed())));
  }
}

asio::awaitable<measure::LedElectrical> Routine::voltages_of(Band band) {
  measure::LedElectrical led = electrical_.led.of(band);
  const double drive_mA = model_.drive_mA.of(band), quarter_mA = model_.quarter_drive_mA.of(band);
  const adapter::ForwardVoltage at_drive = co_await devices_.adapter.forward_voltage(led_of(band));
  led.at_drive = forward_voltage(at_drive, drive_mA);
  led.first_voltage_V = at_drive.first_uV * 1e-6;
  led.warm_voltage_V = at_drive.voltage_uV * 1e-6;
  const adapter::ForwardVoltage at_quarter =
      co_await devices_.adapter.forward_voltage_at(led_of(band), microamperes(quarter_mA));
  led.at_quarter = forward_voltage(at_quarter, quarter_mA);
  co_return led;
}

/// Whether both LEDs carry their current. An LED that does not is a hard fault: what follows is blocked by it.
asio::awaitable<bool> Routine::take_voltages() {
  for (const Band band : {Band::red, Band::infrared}) {
    measure::LedElectrical led = co_await voltages_of(band);
    electrical_.led.of(band) = led;
  }
  book_.add(electrical_);
  for (const Band band : {Band::red, Band::infrared}) {
    if (!electrical_.led.of(band).at_drive->at_compliance) continue;
    book_.block(std::string{slug(band)} + "_forward_voltage");
    co_return false;
  }
  co_return true;
}

/// One light frame and the dark frame of the same exposure, with both LEDs in their standard drive: a wavelength is
/// defined for the probe as warm as that drive makes it, and each line has its own window.
asio::awaitable<measure::SpectrumCapture> Routine::expose(Band band, double exposure_s) {
  phantom::SpectrometerSetting setting;
  setting.exposure_us = static_cast<std::uint32_t>(std::llround(exposure_s * 1e6));
  setting.frames = model_.frames;
  setting.shutter = phantom::Shutter::closed;
  const phantom::Spectrum dark = co_await devices_.phantom.spectrum(setting);
  setting.shutter = phantom::Shutter::open;
  const phantom::Spectrum light = co_await devices_.phantom.spectrum(setting);
  measure::SpectrumCapture capture;
  capture.light = light.counts;
  capture.dark = dark.counts;
  capture.pixel_was_full = light.any_pixel_full || dark.any_pixel_full;
  capture.exposure_s = setting.exposure_us * 1e-6;
  capture.frames = setting.frames;
  capture.temperature_C = light.temperature_degC;
  co_return of_band(std::move(capture), band);
}

/// The same frames as a capture of one band.
measure::SpectrumCapture Routine::of_band(measure::SpectrumCapture frames, Band band) const {
  frames.band = band;
  frames.drive_mA = model_.drive_mA.of(band);
  return frames;
}

/// Frames that are good for both bands serve both; else each band gets its own exposure.
asio::awaitable<void> Routine::take_spectra() {
  measure::SpectrumCapture red = co_await exposed_well(Band::red, co_await expose(Band::red, model_.exposure_start_s));
  measure::SpectrumCapture infrared = co_await exposed_well(Band::infrared, of_band(red, Band::infrared));
  book_.add(std::move(red));
  book_.add(std::move(infrared));
}

/// Exposes anew until the band's line is neither clipped nor too dark, or another exposure would not help.
asio::awaitable<measure::SpectrumCapture> Routine::exposed_well(Band band, measure::SpectrumCapture capture) {
  for (int i = 1; i < most_exposures; ++i) {
    const measure::ExposureAdvice advice = measure::advise_exposure(capture, model_, certificate_);
    if (advice.good || !advice.next_s) break;
    capture = co_await expose(band, *advice.next_s);
  }
  co_return capture;
}

/// Number under which the phantom stores this set point.
asio::awaitable<int> Routine::stored_set_point(const measure::SetPoint& set_point) {
  const std::vector<phantom::SetPoint> stored = co_await devices_.phantom.set_points();
  for (const phantom::SetPoint& point : stored)
    if (std::abs(point.ratio - set_point.ratio) < 1e-6) co_return point.number;
  throw ProblemError({"set_point_not_stored", "phantom", {{"ratio", std::to_string(set_point.ratio)}}});
}

asio::awaitable<void> Routine::take_pulses(const measure::SetPoint& set_point) {
  phantom::Modulation modulation;
  modulation.set_point = co_await stored_set_point(set_point);
  modulation.rate_Hz = model_.modulator_Hz;
  co_await devices_.phantom.modulate(modulation);
  co_await devices_.phantom.wait_settled();
  const double temperature_C = co_await devices_.phantom.temperature_degC();
  const adapter::Capture taken = co_await capture_watched(static_cast<std::uint32_t>(model_.pulse_cycles()));
  co_await devices_.phantom.stop_modulator();

  measure::PulseCapture capture;
  capture.set_point_ratio = set_point.ratio;
  capture.modulator_Hz = model_.modulator_Hz;
  capture.cycle_s = 4.0 * taken.slot_ns * 1e-9;
  for (const adapter::Cycle& cycle : taken.cycles) {
    capture.red.push_back(cycle.red);
    capture.dark_a.push_back(cycle.dark_after_red);
    capture.infrared.push_back(cycle.infrared);
    capture.dark_b.push_back(cycle.dark_after_infrared);
  }
  capture.drive_mA = {taken.drive.red_uA * 1e-3, taken.drive.infrared_uA * 1e-3};
  capture.temperature_C = temperature_C;
  book_.add(std::move(capture));
}

asio::awaitable<void> Routine::lid_stays_closed() {
  if (!(co_await devices_.phantom.lid_closed())) throw Disturbed({"lid_opened", "nest"});
}

namespace {

/// Returns when the lid is open; ends by cancellation otherwise.
asio::awaitable<void> lid_opens(phantom::Driver& phantom, wire::LineClock& clock) {
  for (;;) {
    co_await clock.dwell(lid_pause);
    const bool closed = co_await phantom.lid_closed();
    if (!closed) co_return;
  }
}

}  // namespace

/// A capture during which the lid is watched: the drive must go off soon when it is opened. Whichever ends first ends
/// the other, by an exception too (the operators `||` would wait for a success).
asio::awaitable<adapter::Capture> Routine::capture_watched(std::uint32_t cycles) {
  const auto executor = co_await asio::this_coro::executor;
  auto [order, capture_error, capture, lid_error] =
      co_await asio::experimental::make_parallel_group(
          asio::co_spawn(executor, devices_.adapter.capture(cycles), asio::deferred),
          asio::co_spawn(executor, lid_opens(devices_.phantom, clock_), asio::deferred))
          .async_wait(asio::experimental::wait_for_one(), asio::use_awaitable);
  if (order[0] == 0) {
    if (capture_error) std::rethrow_exception(capture_error);
    co_return std::move(capture);
  }
  if (lid_error) std::rethrow_exception(lid_error);
  throw Disturbed({"lid_opened", "nest"});
}

}  // namespace probewright::sequence
