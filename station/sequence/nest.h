#pragma once
#include <boost/asio/awaitable.hpp>
#include <boost/asio/cancellation_signal.hpp>
#include <functional>
#include <memory>
#include <optional>
#include <string>

#include "drivers/adapter/driver.h"
#include "drivers/phantom/driver.h"
#include "station/sequence/configuration.h"
#include "station/sequence/line_services.h"
#include "station/sequence/routine.h"
#include "station/sequence/run_book.h"

namespace probewright::sequence {

/// One nest: its two devices, what sits in it, what it is armed for, and the run that it makes. Line thread only.
///
/// A run starts only when the nest was seen empty since the run before, a serial was scanned for it, and the probe then
/// appeared to both devices under a closed lid.
class Nest {
 public:
  /// `configuration` and `services` outlive the nest.
  Nest(const Configuration& configuration, const NestPlace& place, const PortOpener& ports, LineServices& services);

  /// Keeps the devices connected, watches the nest, makes runs. Never returns; ends by cancellation (after finish()).
  asio::awaitable<void> live();

  /// Arms the nest for a serial; whether that serial may have such a run was asked before. Problems: nest_not_ready,
  /// nest_busy, nest_occupied, serial_unknown.
  Result<void> arm(const ArmNest& request);
  /// Takes the arming back or stops the run. False when there was neither.
  bool stop(const std::string& who);
  bool running() const { return view_.state == NestState::running; }
  /// The serial that it is armed for or tests; empty: none.
  const std::string& serial() const { return view_.serial; }
  const NestView& view() const { return view_; }
  BerthView berth() const;

  /// Called when a probe appears in this nest though nothing is armed here.
  void on_stray(std::function<void(int nest)> stray) { stray_ = std::move(stray); }
  /// Ends an arming because the probe was put elsewhere.
  void probe_went_to(int other_nest);

 private:
  struct Armed {
    ArmNest request;
    const Documented<measure::Model>* model;
    const Documented<limits::Sheet>* sheet;
    SteadyTime until;
  };
  /// What both devices say of the nest.
  struct Seen {
    phantom::NestState phantom;
    adapter::Presence adapter;
    bool any() const { return phantom.probe.present || adapter.present; }
    bool both() const { return phantom.probe.present && adapter.present; }
  };

  asio::awaitable<void> watch();
  asio::awaitable<void> look();
  std::optional<Problem> not_ready() const;
  std::optional<Problem> certificate_ended(const measure::CertificateHead& head) const;
  void show();
  NestView view_now() const;
  std::string armed_words() const;
  void end_arming(Problem problem);

  asio::awaitable<void> run(Armed armed);
  asio::awaitable<Ending> make_run(const Armed& armed, RunBook& book);
  asio::awaitable<void> gather(const Armed& armed, RunBook& book);
  asio::awaitable<void> make_dark(Ending& ending, bool& drive_off);
  db::RunOpened opening_of(const Armed& armed) const;
  void not_recorded(const Armed& armed, const Problem& problem);
  void begin_berth(const Armed& armed);
  void look_at(const Armed& armed, const RunBook& book);
  void keep_last(const RunOutcome& outcome);

  const Configuration& configuration_;
  const NestPlace place_;
  LineServices& services_;
  const Documented<measure::PhantomCertificate>& phantom_certificate_;
  const Documented<measure::AdapterCertificate>& adapter_certificate_;
  phantom::Driver phantom_;
  adapter::Driver adapter_;

  std::optional<Seen> seen_;  ///< nothing while a device is missing
  std::optional<double> temperature_C_;
  bool seen_empty_ = false;  ///< since the last run
  std::optional<Armed> armed_;
  std::unique_ptr<asio::cancellation_signal> stop_run_;
  bool stopped_ = false;
  std::string stopped_by_;
  std::function<void(int)> stray_;
  NestView view_;
  BerthView berth_;  ///< of the run that goes on or of the last one; the nest's own state is put in when asked
  SteadyTime run_began_;
};

}  // namespace probewright::sequence
