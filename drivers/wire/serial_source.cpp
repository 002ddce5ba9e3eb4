#include "drivers/wire/serial_source.h"

#include "drivers/wire/serial_port.h"

namespace probewright::wire {

namespace {

boost::asio::awaitable<std::unique_ptr<Port>> open_port(boost::asio::any_io_executor executor, const LineClock& clock,
                                                        std::string path, unsigned baud) {
  auto port = open_serial(executor, clock, path, static_cast<int>(baud));
  if (!port) throw ProblemError(port.error());
  co_return std::move(*port);
}

}  // namespace

PortSource serial_source(boost::asio::any_io_executor executor, const LineClock& clock, std::string path,
                         unsigned baud) {
  return [executor, &clock, path = std::move(path), baud] { return open_port(executor, clock, path, baud); };
}

}  // namespace probewright::wire
