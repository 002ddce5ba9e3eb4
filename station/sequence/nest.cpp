#include "station/sequence/nest.h"

#include <algorithm>
#include <array>
#include <boost/asio/bind_cancellation_slot.hpp>
#include <boost/asio/co_spawn.hpp>
#include <boost/asio/deferred.hpp>
#include <boost/asio/experimental/parallel_group.hpp>
#include <boost/asio/this_coro.hpp>
#include <boost/asio/use_awaitable.hpp>

#include "station/sequence/berth_marks.h"
#include "station/sequence/device_settings.h"

namespace probewright::sequence {
namespace {

/// Between two looks at an idle nest, device time: at most 20 looks a second.
constexpr Duration look_pause = std::chrono::milliseconds(50);
/// How long a scan arms a nest, real time: a person puts the probe in.
constexpr Duration armed_for = std::chrono::seconds(20);

db::RunDevice device_of(std::string role, const wire::Identity& identity, const DocumentText& certificate) {
  const std::string name = identity.maker + " " + identity.model + " " + identity.serial;
  return {std::move(role), name, identity.firmware, identity.certificate, certificate.digest};
}

/// What a run that ends with this problem ends by. A lost device, a refusal, an odd answer: all a device's cause.
Ending device_ending(const Problem& problem) { return {EndedBy::device, problem.id, problem.text()}; }

}  // namespace

Nest::Nest(const Configuration& configuration, const NestPlace& place, const PortOpener& ports, LineServices& services)
    : configuration_(configuration),
      place_(place),
      services_(services),
      phantom_certificate_(configuration.phantom_certificates.find(place.phantom.certificate)->second),
      adapter_certificate_(configuration.adapter_certificates.find(place.adapter.certificate)->second),
      phantom_(phantom_settings(phantom_certificate_.value, configuration.station.value, place.nest),
               ports(place.phantom, place.nest, DeviceKind::phantom), services.clock, services.entropy),
      adapter_(adapter_settings(adapter_certificate_.value, configuration.station.value, place.nest),
               ports(place.adapter, place.nest, DeviceKind::adapter), services.clock, services.entropy) {
  view_ = view_now();
}

asio::awaitable<void> Nest::live() {
  const auto executor = co_await asio::this_coro::executor;
  const auto [order, phantom_ended, adapter_ended, watch_ended] =
      co_await asio::experimental::make_parallel_group(
          asio::co_spawn(executor, phantom_.keep_connected(), asio::deferred),
          asio::co_spawn(executor, adapter_.keep_connected(), asio::deferred),
          asio::co_spawn(executor, watch(), asio::deferred))
          .async_wait(asio::experimental::wait_for_one(), asio::use_awaitable);
  // None of them returns: the first that ended tells why the nest ends.
  std::rethrow_exception(std::array{phantom_ended, adapter_ended, watch_ended}[order[0]]);
}

asio::awaitable<void> Nest::watch() {
  for (;;) {
    co_await look();
    if (armed_ && not_ready()) end_arming(*not_ready());
    if (armed_ && seen_ && seen_->both() && seen_->phantom.lid_closed) {
      Armed armed = *std::exchange(armed_, std::nullopt);
      co_await run(std::move(armed));
    } else if (armed_ && services_.clock.steady_now() >= armed_->until) {
      end_arming({"arming_ended", nest_name(place_.nest), {{"serial", armed_->request.serial}}});
    }
    show();
    co_await services_.clock.dwell(look_pause);
  }
}

asio::awaitable<void> Nest::look() {
  if (!phantom_.connected() || !adapter_.connected()) {
    seen_.reset();
    seen_empty_ = false;  // a probe may be exchanged while nobody looks
    co_return;
  }
  try {
    Seen seen;
    seen.phantom = co_await phantom_.nest_state();
    seen.adapter = co_await adapter_.presence();
    if (!temperature_C_) temperature_C_ = co_await phantom_.temperature_degC();
    if (!seen.any()) seen_empty_ = true;
    const bool appeared = seen.any() && seen_ && !seen_->any();
    seen_ = seen;
    if (appeared && !armed_ && stray_) stray_(place_.nest);
  } catch (const ProblemError&) {
    seen_.reset();  // the driver keeps the problem and looks for the device
    seen_empty_ = false;
  }
}

std::optional<Problem> Nest::certificate_ended(const measure::CertificateHead& head) const {
  if (services_.zone.day(services_.clock.utc_now()) <= head.due) return std::nullopt;
  return Problem{"certificate_ended", nest_name(place_.nest), {{"number", head.number}, {"due", head.due}}};
}

std::optional<Problem> Nest::not_ready() const {
  if (services_.ledger.trouble()) return *services_.ledger.trouble();
  if (auto ended = certificate_ended(phantom_certificate_.value.head)) return ended;
  if (auto ended = certificate_ended(adapter_certificate_.value.head)) return ended;
  if (phantom_.trouble()) return *phantom_.trouble();
  if (adapter_.trouble()) return *adapter_.trouble();
  if (!seen_) return Problem{"nest_connecting", nest_name(place_.nest)};
  return std::nullopt;
}

Result<void> Nest::arm(const ArmNest& request) {
  const std::string where = nest_name(place_.nest);
  if (running()) return Problem{"nest_busy", where, {{"serial", view_.serial}}};
  if (auto problem = not_ready()) return *problem;
  const auto* model = configuration_.model_of(request.serial);
  if (!model) return Problem{"serial_unknown", where, {{"serial", request.serial}}};
  if (seen_->any() || !seen_empty_) return Problem{"nest_occupied", where, {{"serial", request.serial}}};
  const auto& sheet = configuration_.sheets.find(model->value.name)->second;
  armed_ = Armed{request, model, &sheet, services_.clock.steady_now() + armed_for};
  show();
  return {};
}

bool Nest::stop(const std::string& who) {
  if (armed_) {
    end_arming({"arming_taken_back", nest_name(place_.nest), {{"serial", armed_->request.serial}, {"who", who}}});
    return true;
  }
  if (!stop_run_) return false;
  stopped_ = true;  // heard before the first device command, too
  stopped_by_ = who;
  stop_run_->emit(asio::cancellation_type::terminal);
  return true;
}

void Nest::probe_went_to(int other_nest) {
  if (!armed_) return;
  end_arming({"probe_in_other_nest",
              nest_name(place_.nest),
              {{"serial", armed_->request.serial}, {"other", std::to_string(other_nest)}}});
}

void Nest::end_arming(Problem problem) {
  const ArmingEnded ended{place_.nest, armed_->request.serial, std::move(problem)};
  armed_.reset();
  services_.tell(ended);
  show();
}

std::string Nest::armed_words() const {
  const std::string put = "put probe " + armed_->request.serial + " into " + nest_name(place_.nest);
  if (!seen_ || !seen_->any()) return put;
  if (!seen_->adapter.present) return "plug probe " + armed_->request.serial + " into the adapter";
  if (!seen_->phantom.probe.present) return put;
  return "close the lid";
}

NestView Nest::view_now() const {
  NestView view = view_;
  view.nest = place_.nest;
  if (stop_run_) return view;  // the routine tells how far it is
  view.doing.clear();
  view.serial.clear();
  view.stage = view.stages = 0;
  if (const auto problem = not_ready()) {
    view.state = NestState::not_ready;
    view.words = problem->text();
  } else if (armed_) {
    view.state = NestState::armed;
    view.serial = armed_->request.serial;
    view.words = armed_words();
  } else if (seen_->any() || !seen_empty_) {
    view.state = NestState::occupied;
    view.words = "take the probe out of " + nest_name(place_.nest);
  } else {
    view.state = NestState::empty;
    view.words = "scan a probe";
  }
  return view;
}

void Nest::show() {
  NestView view = view_now();
  const bool same = view.state == view_.state && view.words == view_.words && view.serial == view_.serial &&
                    view.stage == view_.stage;
  view_ = std::move(view);
  if (!same) services_.tell(NestChanged{view_});
}

db::RunOpened Nest::opening_of(const Armed& armed) const {
  db::RunOpened opening;
  opening.serial = armed.request.serial;
  opening.purpose = slug(armed.request.purpose);
  opening.emulated = phantom_.identity().emulated || adapter_.identity().emulated;
  opening.lot = armed.request.lot;
  opening.model = armed.model->value.name;
  opening.nest = place_.nest;
  opening.station = configuration_.station.value.station;
  opening.operator_name = armed.request.operator_name;
  opening.devices = {device_of("phantom", phantom_.identity(), phantom_certificate_.document),
                     device_of("adapter", adapter_.identity(), adapter_certificate_.document)};
  opening.software_version = services_.software.version;
  opening.software_commit = services_.software.commit;
  opening.compiler = services_.software.compiler;
  opening.ambient_temperature_C = temperature_C_;
  return opening;
}

/// From the opening entry to the verdict told. Nothing escapes but cancellation of the whole nest.
asio::awaitable<void> Nest::run(Armed armed) {
  const RunDocuments documents{configuration_.station, *armed.model,
                               *armed.sheet,           phantom_certificate_,
                               adapter_certificate_,   configuration_.diagnosis ? &*configuration_.diagnosis : nullptr};
  RunBook book{services_.ledger, documents};
  stop_run_ = std::make_unique<asio::cancellation_signal>();
  stopped_ = false;
  stopped_by_.clear();
  seen_empty_ = false;
  view_.state = NestState::running;
  view_.serial = armed.request.serial;
  view_.words = "testing " + armed.request.serial;
  begin_berth(armed);
  std::optional<Problem> unrecorded;
  try {
    co_await book.open(opening_of(armed));
    services_.tell(RunStarted{place_.nest, armed.request.serial, book.run()});
    const SteadyTime first_command = services_.clock.steady_now();
    const wire::LineCounts phantom_before = phantom_.counts(), adapter_before = adapter_.counts();
    Ending ending = co_await make_run(armed, book);
    bool drive_off = false;
    co_await make_dark(ending, drive_off);
    if (services_.ledger.trouble()) throw ProblemError(*services_.ledger.trouble());
    const auto asked_again = static_cast<std::int64_t>(phantom_.counts().asked_again - phantom_before.asked_again +
                                                       adapter_.counts().asked_again - adapter_before.asked_again);
    Body bench{Body::Object{
        {"asked_again", asked_again},
        {"cycle_us", static_cast<std::int64_t>(seconds(services_.clock.steady_now() - first_command) * 1e6 *
                                               services_.clock.speed())},
        {"drive_off_confirmed", drive_off},
        {"fences", static_cast<std::int64_t>(phantom_.counts().fences - phantom_before.fences)},
        {"stopped_by", stopped_by_},
    }};
    RunOutcome outcome = co_await book.close(std::move(ending), std::move(bench));
    outcome.cycle = services_.clock.steady_now() - first_command;
    outcome.asked_again = static_cast<int>(asked_again);
    look_at(armed, book);
    keep_last(outcome);
    stop_run_.reset();
    services_.tell(RunEnded{std::move(outcome)});
  } catch (const ProblemError& error) {
    unrecorded = error.problem();
  }
  stop_run_.reset();
  temperature_C_.reset();  // read anew before the next run
  if (unrecorded) not_recorded(armed, *unrecorded);
}

void Nest::begin_berth(const Armed& armed) {
  berth_ = BerthView{};
  berth_.passage = passage_of(armed.model->value);
  run_began_ = services_.clock.steady_now();
}

void Nest::look_at(const Armed& armed, const RunBook& book) {
  mark_done(berth_.passage, book.readings());
  berth_.marks = rail_marks(book.readings(), armed.sheet->value);
  if (auto plots = plots_of(book.captures(), phantom_certificate_.value)) berth_.plots = std::move(plots);
}

void Nest::keep_last(const RunOutcome& outcome) {
  LastRun last;
  last.run = outcome.run;
  last.serial = outcome.serial;
  last.purpose = outcome.purpose;
  last.verdict = outcome.verdict;
  last.cause = outcome.cause;
  last.cause_words = outcome.cause_words;
  last.likely_cause = outcome.likely.words;
  last.what_to_do = what_to_do(outcome);
  last.decided_by = decided_by(outcome.readings);
  last.cycle_s = seconds(outcome.cycle) * services_.clock.speed();
  berth_.progress = 1.0;
  berth_.last = std::move(last);
}

BerthView Nest::berth() const {
  BerthView berth = berth_;
  berth.nest = view_;
  if (running()) {
    const double elapsed_s = seconds(services_.clock.steady_now() - run_began_) * services_.clock.speed();
    const double whole_s = expected_s(berth_.passage);
    berth.progress = whole_s > 0.0 ? std::min(0.98, elapsed_s / whole_s) : 0.0;
    return berth;
  }
  berth.trouble = not_ready();
  if (armed_)
    berth.armed_left_s = std::max(0, static_cast<int>(seconds(armed_->until - services_.clock.steady_now()) + 0.999));
  return berth;
}

void Nest::not_recorded(const Armed& armed, const Problem& problem) {
  LastRun last;
  last.serial = armed.request.serial;
  last.purpose = armed.request.purpose;
  last.recorded = false;
  last.cause = problem.id;
  last.cause_words = problem.what();
  last.what_to_do = "take the probe out and keep it apart: this run is not on record";
  berth_.last = std::move(last);
  services_.tell(RunNotRecorded{place_.nest, armed.request.serial, problem});
}

/// The boundary of a run: here every way that it can end becomes an Ending.
asio::awaitable<Ending> Nest::make_run(const Armed& armed, RunBook& book) {
  const auto executor = co_await asio::this_coro::executor;
  Ending ending;
  if (stopped_) co_return Ending{EndedBy::person_or_probe, "stopped_by_person", "stopped by " + stopped_by_};
  try {
    co_await asio::co_spawn(executor, gather(armed, book),
                            asio::bind_cancellation_slot(stop_run_->slot(), asio::use_awaitable));
  } catch (const Disturbed& disturbed) {
    ending = {EndedBy::person_or_probe, disturbed.problem().id, disturbed.problem().text()};
  } catch (const ProblemError& error) {
    ending = device_ending(error.problem());
  } catch (const boost::system::system_error& error) {
    if (error.code() != asio::error::operation_aborted) throw;
    ending = {EndedBy::person_or_probe, "stopped_by_person", "stopped by " + stopped_by_};
  } catch (const std::exception& error) {
    ending = device_ending({"our_bug", nest_name(place_.nest), {{"what", error.what()}}});
  }
  co_return ending;
}

asio::awaitable<void> Nest::gather(const Armed& armed, RunBook& book) {
  const measure::Model& model = armed.model->value;
  co_await prepare_adapter(adapter_, model);
  const Insertions insertions{seen_->phantom.probe.insertions, seen_->adapter.insertions};
  Routine routine{{phantom_, adapter_},
                  model,
                  phantom_certificate_.value,
                  insertions,
                  services_.clock,
                  book,
                  [this, &armed, &book](std::string_view doing, int stage, int stages) {
                    look_at(armed, book);
                    view_.doing = doing;
                    view_.stage = stage;
                    view_.stages = stages;
                    services_.tell(NestChanged{view_});
                  }};
  co_await routine.gather();
}

/// LEDs off however the run ended; after one that did not go through, the phantom back to its reset settings too.
asio::awaitable<void> Nest::make_dark(Ending& ending, bool& drive_off) {
  drive_off = co_await adapter_.drive_off();
  if (ending.by == EndedBy::completion) co_return;
  try {
    if (phantom_.connected()) co_await phantom_.reset();
  } catch (const ProblemError&) {
    // The driver keeps the problem; connecting anew resets the device.
  }
}

}  // namespace probewright::sequence
