#include "drivers/emulated/run_bench.h"

#include <boost/asio/io_context.hpp>
#include <boost/asio/signal_set.hpp>
#include <csignal>
#include <filesystem>
#include <ostream>

#include "drivers/emulated/control_socket.h"
#include "drivers/wire/asio_clock.h"

namespace probewright::emulated {

Result<void> run_bench(const RunBenchOptions& options, std::ostream& out) {
  if (const auto problem = impossible(options)) return *problem;
  asio::io_context io{1};
  wire::AsioClock clock{io.get_executor(), options.bench.speed};
  std::optional<Problem> trouble;
  auto hosted = HostedBench::start(io.get_executor(), clock, options, [&](Problem problem) {
    trouble = std::move(problem);
    io.stop();
  });
  if (!hosted) return hosted.error();
  const std::string control =
      options.control.empty() ? (std::filesystem::path(options.folder) / "control").string() : options.control;
  auto socket = ControlSocket::listen(io.get_executor(), control, (*hosted)->bench());
  if (!socket) return socket.error();

  asio::signal_set signals{io, SIGINT, SIGTERM, SIGHUP};
  signals.async_wait([&](const boost::system::error_code& error, int) {
    if (!error) io.stop();
  });
  for (const DeviceId& device : (*hosted)->bench().devices())
    out << to_text(device) << ' ' << (*hosted)->path(device) << '\n';
  out << "control " << control << '\n' << "ready" << std::endl;
  io.run();
  if (trouble) return *trouble;
  return {};
}

}  // namespace probewright::emulated
