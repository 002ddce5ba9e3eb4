#pragma once
#include <boost/asio/any_io_executor.hpp>
#include <memory>
#include <string>

#include "drivers/wire/line_clock.h"
#include "drivers/wire/port.h"
#include "station/base/result.h"

namespace probewright::wire {

/// Opens a serial line: 8 data bits, no parity, 1 stop bit, raw, no flow control, at `baud`. It is opened for this
/// process alone (an advisory lock on the device; besides, TIOCEXCL unless it is a pseudo-terminal, whose mark would
/// outlive a killed station). What stood in its buffers is thrown away. Pseudo-terminals are taken too, whoever made
/// them. The clock must outlive the port. Works with real time only (AsioClock).
/// Errors: port_missing, port_not_a_tty, port_busy, port_permission, port_baud (the driver has no such rate),
/// port_failed (with the system's reason).
Result<std::unique_ptr<Port>> open_serial(boost::asio::any_io_executor executor, const LineClock& clock,
                                          const std::string& path, int baud);

}  // namespace probewright::wire
