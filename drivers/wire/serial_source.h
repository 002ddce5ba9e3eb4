#pragma once
#include <boost/asio/any_io_executor.hpp>
#include <string>

#include "drivers/wire/line_clock.h"
#include "drivers/wire/link.h"

namespace probewright::wire {

/// Opens a serial port whenever a driver asks for it. The clock must outlive what comes out.
PortSource serial_source(boost::asio::any_io_executor executor, const LineClock& clock, std::string path,
                         unsigned baud);

}  // namespace probewright::wire
