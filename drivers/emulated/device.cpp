#include "drivers/emulated/device.h"

#include <boost/asio/error.hpp>
#include <boost/system/system_error.hpp>

#include "drivers/emulated/deviates.h"
#include "station/base/numbers.h"

namespace probewright::emulated {

std::string_view to_text(DeviceKind kind) { return kind == DeviceKind::phantom ? "phantom" : "adapter"; }

std::string to_text(const DeviceId& device) {
  return "nest" + std::to_string(device.nest) + "-" + std::string(to_text(device.kind));
}

std::optional<DeviceId> parse_device(std::string_view text) {
  constexpr std::string_view prefix = "nest";
  const auto dash = text.find('-');
  if (!text.starts_with(prefix) || dash == std::string_view::npos) return std::nullopt;
  const auto nest = parse_integer(text.substr(prefix.size(), dash - prefix.size()));
  if (!nest || *nest < 1 || *nest > 99) return std::nullopt;
  for (const DeviceKind kind : {DeviceKind::phantom, DeviceKind::adapter}) {
    if (text.substr(dash + 1) == to_text(kind)) return DeviceId{static_cast<int>(*nest), kind};
  }
  return std::nullopt;
}

asio::awaitable<void> send_or_drop(wire::Port& port, wire::LineClock& clock, std::span<const std::byte> bytes) {
  constexpr double slowest_bytes_per_s = 960.0;  // 9600 baud
  const double patience_s = 1.0 + static_cast<double>(bytes.size()) / slowest_bytes_per_s;
  try {
    co_await port.write_all(bytes, clock.steady_now() + from_seconds(patience_s));
  } catch (const wire::DeadlinePassed&) {  // nobody reads
  }
}

void end_of_coroutine(std::exception_ptr exception) {
  if (!exception) return;
  try {
    std::rethrow_exception(exception);
  } catch (const boost::system::system_error& error) {
    if (error.code() != asio::error::operation_aborted) throw;
  }
}

std::uint32_t boot_number(std::uint64_t seed, const DeviceId& device, int start) {
  const std::uint64_t bits = named_seed(seed, to_text(device) + " start " + std::to_string(start));
  return static_cast<std::uint32_t>(bits % 2147483647u) + 1u;
}

}  // namespace probewright::emulated
