#include "station/text/serial_source.h"

#include "drivers/wire/serial_port.h"

namespace probewright::text {

namespace {

boost::asio::awaitable<std::unique_ptr<wire::Port>> open_port(boost::asio::any_io_executor executor,
                                                              const wire::LineClock& clock, std::string path,
                                                              unsigned baud) {
  auto port = wire::open_serial(executor, clock, path, static_cast<int>(baud));
  if (!port) throw ProblemError(port.error());
  co_return std::move(*port);
}

}  // namespace

wire::PortSource serial_source(boost::asio::any_io_executor executor, const wire::LineClock& clock, std::string path,
                               unsigned baud) {
  return [executor, &clock, path = std::move(path), baud] { return open_port(executor, clock, path, baud); };
}

}  // namespace probewright::text
