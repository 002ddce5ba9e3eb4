#include "drivers/wire/recording_source.h"

#include "drivers/wire/recording_port.h"

namespace probewright::wire {
namespace {

using Kind = WireEvent::Kind;

/// Where one device's events go.
struct Notes final : TrafficSink {
  Notes(std::string of, const Clock& by, SteadyTime from, Recorder& into)
      : device(std::move(of)), clock(by), zero(from), recorder(into) {}
  void bytes(Direction direction, SteadyTime at, std::span<const std::byte> some) override {
    const Kind kind = direction == Direction::out ? Kind::sent : Kind::received;
    recorder.note(device, {at - zero, kind, {some.begin(), some.end()}, {}});
  }
  void lost(SteadyTime at, const std::string& why) override { recorder.note(device, {at - zero, Kind::lost, {}, why}); }
  void note(Kind kind, const std::string& words) {
    recorder.note(device, {clock.steady_now() - zero, kind, {}, words});
  }
  std::string device;
  const Clock& clock;
  SteadyTime zero;
  Recorder& recorder;
};

/// A recording port with the sink that it needs.
class NotingPort final : public ForwardingPort {
 public:
  NotingPort(std::unique_ptr<Port> port, std::shared_ptr<Notes> notes)
      : ForwardingPort(std::make_unique<RecordingPort>(std::move(port), notes->clock, *notes)),
        notes_(std::move(notes)) {}

 private:
  std::shared_ptr<Notes> notes_;
};

asio::awaitable<std::unique_ptr<Port>> open_noted(PortSource source, std::shared_ptr<Notes> notes) {
  try {
    auto port = co_await source();
    notes->note(Kind::opened, port->name());
    co_return std::make_unique<NotingPort>(std::move(port), notes);
  } catch (const ProblemError& refused) {
    notes->note(Kind::not_opened, words_of_problem(refused.problem()));
    throw;
  } catch (const PortLost& lost) {
    notes->note(Kind::not_opened, lost.why());
    throw;
  }
}

}  // namespace

PortSource recording_source(PortSource source, std::string device, const Clock& clock, SteadyTime zero,
                            Recorder& recorder) {
  auto notes = std::make_shared<Notes>(std::move(device), clock, zero, recorder);
  return [source = std::move(source), notes] { return open_noted(source, notes); };
}

}  // namespace probewright::wire
