#include "station/sequence/line_host.h"

#include <boost/asio/co_spawn.hpp>
#include <boost/asio/io_context.hpp>
#include <boost/asio/post.hpp>
#include <mutex>
#include <thread>

#include "drivers/wire/asio_clock.h"
#include "drivers/wire/serial_source.h"
#include "drivers/wire/thread_workers.h"
#include "station/sequence/line.h"

namespace probewright::sequence {

/// Everything stands in the order in which it may go: the thread is joined first, the context goes last.
struct LineHost::Inside {
  Inside(Configuration configuration_, LineHostOptions options_, Listener listener_)
      : configuration(std::move(configuration_)),
        options(std::move(options_)),
        listener(std::move(listener_)),
        clock(io.get_executor(), configuration.station.value.speed) {}

  void show(std::shared_ptr<const LineView> fresh) {
    {
      const std::lock_guard lock{view_lock};
      view = fresh;
    }
    if (listener.view) listener.view(std::move(fresh));
  }

  void broken(const std::exception_ptr& error) {
    try {
      std::rethrow_exception(error);
    } catch (const std::exception& known) {
      if (listener.broken) listener.broken(known.what());
    } catch (...) {
      if (listener.broken) listener.broken("an exception of an unknown kind");
    }
  }

  /// Line thread. Wakes up when the line has ended.
  void run() {
    try {
      io.run();
    } catch (...) {
      broken(std::current_exception());
    }
  }

  Configuration configuration;
  LineHostOptions options;
  Listener listener;
  boost::asio::io_context io{1};
  wire::AsioClock clock;
  SystemEntropy entropy;
  std::vector<ClosedLate> closed_late;
  std::string ledger_file;
  std::optional<wire::ThreadWorkers> ledger_thread;
  std::optional<LedgerWriter> ledger;
  std::optional<Line> line;

  std::mutex view_lock;
  std::shared_ptr<const LineView> view = std::make_shared<const LineView>();
  std::once_flag finished;
  std::thread thread;
};

LineHost::LineHost(std::unique_ptr<Inside> inside) : inside_(std::move(inside)) {}

Result<std::unique_ptr<LineHost>> LineHost::start(Configuration configuration, LineHostOptions options,
                                                  Listener listener) {
  auto inside = std::make_unique<Inside>(std::move(configuration), std::move(options), std::move(listener));
  Inside& in = *inside;
  const StationFile& station = in.configuration.station.value;
  in.ledger_file = in.options.ledger.empty() ? sequence::ledger_path(station) : in.options.ledger;
  auto zone = Zone::read(station.zone);
  if (!zone) return zone.error();
  auto start = start_ledger(ledger_options(station, in.ledger_file, in.options.software), in.clock);
  if (!start) return start.error();
  in.closed_late = std::move(start->closed_late);
  in.ledger_thread.emplace();
  in.ledger.emplace(std::move(start->store), *in.ledger_thread, in.io.get_executor());
  const PortOpener ports = [&in](const DevicePlace& place, int, DeviceKind) {
    const StationFile& file = in.configuration.station.value;
    return wire::serial_source(in.io.get_executor(), in.clock, port_path(file, place, in.options.ports), file.baud);
  };
  LineServices services{
      in.clock, in.entropy, *in.ledger, in.options.software, *std::move(zone), [&in](const LineEvent& event) {
        if (in.listener.event) in.listener.event(event);
      }};
  if (in.options.views_per_s > 0.0) {
    services.views_per_s = in.options.views_per_s;
    services.show = [&in](std::shared_ptr<const LineView> view) { in.show(std::move(view)); };
  }
  in.line.emplace(in.configuration, ports, std::move(services));
  in.view = std::make_shared<const LineView>(in.line->view());
  in.line->start(in.io.get_executor(), [&in](const std::exception_ptr& error) { in.broken(error); });
  in.thread = std::thread{[&in] { in.run(); }};
  return std::unique_ptr<LineHost>{new LineHost{std::move(inside)}};
}

LineHost::~LineHost() { finish("the station"); }

void LineHost::request(LineRequest request) {
  boost::asio::post(inside_->io, [in = inside_.get(), request = std::move(request)]() mutable {
    in->line->request(std::move(request));
  });
}

std::shared_ptr<const LineView> LineHost::view() const {
  const std::lock_guard lock{inside_->view_lock};
  return inside_->view;
}

void LineHost::finish(const std::string& who) {
  std::call_once(inside_->finished, [&] {
    Inside& in = *inside_;
    boost::asio::post(in.io, [&in, who] {
      asio::co_spawn(in.io, in.line->finish(who), [&in](const std::exception_ptr& error) {
        if (error) in.broken(error);
        in.io.stop();
      });
    });
    in.thread.join();
  });
}

const Configuration& LineHost::configuration() const { return inside_->configuration; }
const std::vector<ClosedLate>& LineHost::closed_late() const { return inside_->closed_late; }
std::string LineHost::ledger_path() const { return inside_->ledger_file; }

}  // namespace probewright::sequence
