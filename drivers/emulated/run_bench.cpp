#include "drivers/emulated/run_bench.h"

#include <boost/asio/co_spawn.hpp>
#include <boost/asio/io_context.hpp>
#include <boost/asio/signal_set.hpp>
#include <cmath>
#include <csignal>
#include <filesystem>
#include <optional>
#include <ostream>

#include "drivers/emulated/control_socket.h"
#include "drivers/emulated/truth_file.h"
#include "drivers/wire/asio_clock.h"
#include "drivers/wire/pty_master.h"
#include "drivers/wire/serial_port.h"
#include "station/base/numbers.h"

namespace probewright::emulated {
namespace {

namespace fs = std::filesystem;

std::optional<Problem> impossible(const RunBenchOptions& options) {
  const auto because = [](const std::string& reason) { return Problem{"bench_options", "", {{"reason", reason}}}; };
  const BenchOptions& bench = options.bench;
  if (bench.nests < 1 || bench.nests > 16) return because("a bench has 1 to 16 nests");
  if (!(bench.speed >= 0.1 && bench.speed <= 1000.0)) return because("the speed is 0.1 to 1000");
  if (bench.baud < 0) return because("the baud rate is a whole number above 0, or 0 for no pacing");
  if (!(bench.ambient_degC >= -20.0 && bench.ambient_degC <= 80.0)) return because("a room has -20 to 80 degC");
  if (options.folder.empty()) return because("no folder for the ports is named");
  return std::nullopt;
}

Result<void> make_folder(const std::string& folder) {
  std::error_code error;
  const bool made = fs::create_directories(folder, error);
  if (!error && made) fs::permissions(folder, fs::perms::owner_all, error);
  if (!error && !fs::is_directory(folder)) error = std::make_error_code(std::errc::not_a_directory);
  if (error) return Problem{"bench_folder", "", {{"folder", folder}, {"reason", error.message()}}};
  return {};
}

/// "nest:serial", the nest before the first colon.
Result<void> seat(Bench& bench, const std::string& seat) {
  const auto colon = seat.find(':');
  const auto nest = parse_integer(std::string_view(seat).substr(0, colon));
  if (colon == std::string::npos || !nest) {
    return Problem{"bench_options", "", {{"reason", "\"" + seat + "\" is no seat; write 1:AQ20-048-00001"}}};
  }
  const std::string serial = seat.substr(colon + 1);
  const auto model = model_of_serial(serial);
  if (!model) return Problem{"bench_unknown_model", "", {{"model", serial}, {"models", known_models()}}};
  return bench.seat(static_cast<int>(*nest), serial, *model);
}

/// Makes the lines of a running bench: own pseudo-terminals, or ttys that others made.
class Lines {
 public:
  Lines(asio::any_io_executor executor, wire::LineClock& clock, const RunBenchOptions& options)
      : executor_(std::move(executor)), clock_(clock), options_(options) {}

  std::string path(const DeviceId& device) const {
    return (fs::path(options_.attach.empty() ? options_.folder : options_.attach) / to_text(device)).string();
  }

  Result<std::unique_ptr<wire::Port>> make(const DeviceId& device) const {
    if (!options_.attach.empty()) {
      return wire::open_serial(executor_, clock_, path(device), options_.bench.baud > 0 ? options_.bench.baud : 921600);
    }
    auto master = wire::PtyMaster::create(executor_, clock_, path(device));
    if (!master) return master.error();
    return std::unique_ptr<wire::Port>(*std::move(master));
  }

 private:
  asio::any_io_executor executor_;
  wire::LineClock& clock_;
  const RunBenchOptions& options_;
};

/// A line that was lost from outside is taken up again as soon as it can be.
asio::awaitable<void> take_up_again(std::weak_ptr<Bench> bench, wire::LineClock* clock, DeviceId device) {
  while (true) {
    co_await clock->wait_until(clock->steady_now() + std::chrono::milliseconds(200));
    const auto alive = bench.lock();
    if (!alive || alive->plug(device)) co_return;
    if (alive->cable_pulled(device)) co_return;  // hands did that; they will plug it in
  }
}

}  // namespace

Result<void> run_bench(const RunBenchOptions& options, std::ostream& out) {
  if (const auto problem = impossible(options)) return *problem;
  if (auto made = make_folder(options.folder); !made) return made.error();
  asio::io_context io{1};
  wire::AsioClock clock{io.get_executor(), options.bench.speed};
  const Lines lines{io.get_executor(), clock, options};
  const auto bench = std::make_shared<Bench>(io.get_executor(), clock, options.bench);

  std::optional<Problem> trouble;
  const auto write_truth = [&] {
    if (options.truth_file.empty()) return;
    if (auto written = write_truth_file(options.truth_file, options.bench.seed, bench->truths()); !written) {
      trouble = written.error();
      io.stop();
    }
  };
  bench->on_first_seat([&](const std::string&) { write_truth(); });
  bench->on_lost(
      [&](const DeviceId& device) { asio::co_spawn(io, take_up_again(bench, &clock, device), end_of_coroutine); });

  if (auto hosted = bench->host([&](const DeviceId& device) { return lines.make(device); }); !hosted) {
    return hosted.error();
  }
  for (const std::string& wanted : options.seats) {
    if (auto seated = seat(*bench, wanted); !seated) return seated.error();
  }
  write_truth();
  const std::string control =
      options.control.empty() ? (fs::path(options.folder) / "control").string() : options.control;
  auto socket = ControlSocket::listen(io.get_executor(), control, *bench);
  if (!socket) return socket.error();

  asio::signal_set signals{io, SIGINT, SIGTERM, SIGHUP};
  signals.async_wait([&](const boost::system::error_code& error, int) {
    if (!error) io.stop();
  });
  for (const DeviceId& device : bench->devices()) out << to_text(device) << ' ' << lines.path(device) << '\n';
  out << "control " << control << '\n' << "ready" << std::endl;
  if (!trouble) io.run();
  if (trouble) return *trouble;
  return {};
}

}  // namespace probewright::emulated
