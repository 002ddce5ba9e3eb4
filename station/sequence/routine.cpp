#include "station/sequence/routine.h"

#include <algorithm>
#include <array>
#include <boost/asio/co_spawn.hpp>
#include <boost/asio/deferred.hpp>
#include <boost/asio/experimental/parallel_group.hpp>
#include <boost/asio/this_coro.hpp>
#include <boost/asio/use_awaitable.hpp>
#include <cmath>

#include "station/base/catalogue.h"
#include "station/base/numbers.h"
#include "station/measure/exposure.h"
#include "station/measure/hard_fault.h"

namespace probewright::sequence {
namespace {

using measure::Band;

constexpr bool on_adapter = true, on_phantom = false;
constexpr int most_exposures = 4;
/// How often the lid is looked at while the phantom has nothing else to do.
constexpr Duration lid_pause = std::chrono::milliseconds(100);
/// Device time that no run takes, however often it has to ask again.
constexpr Duration longest_run = std::chrono::minutes(10);
/// Of an LED's die after a moment at another drive: ten of its time constants.
constexpr double recovery_s = 0.050;
/// Of the phantom's optics after a change of modulation; a moving blade takes 100 ms of it.
constexpr double settling_s = 0.150, settling_after_blade_s = 0.050;

constexpr std::uint32_t microamperes(double mA) { return static_cast<std::uint32_t>(mA * 1000.0 + 0.5); }
constexpr std::uint16_t thousandths(double value) { return static_cast<std::uint16_t>(value * 1000.0 + 0.5); }
adapter::Led led_of(Band band) { return band == Band::red ? adapter::Led::red : adapter::Led::infrared; }

measure::ForwardVoltage forward_voltage(const adapter::ForwardVoltage& told, double set_mA) {
  return {set_mA, told.delivered_nA * 1e-6, told.voltage_uV * 1e-6, told.at_compliance};
}

std::string ratio_words(const measure::SetPoint& set_point) { return fixed(set_point.ratio, 1); }

/// Slots as the adapter sent them, for every kind of capture that holds all four.
template <class Capture>
void take_slots(Capture& into, const adapter::Capture& taken) {
  into.cycle_s = 4.0 * taken.slot_ns * 1e-9;
  for (const adapter::Cycle& cycle : taken.cycles) {
    into.red.push_back(cycle.red);
    into.dark_a.push_back(cycle.dark_after_red);
    into.infrared.push_back(cycle.infrared);
    into.dark_b.push_back(cycle.dark_after_infrared);
  }
  into.drive_mA = {taken.drive.red_uA * 1e-3, taken.drive.infrared_uA * 1e-3};
}

void take_dark_slots(const adapter::Capture& taken, std::vector<std::int32_t>& a, std::vector<std::int32_t>& b) {
  for (const adapter::Cycle& cycle : taken.cycles) {
    a.push_back(cycle.dark_after_red);
    b.push_back(cycle.dark_after_infrared);
  }
}

/// Runs both at the same time and waits for both; the first that fails ends the other and is what is thrown.
asio::awaitable<void> both(asio::awaitable<void> one, asio::awaitable<void> other) {
  const auto executor = co_await asio::this_coro::executor;
  const auto [order, one_error, other_error] =
      co_await asio::experimental::make_parallel_group(asio::co_spawn(executor, std::move(one), asio::deferred),
                                                       asio::co_spawn(executor, std::move(other), asio::deferred))
          .async_wait(asio::experimental::wait_for_one_error(), asio::use_awaitable);
  const std::array errors{one_error, other_error};
  for (const std::size_t i : order)
    if (errors[i]) std::rethrow_exception(errors[i]);
}

/// Throws Disturbed when the lid is open; ends by cancellation otherwise.
asio::awaitable<void> watch_lid(phantom::Driver& phantom, wire::LineClock& clock) {
  for (;;) {
    co_await clock.dwell(lid_pause);
    if (!(co_await phantom.lid_closed())) throw Disturbed({"lid_opened", "nest"});
  }
}

}  // namespace

asio::awaitable<void> prepare_adapter(adapter::Driver& adapter, const measure::Model& model) {
  adapter.set_ceiling({microamperes(model.ceiling_mA), microamperes(model.ceiling_mA)});
  const auto slot_ns = static_cast<std::uint32_t>(model.slot_s * 1e9 + 0.5);
  if (adapter.slot_ns() != slot_ns) co_await adapter.set_timing(slot_ns);
}

class Routine::Going {
 public:
  Going(Routine& routine, std::string name, bool of_adapter, std::vector<Precedence> after = {})
      : routine_(routine),
        step_{std::move(name), of_adapter, std::move(after), routine.clock_.steady_now(), routine.clock_.steady_now()} {
  }
  Going(const Going&) = delete;
  Going& operator=(const Going&) = delete;
  ~Going() {
    step_.to = routine_.clock_.steady_now();
    routine_.book_.note(std::move(step_));
  }

