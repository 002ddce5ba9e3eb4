#include "drivers/emulated/hosted_bench.h"

#include <boost/asio/co_spawn.hpp>
#include <filesystem>

#include "drivers/emulated/truth_file.h"
#include "drivers/wire/pty_master.h"
#include "drivers/wire/serial_port.h"
#include "station/base/numbers.h"

namespace probewright::emulated {
namespace {

namespace fs = std::filesystem;

Result<void> make_folder(const std::string& folder) {
  std::error_code error;
  const bool made = fs::create_directories(folder, error);
  if (!error && made) fs::permissions(folder, fs::perms::owner_all, error);
  if (!error && !fs::is_directory(folder)) error = std::make_error_code(std::errc::not_a_directory);
  if (error) return Problem{"bench_folder", "", {{"folder", folder}, {"reason", error.message()}}};
  return {};
}

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

HostedBench::HostedBench(asio::any_io_executor executor, wire::LineClock& clock, RunBenchOptions options,
                         std::function<void(Problem)> failed, ActionObserver* observer)
    : executor_(std::move(executor)),
      clock_(clock),
      options_(std::move(options)),
      failed_(std::move(failed)),
      bench_(std::make_shared<Bench>(executor_, clock, options_.bench, observer)) {}

Result<std::unique_ptr<HostedBench>> HostedBench::start(asio::any_io_executor executor, wire::LineClock& clock,
                                                        RunBenchOptions options, std::function<void(Problem)> failed,
                                                        ActionObserver* observer) {
  if (auto made = make_folder(options.folder); !made) return made.error();
  std::unique_ptr<HostedBench> hosted{
      new HostedBench(std::move(executor), clock, std::move(options), std::move(failed), observer)};
  if (auto begun = hosted->begin(); !begun) return begun.error();
  return hosted;
}

Result<void> HostedBench::begin() {
  bench_->on_first_seat([this](const std::string&) {
    if (auto written = write_truth(); !written) failed_(written.error());
  });
  bench_->on_lost([this](const DeviceId& device) {
    asio::co_spawn(executor_, take_up_again(bench_, &clock_, device), end_of_coroutine);
  });
  if (auto hosted = bench_->host([this](const DeviceId& device) { return make_line(device); }); !hosted)
    return hosted.error();
  for (const std::string& wanted : options_.seats)
    if (auto seated = seat(wanted); !seated) return seated.error();
  if (auto played = bench_->play(options_.scenario); !played) return played.error();
  return write_truth();
}

std::string HostedBench::path(const DeviceId& device) const {
  return (fs::path(options_.attach.empty() ? options_.folder : options_.attach) / to_text(device)).string();
}

Result<std::unique_ptr<wire::Port>> HostedBench::make_line(const DeviceId& device) {
  if (!options_.attach.empty())
    return wire::open_serial(executor_, clock_, path(device), options_.bench.baud > 0 ? options_.bench.baud : 921600);
  auto master = wire::PtyMaster::create(executor_, clock_, path(device));
  if (!master) return master.error();
  return std::unique_ptr<wire::Port>(*std::move(master));
}

/// "nest:serial", the nest before the first colon.
Result<void> HostedBench::seat(const std::string& wanted) {
  const auto colon = wanted.find(':');
  const auto nest = parse_integer(std::string_view(wanted).substr(0, colon));
  if (colon == std::string::npos || !nest)
    return Problem{"bench_options", "", {{"reason", "\"" + wanted + "\" is no seat; write 1:AQ20-048-00001"}}};
  const std::string serial = wanted.substr(colon + 1);
  const auto model = model_of_serial(serial);
  if (!model) return Problem{"bench_unknown_model", "", {{"model", serial}, {"models", known_models()}}};
  return bench_->seat(static_cast<int>(*nest), serial, *model);
}

Result<void> HostedBench::write_truth() {
  if (options_.truth_file.empty()) return {};
  return write_truth_file(options_.truth_file, options_.bench.seed, bench_->truths());
}

}  // namespace probewright::emulated
