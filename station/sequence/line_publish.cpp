#include <algorithm>

#include "station/sequence/line.h"

// The line as people see it.
namespace probewright::sequence {
namespace {

/// The certificate that ends first, "PHC-2026-0101 on 2027-06-30".
std::string next_due_of(const Configuration& configuration) {
  std::string due, words;
  const auto look = [&](const measure::CertificateHead& head) {
    if (!due.empty() && head.due >= due) return;
    due = head.due;
    words = head.number + " on " + head.due;
  };
  for (const NestPlace& place : configuration.station.value.nests) {
    look(configuration.phantom_certificates.find(place.phantom.certificate)->second.value.head);
    look(configuration.adapter_certificates.find(place.adapter.certificate)->second.value.head);
  }
  return words;
}

}  // namespace

LineView Line::view() const {
  const StationFile& station = configuration_.station.value;
  LineView view;
  view.revision = revision_;
  view.at = services_.clock.utc_now();
  view.station = station.station;
  view.zone = station.zone;
  view.emulated = station.emulated;
  view.speed = station.speed;
  view.next_due = next_due_of(configuration_);
  view.person = floor_.person();
  view.lot = floor_.lot_view();
  for (const Place& place : places_) view.berths.push_back(place.nest->berth());
  if (services_.ledger.trouble()) view.trouble = services_.ledger.trouble();
  for (const BerthView& berth : view.berths)
    if (!view.trouble && berth.trouble) view.trouble = berth.trouble;
  view.tally = floor_.tally();
  view.scan = scan_;
  return view;
}

asio::awaitable<void> Line::publish() {
  const Duration pause = from_seconds(1.0 / services_.views_per_s);
  for (;;) {
    // While a run goes on its progress moves, while a nest is armed its time runs out.
    const bool moving = std::any_of(places_.begin(), places_.end(), [](const Place& place) {
      return place.nest->view().state == NestState::running || place.nest->view().state == NestState::armed;
    });
    if (changed_ || moving) {
      changed_ = false;
      ++revision_;
      services_.show(std::make_shared<const LineView>(view()));
    }
    co_await services_.clock.wait_until(services_.clock.steady_now() + pause);
  }
}

}  // namespace probewright::sequence