 private:
  Routine& routine_;
  RunStep step_;
};

Routine::Routine(NestDevices devices, const measure::Model& model, const measure::PhantomCertificate& certificate,
                 Insertions insertions, wire::LineClock& clock, CaptureBook& book, Progress progress)
    : devices_(devices),
      model_(model),
      certificate_(certificate),
      insertions_(insertions),
      clock_(clock),
      book_(book),
      progress_(std::move(progress)) {}

/// The work, while the lid is watched and the adapter is asked again and again whether the LEDs are driven as set: an
/// exchange with the phantom that must be tried again takes longer than the adapter's watchdog. Whichever ends first
/// ends the others, by an exception too (the operators `||` would wait for a success).
asio::awaitable<void> Routine::gather() {
  const auto executor = co_await asio::this_coro::executor;
  const auto [order, work_error, keeper_error, lid_error] =
      co_await asio::experimental::make_parallel_group(
          asio::co_spawn(executor, gather_all(), asio::deferred),
          asio::co_spawn(executor, devices_.adapter.dwell_driven(longest_run), asio::deferred),
          asio::co_spawn(executor, watch_lid(devices_.phantom, clock_), asio::deferred))
          .async_wait(asio::experimental::wait_for_one(), asio::use_awaitable);
  const std::array errors{work_error, keeper_error, lid_error};
  const std::exception_ptr& error = errors[order[0]];
  if (error) std::rethrow_exception(error);
  if (order[0] != 0) throw ProblemError({"run_too_long", "nest"});
}

asio::awaitable<void> Routine::gather_all() {
  begin_stage("contact and dark current");
  co_await both(take_dark(), prepare_phantom());
  add_dark();

  co_await take_infrared_alone();
  co_await take_red_alone();
  const bool shine = co_await both_shine();
  if (!shine) co_return;  // an LED that cannot shine has no spectrum and no pulses

  begin_stage("ambient light and closed path");
  co_await both(take_around(), settle_book());
  co_await take_all_pulses(model_.set_points_in_order());
}

// --- stages

void Routine::begin_stage(std::string_view doing) {
  const auto captures = static_cast<int>(model_.needed_set_points().size());
  progress_(doing, ++stage_, 3 + std::max(1, captures));
}

/// Readings of a stage count as made only when the probe was in its place, driven and in the dark, up to its end.
asio::awaitable<void> Routine::check_stage() { return both(check_adapter(), check_phantom()); }

asio::awaitable<void> Routine::check_adapter() {
  const Going step{*this, "adapter after stage " + std::to_string(stage_), on_adapter};
  co_await devices_.adapter.require_drive();
  const adapter::Presence plug = co_await devices_.adapter.presence();
  if (!plug.present) throw Disturbed({"probe_unplugged", "nest"});
  if (plug.insertions != insertions_.adapter) throw Disturbed({"probe_exchanged", "nest"});
}

asio::awaitable<void> Routine::check_phantom() {
  const Going step{*this, "phantom after stage " + std::to_string(stage_), on_phantom};
  const phantom::NestState nest = co_await devices_.phantom.nest_state();
  if (!nest.lid_closed) throw Disturbed({"lid_opened", "nest"});
  if (!nest.probe.present) throw Disturbed({"probe_unplugged", "nest"});
  if (nest.probe.insertions != insertions_.phantom) throw Disturbed({"probe_exchanged", "nest"});
}

/// Evaluates what the stage brought. Called where the devices are at work anyway.
asio::awaitable<void> Routine::settle_book() {
  book_.stage_done();
  co_return;
}

// --- LEDs off

/// What wants the LEDs off.
asio::awaitable<void> Routine::take_dark() {
  const Going step{*this, "dark", on_adapter};
  auto& adapter = devices_.adapter;
  contact_.present_adapter = (co_await adapter.presence()).present;
  if (model_.has_check("mains_pickup"))
    contact_.mains_pickup_nA = (co_await adapter.mains_pickup_pA(thousandths(model_.mains_time_s))) * 1e-3;
  for (const Band band : {Band::red, Band::infrared}) {
    if (!model_.has_check(std::string{slug(band)} + "_reverse_leakage")) continue;
    const auto leakage = co_await adapter.reverse_leakage(led_of(band), thousandths(model_.reverse_bias_V));
    if (!leakage.not_separate) contact_.led.of(band).reverse_leakage_uA = leakage.leakage_pA * 1e-6;
  }
  if (!(model_.needs() & needs_dark)) co_return;
  const auto bias_mV = thousandths(model_.dark_bias_V);
  const auto time_ms = thousandths(model_.dark_time_s);
  dark_connected_ = co_await adapter.dark_current(bias_mV, time_ms, adapter::Input::connected);
  dark_open_ = co_await adapter.dark_current(bias_mV, time_ms, adapter::Input::open);
}

/// What the phantom can do meanwhile. Nothing of it lets light in.
asio::awaitable<void> Routine::prepare_phantom() {
  const Going step{*this, "prepare", on_phantom};
  auto& phantom = devices_.phantom;
  contact_.present_phantom = (co_await phantom.nest_state()).probe.present;
  temperature_C_ = co_await phantom.temperature_degC();
  if (model_.needs() & needs_pulses) stored_set_points_ = co_await phantom.set_points();
  if (!model_.wants_red_alone()) co_return;
  dark_frame_ = co_await phantom.spectrum(setting(model_.exposure_start_s, phantom::Shutter::closed));
  co_await phantom.set_spectrometer(setting(model_.exposure_start_s, phantom::Shutter::open));
}

void Routine::add_dark() {
  contact_.temperature_C = temperature_C_;
  if (!(model_.needs() & needs_dark)) return;
  measure::DarkCapture dark;
  dark.connected_nA = dark_connected_.current_pA * 1e-3;
  dark.connected_sd_nA = dark_connected_.sd_pA * 1e-3;
  dark.open_nA = dark_open_.current_pA * 1e-3;
  dark.open_sd_nA = dark_open_.sd_pA * 1e-3;
  dark.bias_V = model_.dark_bias_V;
  dark.averaged_s = model_.dark_time_s;
  dark.temperature_C = temperature_C_;
  book_.add(dark);
}

// --- one LED alone

asio::awaitable<void> Routine::take_infrared_alone() {
  {
    const Going step{*this, "infrared on", on_adapter, {{"prepare"}}};
    co_await devices_.adapter.drive({0, microamperes(model_.drive_mA.infrared)});
  }
  co_await check_stage();
  begin_stage("one LED alone");
  co_await both(take_slots_alone(Band::infrared), settle_book());
}

/// Infrared was first, since its warm-up is not judged: an LED that was lit just now is not cold any more.
asio::awaitable<void> Routine::take_red_alone() {
  {
    const Going step{*this, "red on", on_adapter};
    co_await devices_.adapter.drive({microamperes(model_.drive_mA.red), 0});
  }
  co_await both(take_slots_alone(Band::red), take_red_spectrum());
  if (!wants_crosstalk()) co_await devices_.adapter.require_drive();  // else the capture has seen to it
}

asio::awaitable<void> Routine::take_slots_alone(Band lit) {
  const std::string led{slug(lit)};
  const Going step{*this, led + " slots", on_adapter};
  if (lit == Band::infrared) {
    infrared_first_ = co_await devices_.adapter.forward_voltage(adapter::Led::infrared);
    if (!infrared_first_.at_compliance) contact_.led.infrared.first_voltage_V = infrared_first_.first_uV * 1e-6;
  }
  if (!wants_crosstalk()) co_return;
  measure::AloneSlotsCapture alone;
  alone.lit = lit;
  const adapter::Capture taken = co_await capture(model_.alone_slots->capture_s);
  take_slots(alone, taken);
  alone.temperature_C = temperature_C_;
  book_.add(std::move(alone));
}

asio::awaitable<void> Routine::take_red_spectrum() {
  if (!model_.wants_red_alone()) co_return;
  const Going step{*this, "red spectrum", on_phantom, {{"red on"}}};
  measure::SpectrumCapture red = co_await expose_light(Band::red, *dark_frame_);
  red = co_await exposed_well(Band::red, std::move(red));
  book_.add(measure::RedAloneCapture{std::move(red)});
}

// --- both LEDs, warming up

/// Whether both LEDs shine. One that cannot is a hard fault, and what has been found of it ends the run.
asio::awaitable<bool> Routine::both_shine() {
  {
    const Going step{*this, "both on", on_adapter, {{"red spectrum"}}};
    co_await devices_.adapter.drive({microamperes(model_.drive_mA.red), microamperes(model_.drive_mA.infrared)});
    both_on_ = clock_.steady_now();
  }
  co_await take_contact();
  co_await check_stage();
  const bool dead = contact_.led.red.at_drive.has_value();
  if (dead) book_.stage_done();
  co_return !dead;
}

asio::awaitable<void> Routine::take_contact() {
  const Going step{*this, "contact", on_adapter};
  auto& adapter = devices_.adapter;
  const adapter::IdResistance id = co_await adapter.id_resistance();
  contact_.id_open = id.open;
  if (!id.open) contact_.id_resistance_ohm = id.resistance_milliohm * 1e-3;
  const adapter::ForwardVoltage red = co_await adapter.forward_voltage(adapter::Led::red);
  if (!red.at_compliance) contact_.led.red.first_voltage_V = red.first_uV * 1e-6;
  const measure::ForwardVoltage at_red = forward_voltage(red, model_.drive_mA.red),
                                at_infrared = forward_voltage(infrared_first_, model_.drive_mA.infrared);
  if (measure::cannot_shine(at_red) || measure::cannot_shine(at_infrared)) {
    contact_.led.red.at_drive = at_red;
    contact_.led.infrared.at_drive = at_infrared;
  }
  book_.add(contact_);
}

/// Light that reaches the detector around the phantom, from outside and from the LEDs.
asio::awaitable<void> Routine::take_around() {
  if (model_.ambient && model_.has_check("ambient_uptake")) co_await take_ambient();
  if (model_.closed_path && model_.has_check("closed_path_light")) co_await take_closed_path();
}

/// The lamp shines on the probe's outside; LEDs and blade stand alike in both captures.
asio::awaitable<void> Routine::take_ambient() {
  const measure::AmbientPlan& plan = *model_.ambient;
  measure::AmbientCapture ambient;
  ambient.lamp_level = plan.lamp_level;
  ambient.flicker_Hz = plan.flicker_Hz;
  ambient.temperature_C = temperature_C_;
  {
    const Going step{*this, "lamp off", on_adapter};
    const adapter::Capture taken = co_await capture(plan.capture_s);
    ambient.cycle_s = 4.0 * taken.slot_ns * 1e-9;
    take_dark_slots(taken, ambient.unlit_a, ambient.unlit_b);
  }
  {
    const Going step{*this, "lamp", on_phantom, {{"lamp off"}}};
    co_await devices_.phantom.lamp_on(plan.lamp_level, static_cast<int>(plan.flicker_Hz));
  }
  {
    const Going step{*this, "lamp on", on_adapter, {{"lamp"}}};
    const adapter::Capture taken = co_await capture(plan.capture_s);
    take_dark_slots(taken, ambient.lit_a, ambient.lit_b);
  }
  const Going step{*this, "lamp out", on_phantom, {{"lamp on"}}};
  co_await devices_.phantom.lamp_off();
  book_.add(std::move(ambient));
}

asio::awaitable<void> Routine::take_closed_path() {
  {
    const Going step{*this, "blade in", on_phantom};
    co_await devices_.phantom.set_opaque(true);
    blade_in_ = true;
    co_await devices_.phantom.wait_settled();
  }
  measure::ClosedPathCapture closed;
  {
    const Going step{*this, "closed path", on_adapter, {{"blade in", settling_after_blade_s}}};
    const adapter::Capture taken = co_await capture(model_.closed_path->capture_s);
    take_slots(closed, taken);
    closed.temperature_C = temperature_C_;
  }
  book_.add(std::move(closed));
}

// --- pulses

/// The blade, when it is in, comes out while the modulator starts. What must be known of one stage is asked for while
/// the optics settle for the next.
asio::awaitable<void> Routine::take_all_pulses(std::vector<measure::SetPoint> set_points) {
  const std::size_t count = set_points.size();
  for (std::size_t i = 0; i < count; ++i) {
    const bool last = i + 1 == count;
    co_await modulate(set_points[i], i > 0 ? "pulses " + ratio_words(set_points[i - 1]) : "closed path");
    co_await between_captures(i, count);
    begin_stage("pulses at ratio " + ratio_words(set_points[i]) +
                (last && model_.wants_red_alone() ? ", spectra" : ""));
    co_await devices_.phantom.wait_settled();
    co_await wait_since_both_on(last ? model_.warmup_s : model_.pulses_after_s);
    co_await clock_.wait_until(recovered_);
    if (last) {
      co_await both(take_pulses(set_points[i]), take_spectra());
    } else {
      co_await take_pulses(set_points[i]);
    }
  }
  if (count == 0) {
    co_await between_captures(0, 0);
    begin_stage("voltages and spectra");
    co_await take_spectra();
  } else {
    const Going step{*this, "modulator off", on_phantom, {{"pulses " + ratio_words(set_points.back())}}};
    co_await devices_.phantom.stop_modulator();
  }
  co_await check_stage();
  book_.stage_done();
}

asio::awaitable<void> Routine::modulate(measure::SetPoint set_point, std::string after) {
  phantom::Modulation modulation;
  modulation.set_point = stored(set_point);
  modulation.rate_Hz = model_.modulator_Hz;
  const Going step{*this, "modulator " + ratio_words(set_point), on_phantom, {{after}}};
  co_await devices_.phantom.modulate(modulation);
  settling_s_ = settling_s;
  if (!blade_in_) co_return;
  co_await devices_.phantom.set_opaque(false);
  blade_in_ = false;
  settling_s_ = settling_after_blade_s;
}

/// Warm voltages are read as late as they can be without taking time of their own; those at a quarter of the drive,
/// which cool the LEDs for a moment, one capture earlier.
asio::awaitable<void> Routine::between_captures(std::size_t next, std::size_t count) {
  co_await check_stage();
  book_.stage_done();
  const bool last = next + 1 >= count;
  if (last) {
    co_await wait_since_both_on(model_.warmup_s);
    co_await take_drive_voltages();
  }
  if (next + 2 == count || (last && count < 2)) co_await take_quarter_voltages();
  if (last) add_driven();
}

asio::awaitable<void> Routine::take_pulses(measure::SetPoint set_point) {
  measure::PulseCapture pulses;
  pulses.set_point_ratio = set_point.ratio;
  pulses.modulator_Hz = model_.modulator_Hz;
  {
    const std::string ratio = ratio_words(set_point);
    const Going step{
        *this,
        "pulses " + ratio,
        on_adapter,
        {{"modulator " + ratio, settling_s_}, {"both on", model_.pulses_after_s}, {"quarter voltages", recovery_s}}};
    const adapter::Capture taken = co_await capture(model_.pulse_capture_s);
    take_slots(pulses, taken);
  }
  pulses.temperature_C = temperature_C_;
  book_.add(std::move(pulses));
}

asio::awaitable<void> Routine::take_drive_voltages() {
  const Going step{*this, "drive voltages", on_adapter, {{"both on", model_.warmup_s}}};
  for (const Band band : {Band::red, Band::infrared}) {
    const adapter::ForwardVoltage told = co_await devices_.adapter.forward_voltage(led_of(band));
    driven_.led.of(band).at_drive = forward_voltage(told, model_.drive_mA.of(band));
    driven_.led.of(band).warm_voltage_V = told.voltage_uV * 1e-6;
  }
}

asio::awaitable<void> Routine::take_quarter_voltages() {
  const Going step{*this, "quarter voltages", on_adapter};
  for (const Band band : {Band::red, Band::infrared}) {
    const double quarter_mA = model_.quarter_drive_mA.of(band);
    const adapter::ForwardVoltage told =
        co_await devices_.adapter.forward_voltage_at(led_of(band), microamperes(quarter_mA));
    driven_.led.of(band).at_quarter = forward_voltage(told, quarter_mA);
  }
  recovered_ = clock_.steady_now() + from_seconds(recovery_s / clock_.speed());
}

void Routine::add_driven() {
  driven_.temperature_C = temperature_C_;
  book_.add(driven_);
}

// --- spectra

phantom::SpectrometerSetting Routine::setting(double exposure_s, phantom::Shutter shutter) const {
  phantom::SpectrometerSetting setting;
  setting.exposure_us = static_cast<std::uint32_t>(std::llround(exposure_s * 1e6));
  setting.frames = model_.frames;
  setting.shutter = shutter;
  return setting;
}

/// Both LEDs in their standard drive: a wavelength is defined for the probe as warm as that drive makes it, and each
/// line has its own window. Frames that are good for both bands serve both; else each band gets its own exposure.
asio::awaitable<void> Routine::take_spectra() {
  if (!model_.wants_red_alone()) co_return;
  const Going step{*this, "spectra", on_phantom, {{"both on", model_.warmup_s}}};
  measure::SpectrumCapture first = co_await expose(Band::red, model_.exposure_start_s);
  measure::SpectrumCapture red = co_await exposed_well(Band::red, std::move(first));
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

/// The dark frame and one light frame of the same exposure.
asio::awaitable<measure::SpectrumCapture> Routine::expose(Band band, double exposure_s) {
  phantom::Spectrum dark = co_await devices_.phantom.spectrum(setting(exposure_s, phantom::Shutter::closed));
  co_return co_await expose_light(band, std::move(dark));
}

asio::awaitable<measure::SpectrumCapture> Routine::expose_light(Band band, phantom::Spectrum dark) {
  phantom::SpectrometerSetting as_dark = dark.setting;
  as_dark.shutter = phantom::Shutter::open;
  const phantom::Spectrum light = co_await devices_.phantom.spectrum(as_dark);
  measure::SpectrumCapture capture;
  capture.light = light.counts;
  capture.dark = dark.counts;
  capture.pixel_was_full = light.any_pixel_full || dark.any_pixel_full;
  capture.exposure_s = as_dark.exposure_us * 1e-6;
  capture.frames = as_dark.frames;
  capture.temperature_C = light.temperature_degC;
  co_return of_band(std::move(capture), band);
}

/// The same frames as a capture of one band.
measure::SpectrumCapture Routine::of_band(measure::SpectrumCapture frames, Band band) const {
  frames.band = band;
  frames.drive_mA = model_.drive_mA.of(band);
  return frames;
}

// --- small things

asio::awaitable<void> Routine::wait_since_both_on(double time_s) {
  return clock_.wait_until(both_on_ + from_seconds(time_s / clock_.speed()));
}

asio::awaitable<adapter::Capture> Routine::capture(double time_s) {
  return devices_.adapter.capture(static_cast<std::uint32_t>(model_.cycles_for(time_s)));
}

/// Number under which the phantom stores this set point.
int Routine::stored(const measure::SetPoint& set_point) const {
  for (const phantom::SetPoint& point : stored_set_points_)
    if (std::abs(point.ratio - set_point.ratio) < 1e-6) return point.number;
  throw ProblemError({"set_point_not_stored", "phantom", {{"ratio", std::to_string(set_point.ratio)}}});
}

}  // namespace probewright::sequence
